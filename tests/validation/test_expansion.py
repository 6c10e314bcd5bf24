"""A hole expanded past yield: Nadai 1943 (memory), perfectly plastic, Mises, plane stress; printed values derived."""

import numpy as np
import pytest
from scipy.integrate import solve_ivp

from fatigue.hole.expansion import LARGEST_ZONE, REVERSE_ZONE, nadai_1943, zone_of_pressure
from fatigue.hole.installed import installed
from fatigue.hole.ring import Metal, expand

TABLE = [(1.1, 0.6872, -0.2271), (1.2, 0.7862, -0.4468), (1.3, 0.8749, -0.6598), (1.4, 0.9540, -0.8676)]
SOFT = Metal(72e3, 0.33, 345.0)


@pytest.mark.parametrize(("zone", "pressure", "residual"), TABLE)
def test_table(zone, pressure, residual):
    """Pressure and residual hoop over yield stress."""
    hole = nadai_1943(zone)
    assert float(hole.pressure) == pytest.approx(pressure, abs=5e-5)
    assert float(hole.residual_hoop) == pytest.approx(residual, abs=5e-5)
    assert float(zone_of_pressure(hole.pressure)) == pytest.approx(zone, rel=1e-9)


def test_reverse_yield_and_largest_zone():
    assert pytest.approx(1.4645, abs=5e-5) == REVERSE_ZONE
    assert pytest.approx(1.7512, abs=5e-5) == LARGEST_ZONE
    assert float(nadai_1943(REVERSE_ZONE).pressure) == pytest.approx(1.0, abs=1e-9)
    assert float(nadai_1943(REVERSE_ZONE).residual_hoop) == pytest.approx(-1.0, abs=1e-9)
    assert float(nadai_1943(LARGEST_ZONE).pressure) == pytest.approx(2 / np.sqrt(3), abs=1e-9)


@pytest.mark.parametrize("zone", [1.15, 1.4, 1.7])
def test_profile_by_integrating_equilibrium(zone):
    """d(radial)/dr = (hoop - radial)/r with Mises' yield, from the elastic boundary inwards."""

    def slope(r, radial):
        hoop = radial / 2 + np.sqrt(np.maximum(1 - 0.75 * radial**2, 0.0))
        return (hoop - radial) / r

    radii = np.linspace(zone, 1.0, 9)
    path = solve_ivp(slope, (zone, 1.0), [-1 / np.sqrt(3)], t_eval=radii, rtol=1e-11, atol=1e-13)
    np.testing.assert_allclose(nadai_1943(zone, radii).radial, path.y[0], atol=1e-8)
    assert -path.y[0, -1] == pytest.approx(float(nadai_1943(zone).pressure), abs=1e-8)


def test_residual_is_in_equilibrium():
    """The residual hoop of one side carries no net force, short of reverse yield."""
    radius = np.geomspace(1.0, 2000.0, 200_001)
    hoop = nadai_1943(1.4, radius).residual_hoop
    assert np.trapezoid(hoop, radius) == pytest.approx(0.0, abs=1e-4)


@pytest.mark.parametrize("expansion", [0.0045, 0.006, 0.008])
def test_rings_without_hardening(expansion):
    """The step-by-step solution has Nadai's zone, loaded and residual stresses while unloading stays elastic."""
    hole = expand(SOFT, expansion)
    zone = float(zone_of_pressure(hole.loaded.pressure / 345.0))
    assert zone < REVERSE_ZONE
    radius = hole.loaded.radius
    exact = nadai_1943(zone, radius)
    np.testing.assert_allclose(hole.loaded.hoop / 345.0, exact.hoop, atol=0.02)
    np.testing.assert_allclose(hole.residual.radial / 345.0, exact.residual_radial, atol=0.01)
    assert hole.residual.edge_hoop / 345.0 == pytest.approx(float(nadai_1943(zone).residual_hoop), abs=0.02)


def test_rings_reach_the_largest_pressure():
    """2 sy/sqrt(3) = 398.37 MPa; the rings' straight shape functions give 0.5 % more."""
    assert expand(SOFT, 0.03).loaded.pressure == pytest.approx(345 * 2 / np.sqrt(3), rel=0.006)


def test_rings_yield_in_reverse():
    """Beyond p = sy the edge comes back at -sy and the compression reaches deeper."""
    hole = expand(SOFT, 0.03)
    assert hole.residual.edge_hoop == pytest.approx(-345.0, rel=0.005)
    deep = hole.residual.hoop < -0.9 * 345
    assert hole.residual.radius[deep].max() > 1.08
    width = np.diff(np.geomspace(1.0, 12.0, hole.residual.radius.size + 1))
    outside = hole.residual.radial[-1] * hole.residual.radius[-1]
    assert (hole.residual.hoop * width).sum() == pytest.approx(outside, abs=2.0)


def test_bauschinger_costs_residual_stress():
    """Hardening that moves the yield surface gives less compression at the edge, hardening that grows it gives more."""
    moving, none, growing = (
        expand(Metal(72e3, 0.33, 345.0, slope, share), 0.04).residual.edge_hoop
        for slope, share in ((2000.0, 1.0), (0.0, 1.0), (2000.0, 0.0))
    )
    assert growing < none < moving < -200


def test_elastic_interference_keeps_its_fit():
    """0.5 % presses with 180 MPa, under 345/sqrt(3); 0.8 % yields the hole and presses with less than 288 MPa."""
    light = installed(SOFT, 72e3, 0.33, fit=0.005)
    heavy = installed(SOFT, 72e3, 0.33, fit=0.008)
    assert (light.fit, light.residual_hoop) == (pytest.approx(0.005, rel=1e-6), pytest.approx(0.0, abs=1e-6))
    assert heavy.fit < 0.0078
    assert heavy.residual_hoop < -100
    assert any("yields" in flag for flag in heavy.flags)

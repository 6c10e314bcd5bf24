"""Laws of the pin contact: equilibrium, complementarity, symmetry, scaling, mesh, order of loads."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from fatigue.hole.contact import Pin, PinInHole
from fatigue.hole.edge import edge_maps, pin_in_hole
from fatigue.hole.sheet import sheet_edge

E, NU = 72e3, 0.33
stresses = st.floats(-300, 300).map(lambda v: 0.0 if abs(v) < 1e-3 else v)
fits = st.floats(-0.01, 0.015).map(lambda v: 0.0 if abs(v) < 1e-7 else v)
moduli = st.sampled_from([(45e3, 0.35), (72e3, 0.33), (110e3, 0.31), (205e3, 0.30)])
sheets = st.sampled_from(
    [("wide", 0.0, np.inf), ("row", 0.2, np.inf), ("row", 0.25, 2.0), ("strip", 0.3, 3.0), ("strip", 0.5, np.inf)]
)


def ready(sheet, pin):
    return pin_in_hole(*sheet, E, NU, *pin)


def gap_by_harmonics(sheet, pin, contact, bypass, bearing, fit):
    """The gap by the printed harmonics, one by one, apart from the solver's matrices."""
    theta, pressure = contact.theta, contact.pressure[0]
    size = theta.size - 1
    weight = np.ones(size + 1)
    weight[[0, -1]] = 0.5
    gap = -fit - contact.shift[0] * np.cos(theta)
    answers = sheet_edge(*sheet, NU)
    low = np.zeros(answers.opening_pressure.shape[1])
    for n in range(size + 1):
        p = 2 / size * (weight * pressure * np.cos(n * theta)).sum() * (0.5 if n in (0, size) else 1.0)
        if n < low.size:
            low[n] = p
        if n == 0:
            gap = gap + p * ((1 + NU) / E + (1 - pin[1]) / pin[0])
        elif n > 1:
            plate = -n * (1 + NU) / (2 * (n + 1)) + (n + 2 + NU * (n - 2)) / (2 * (n - 1))
            shank = n * (1 + pin[1]) / (2 * (n - 1)) - (n - 2 + pin[1] * (n + 2)) / (2 * (n + 1))
            gap = gap + p * (plate / E + shank / pin[0]) * np.cos(n * theta)
    low[1] = 2 / np.pi * bearing
    smooth = answers.opening_pressure @ low + answers.opening_remote * bypass
    smooth[1] = 0.0
    return gap + smooth @ np.cos(np.outer(np.arange(low.size), theta)) / E


@given(sheets, moduli, stresses, stresses, fits)
def test_equilibrium_and_complementarity(sheet, pin, bypass, bearing, fit):
    contact = ready(sheet, pin).solve(bypass, bearing, fit)
    pressure, theta = contact.pressure[0], contact.theta
    scale = abs(bypass) + abs(bearing) + abs(fit) * E + 1e-9
    assert np.trapezoid(pressure * np.cos(theta), theta) == pytest.approx(bearing, abs=1e-6 * scale)
    assert pressure.min() >= 0
    gap = gap_by_harmonics(sheet, pin, contact, bypass, bearing, fit)
    # the first harmonic of the pressure's own opening is part of the pin's movement
    apart = gap - contact.gap[0]
    along = (apart * np.cos(theta) * np.r_[0.5, np.ones(theta.size - 2), 0.5]).sum() / ((theta.size - 1) / 2)
    # the sheet's answers are made reciprocal before they are solved with: 1e-4 of an opening of stress/E
    np.testing.assert_allclose(apart - along * np.cos(theta), 0.0, atol=1e-4 * scale / E)
    assert contact.gap.min() >= 0
    assert (pressure * contact.gap[0]).max() == 0.0


@given(moduli, stresses, stresses, fits)
def test_turning_the_pin_load_mirrors_the_edge(pin, bypass, bearing, fit):
    hole = ready(("wide", 0.0, np.inf), pin)
    one, other = hole.solve(bypass, bearing, fit), hole.solve(bypass, -bearing, fit)
    scale = abs(bypass) + abs(bearing) + abs(fit) * E
    np.testing.assert_allclose(one.hoop[0], other.hoop[0, ::-1], atol=1e-5 * scale + 1e-9)


@given(sheets, moduli, stresses, stresses, fits, st.floats(0.05, 20.0))
def test_loads_and_fit_scale_together(sheet, pin, bypass, bearing, fit, factor):
    hole = ready(sheet, pin)
    one = hole.solve(bypass, bearing, fit)
    other = hole.solve(factor * bypass, factor * bearing, factor * fit)
    scale = abs(bypass) + abs(bearing) + abs(fit) * E
    np.testing.assert_allclose(other.hoop / factor, one.hoop, atol=1e-6 * scale + 1e-9)


@given(moduli, stresses, stresses, fits, st.floats(0.2, 5.0))
def test_stiffness_scales_out_with_the_fit(pin, bypass, bearing, fit, factor):
    sheet = sheet_edge("row", 0.2, np.inf, NU)
    one = PinInHole(sheet, E, Pin(*pin)).solve(bypass, bearing, fit)
    other = PinInHole(sheet, factor * E, Pin(factor * pin[0], pin[1])).solve(bypass, bearing, fit / factor)
    scale = abs(bypass) + abs(bearing) + abs(fit) * E
    np.testing.assert_allclose(other.hoop, one.hoop, atol=1e-6 * scale + 1e-9)


@given(sheets, moduli, stresses, stresses, fits)
def test_mesh_independence(sheet, pin, bypass, bearing, fit):
    """Half the spacing moves the peak by under 3 % and the hoop away from an end of contact by under 2 %.

    The 3 % are those of a loose, soft pin, whose contact is a few degrees wide.
    """
    answers = sheet_edge(*sheet, NU)
    coarse = ready(sheet, pin).solve(bypass, bearing, fit)
    fine = PinInHole(answers, E, Pin(*pin), 361).solve(bypass, bearing, fit)
    scale = max(abs(fine.hoop).max(), 1e-9)
    assert abs(coarse.hoop.max() - fine.hoop.max()) <= 0.03 * scale
    away = (
        np.convolve(np.abs(np.diff(coarse.closed[0].astype(int), prepend=coarse.closed[0][0])), np.ones(9), "same") == 0
    )
    assert (np.abs(coarse.hoop[0] - fine.hoop[0, ::2])[away] <= 0.02 * scale).all()


@given(sheets, moduli, st.floats(-1, 1), st.floats(-3, 3), fits)
def test_a_map_is_its_single_solutions(sheet, pin, bypass, bearing, fit):
    """Following the loads gives what each load gives by itself, whatever came before."""
    hole, levels = ready(sheet, pin), np.linspace(0, 120, 13)
    followed = hole.solve(bypass * levels, bearing * levels, fit).hoop
    single = np.array([hole.solve(bypass * s, bearing * s, fit).hoop[0] for s in levels])
    np.testing.assert_allclose(followed, single, atol=1e-5 * (np.abs(single).max() + 1e-9))


@given(moduli, st.floats(-100, 100), st.floats(0, 300))
def test_more_interference_presses_harder(pin, bypass, bearing):
    """The pressure summed around the edge is the slope of a convex energy in the fit."""
    hole = ready(("row", 0.2, np.inf), pin)
    contact = hole.solve(bypass, bearing, np.linspace(-0.004, 0.012, 9))
    summed = np.trapezoid(contact.pressure, contact.theta, axis=1)
    assert np.all(np.diff(summed) >= -1e-6 * (1 + summed.max()))


@given(st.floats(0.1, 1.0), st.floats(0.0, 3.0), st.floats(0.0, 1.0), st.floats(-0.005, 0.01))
def test_edge_map_without_bending_has_one_treatment(bypass, bearing, bend, fit):
    levels = np.linspace(-40, 100, 15)[None]
    common = {
        "bypass": bypass * levels, "bearing": bearing * levels, "edge": "row", "width_ratio": 0.2, "modulus": E,
        "poisson": NU, "pin_modulus": E, "pin_poisson": NU, "fit": fit, "k_bend": 1.9,
    }  # fmt: skip
    flat = edge_maps(bend=0 * levels, **common)
    np.testing.assert_array_equal(flat.resisted, flat.outside)
    bent = edge_maps(bend=bend * levels, **common)
    side = bent.theta == 90.0
    np.testing.assert_allclose(bent.outside[0, side], flat.outside[0, side] + 1.9 * bend * levels, atol=1e-9)

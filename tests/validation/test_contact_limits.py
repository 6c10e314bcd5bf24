"""Closed-form limits of the pin contact in a wide sheet: Kirsch 1898 and Lame's thick ring (memory), derived from them.

Aluminium sheet E = 72 000 MPa, nu = 0.33. With contact kept all round the harmonics do not mix, and everything is in
closed form; the printed values are worked out from those forms.
"""

import numpy as np
import pytest

from fatigue.hole.contact import Pin, PinInHole
from fatigue.hole.edge import contact_ends, pin_in_hole
from fatigue.hole.sheet import wide_sheet

SHEET = 72e3, 0.33
ALUMINIUM, TITANIUM, STEEL = Pin(72e3, 0.33), Pin(110e3, 0.31), Pin(205e3, 0.30)


def hole(pin, points=181):
    return PinInHole(wide_sheet(SHEET[1]), SHEET[0], pin, points)


def fit_for(pin, pressure):
    """Diametral interference that gives a pressure, Lame."""
    return pressure * ((1 + SHEET[1]) / SHEET[0] + (1 - pin.poisson) / pin.modulus)


@pytest.mark.parametrize(("pin", "pressure"), [(ALUMINIUM, 180.00), (STEEL, 228.45)])
def test_interference_pressure(pin, pressure):
    """0.5 % diametral."""
    contact = hole(pin).solve(0.0, 0.0, 0.005)
    np.testing.assert_allclose(contact.pressure, pressure, atol=0.005)
    np.testing.assert_allclose(contact.hoop, pressure, atol=0.005)


@pytest.mark.parametrize(
    ("pin", "factor", "needed"), [(ALUMINIUM, 1.7500, 1.2500), (TITANIUM, 1.5611, 1.4389), (STEEL, 1.3361, 1.6639)]
)
def test_range_factor_with_contact_kept(pin, factor, needed):
    """Range at 90 deg over remote stress while the fit pressure exceeds `needed` times it; separation just below."""
    ready = hole(pin)
    for share, kept in ((1.001, True), (0.98, False)):
        contact = ready.solve([0.0, 100.0], 0.0, fit_for(pin, share * needed * 100.0))
        assert contact.closed[1].all() == kept
        rise = (contact.hoop[1] - contact.hoop[0])[90] / 100.0
        assert rise == pytest.approx(factor, abs=5e-5 if kept else 0.02)


def test_pin_load_adds_to_the_pressure_needed():
    """Contact is kept while the fit pressure exceeds 1.25 S + |p1|, p1 = 2 F/(pi d t)."""
    ready = hole(ALUMINIUM)
    needed = 1.25 * 60.0 + 2 / np.pi * 150.0
    assert ready.solve(60.0, 150.0, fit_for(ALUMINIUM, 1.001 * needed)).closed.all()
    assert not ready.solve(60.0, 150.0, fit_for(ALUMINIUM, 0.98 * needed)).closed.all()


@pytest.mark.parametrize("pin", [ALUMINIUM, STEEL])
def test_open_hole_comes_back_at_a_large_gap(pin):
    contact = hole(pin).solve([100.0, -100.0], 0.0, -0.05)
    assert not contact.closed.any()
    assert contact.hoop[0, 90] == pytest.approx(300.0, abs=1e-9)
    assert contact.hoop[1, 0] == pytest.approx(100.0, abs=1e-9)


def test_first_yield_of_an_interference():
    """At the edge hoop = -radial = p, so that Mises' equivalent is sqrt(3) p."""
    contact = hole(ALUMINIUM).solve(0.0, 0.0, 0.005)
    hoop, radial = contact.hoop[0, 0], -contact.pressure[0, 0]
    assert np.sqrt(hoop**2 - hoop * radial + radial**2) == pytest.approx(np.sqrt(3) * 180.0, abs=0.01)


def test_point_load_as_the_gap_grows():
    """A narrow contact acts as a point load: 2/pi of the bearing stress at 90 deg; no trace of a cosine is left."""
    ready = hole(ALUMINIUM, 721)
    factors = [ready.solve(0.0, 1.0, fit).hoop[0, 360] for fit in (0.0, -1e-5, -1e-4, -2e-3)]
    assert np.all(np.diff(factors) < 0)
    assert factors[0] == pytest.approx(0.83, abs=0.005)
    assert factors[-1] == pytest.approx(2 / np.pi, rel=0.005)


def test_narrow_contact_is_that_of_two_cylinders():
    """Hertz: half width b = sqrt(4 F R/(pi E*)), R = a/|fit| for a pin nearly as big as its hole, 1/E* = 2/E."""
    fit, bearing = -0.005, 2.0
    ready = hole(ALUMINIUM, 2161)
    _, last = contact_ends(ready.solve(0.0, bearing, fit))
    load, radius, modulus = 2 * bearing, 1 / abs(fit), SHEET[0] / 2
    half_width = np.sqrt(4 * load * radius / (np.pi * modulus))
    assert np.radians(last[0]) == pytest.approx(half_width, rel=0.02)


def test_snug_pin_leaves_most_of_the_open_hole():
    """Found for this project: about 2.7 of 3 in a wide sheet, not 'about 2'; that needs the contact to stay closed."""
    contact = hole(ALUMINIUM).solve(100.0, 0.0, 0.0)
    assert contact.hoop[0].max() / 100.0 == pytest.approx(2.74, abs=0.01)
    first, last = contact_ends(contact)
    assert (first[0], last[0]) == pytest.approx((71.0, 109.0))


def test_snug_pin_in_a_strip():
    """Found for this project: 2.82 of the open 3.15 at d/W = 0.2, by the elements of `test_hole_elements` too."""
    strip = pin_in_hole("strip", 0.2, np.inf, *SHEET, ALUMINIUM.modulus, ALUMINIUM.poisson)
    assert strip.sheet.open_factor == pytest.approx(3.15, abs=0.005)
    assert strip.solve(1.0, 0.0, 0.0).hoop.max() == pytest.approx(2.82, abs=0.005)

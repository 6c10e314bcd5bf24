"""The table of units."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from spectra.units import PAIRS, from_si, pair_of, split_unit, to_si

UNITS = [(pair, unit) for pair in PAIRS for unit in (pair.si, pair.inch)]


@pytest.mark.parametrize(("pair", "unit"), UNITS)
def test_every_unit_is_found_at_the_end_of_a_key(pair, unit):
    assert split_unit(f"some_key_{unit}") == ("some_key", unit)
    assert pair_of(unit) is pair


@pytest.mark.parametrize("key", ["kind", "mm", "pitch_cm", "margin", "cycles_in_flight", "max_mpa"])
def test_keys_without_a_unit(key):
    assert split_unit(key) == (key, None)


def test_exact_factors():
    """From the definitions: 1 in = 25.4 mm, 1 lbf = 0.45359237 kg x 9.80665 m/s2, printed digits of the ksi."""
    assert to_si(1.0, "in") == 25.4
    assert to_si(1.0, "lbf") == pytest.approx(0.45359237 * 9.80665, rel=1e-15)
    assert to_si(1.0, "ksi") == pytest.approx(6.894757293168361, rel=1e-15)
    assert to_si(1.0, "psi") == pytest.approx(6.894757293168361, rel=1e-15)
    assert to_si(1.0, "in_per_lbf") == pytest.approx(25.4 / 4.4482216152605, rel=1e-15)


@given(st.floats(-1e12, 1e12), st.sampled_from(UNITS))
def test_there_and_back(value, unit):
    assert from_si(to_si(value, unit[1]), unit[1]) == pytest.approx(value, rel=1e-15, abs=1e-300)


def test_unknown_unit():
    with pytest.raises(KeyError):
        to_si(1.0, "furlong")

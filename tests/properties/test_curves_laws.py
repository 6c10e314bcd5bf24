"""Laws of the curve of a location: order, scaling, exactness between members, tails."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from fatigue.material.curves import TAILS, CurveFamily
from fatigue.material.library import families, family
from fatigue.material.members import Member

names = st.sampled_from(families())
tails = st.sampled_from(TAILS)
severities = st.floats(1.0, 6.0)
stresses = st.floats(-400.0, 1500.0)


def life(name, severity, tail, low, high):
    return float(family(name).at([severity], tail).life(np.array([[low]]), np.array([[high]]))[0, 0])


@given(names, severities, tails, stresses, st.floats(0.0, 800.0), st.floats(0.0, 300.0))
def test_life_never_rises_with_the_range_at_fixed_maximum(name, severity, tail, high, span, more):
    assert life(name, severity, tail, high - span - more, high) <= life(name, severity, tail, high - span, high)


@given(names, severities, tails, stresses, st.floats(1e-3, 800.0), st.floats(0.0, 300.0))
def test_life_never_rises_with_the_maximum_at_fixed_range(name, severity, tail, high, span, more):
    shifted = life(name, severity, tail, high - span + more, high + more)
    # S_max - S_min is rounded anew at the new maximum
    assert shifted <= life(name, severity, tail, high - span, high) * (1 + 1e-9)


@given(names, severities, tails, stresses, st.floats(0.0, 800.0))
def test_no_tension_no_damage(name, severity, tail, high, span):
    found = life(name, severity, tail, high - span, high)
    if high <= 0 or span == 0:
        assert np.isinf(found)
    else:
        assert found > 0


@given(names, st.floats(1.0, 6.0), tails, st.floats(50.0, 900.0), st.floats(-1.0, 0.9))
def test_beyond_the_family_stress_scales_as_one_over_kt(name, above, tail, high, ratio):
    """Above the last member only the local stress counts."""
    last = family(name).kt[-1]
    assert life(name, last * above, tail, ratio * high, high) == life(name, last, tail, ratio * high, high)


@given(
    st.sampled_from(["2024-T3 sheet", "7075-T6 sheet"]), st.floats(1.0, 5.0), st.floats(4.0, 7.0), st.floats(-1, 0.7)
)
def test_life_is_the_root_at_equal_life(name, severity, log_life, ratio):
    """Interpolating log stress in log K_t at equal life, by root finding on the members themselves."""
    fam = family(name)
    severity = min(severity, float(fam.kt[-1]))
    j = int(np.clip(np.searchsorted(fam.kt, severity, side="right") - 1, 0, fam.kt.size - 2))
    a, b = fam.members[j], fam.members[j + 1]
    w = np.log(severity / a.kt) / np.log(b.kt / a.kt)

    def log_stress(y):
        return (1 - w) * np.log10(a.a4 + 10 ** ((y - a.a1) / a.a2)) + w * np.log10(b.a4 + 10 ** ((y - b.a1) / b.a2))

    exponent = (1 - w) * a.a3 + w * b.a3
    high = 10 ** log_stress(log_life) / (1 - ratio) ** exponent * severity
    wanted = np.log10(high / severity * (1 - ratio) ** exponent)
    root = brentq(lambda y: log_stress(y) - wanted, 3.0, 8.0, xtol=1e-14, rtol=1e-14)
    assert life(name, severity, "continued", ratio * high, high) == pytest.approx(10**root, rel=2e-9)


@given(names, severities, st.floats(50.0, 1000.0), st.floats(-1.0, 0.7))
def test_continued_is_never_longer_than_the_other_tails(name, severity, high, ratio):
    lives = {tail: life(name, severity, tail, ratio * high, high) for tail in TAILS}
    assert lives["continued"] <= lives["limit"] * (1 + 1e-9)
    assert lives["continued"] <= lives["shallower"] * (1 + 1e-9)


@given(st.floats(0.2, 5.0), severities, tails, st.floats(50.0, 900.0))
def test_a_family_in_other_units_gives_the_same_life(factor, severity, tail, high):
    """Scaling every stress by one factor, in the constants and in the cycle, changes nothing."""
    fam = family("2024-T3 sheet")
    members = tuple(Member(m.kt, m.a1 - m.a2 * np.log10(factor), m.a2, m.a3, m.a4 * factor) for m in fam.members)
    other = CurveFamily("scaled", members, fam.tested_cycles, fam.tested_ratio, "", "")
    mine, theirs = (
        f.at([severity], tail).life(np.array([[0.0]]), np.array([[h]]))[0, 0]
        for f, h in ((fam, high), (other, high * factor))
    )
    if np.isfinite(mine) and mine < 1e12:
        assert theirs == pytest.approx(mine, rel=1e-7)
    else:
        assert theirs > 1e11

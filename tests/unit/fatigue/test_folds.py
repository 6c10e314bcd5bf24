"""Maps that rise and fall, against walking the way in small steps."""

import itertools

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

import spectra
from fatigue.folds import by_way_of, spanned, turning_levels

LEVELS = np.array([-40.0, -10.0, 0.0, 20.0, 60.0, 100.0])
BENT = np.array([30.0, 25.0, 0.0, 50.0, 45.0, 200.0])


def test_turns():
    assert turning_levels(BENT, LEVELS).tolist() == [2, 3, 4]
    assert turning_levels(np.sort(BENT), LEVELS).tolist() == []
    assert turning_levels(np.array([0.0, 1e-12, 0.0, 50.0, 60.0, 70.0]), LEVELS).tolist() == []


@given(st.floats(-40, 100), st.floats(-40, 100))
def test_span_is_that_of_the_way_in_small_steps(one, other):
    low, high = sorted([one, other])
    way = np.interp(np.union1d(np.linspace(low, high, 101), LEVELS[(low < LEVELS) & (high > LEVELS)]), LEVELS, BENT)
    found = spanned(BENT, LEVELS, turning_levels(BENT, LEVELS), np.array([low]), np.array([high]))
    assert (found[0][0], found[1][0]) == pytest.approx((way.min(), way.max()), abs=1e-9)


@given(st.lists(st.integers(-40, 100), min_size=2, max_size=12), st.booleans())
def test_history_by_way_of_the_turns_counts_like_one_in_small_steps(values, close):
    values = np.array(values, dtype=float)
    turns = LEVELS[turning_levels(BENT, LEVELS)]
    ends = np.append(values, values[0]) if close else values
    steps = np.concatenate([np.linspace(a, b, 1 + round(abs(b - a))) for a, b in itertools.pairwise(ends)])
    fine, own = (
        spectra.count(np.interp(path, LEVELS, BENT), close).merged()
        for path in (steps, by_way_of(values, turns, close))
    )
    for name in ("low", "high", "count"):
        np.testing.assert_allclose(getattr(own, name), getattr(fine, name), atol=1e-9)

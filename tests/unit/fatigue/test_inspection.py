"""Thresholds and the order of inspection."""

import numpy as np
import pytest
from scipy.stats import norm

import fatigue
from fatigue.case.schema import InspectionTable
from fatigue.inspection import inspection_priority, threshold_factor
from fatigue.scatter import confidence_factor, first_of_many_factor


def test_factor_is_first_of_many_times_confidence():
    factor = threshold_factor(InspectionTable(tests=4, scatter_log10=0.2, reliability=0.9, confidence=0.95))
    z = norm.ppf(1 - 0.9 ** (1 / 25))
    assert factor.first_of_many == pytest.approx(10 ** (0.2 * z), rel=1e-12)
    assert factor.confidence == pytest.approx(10 ** (-0.2 * norm.ppf(0.95) / 2), rel=1e-12)
    assert factor.total == factor.first_of_many * factor.confidence


def test_known_curve_needs_no_confidence():
    assert threshold_factor(InspectionTable()).confidence == 1.0


def test_no_scatter_no_factor():
    assert threshold_factor(InspectionTable(scatter_log10=0.0, tests=1)).total == 1.0


def test_first_of_many_against_drawn_lives():
    lives = 10 ** (0.15 * np.random.default_rng(7).standard_normal((40_000, 25)))
    assert np.quantile(lives.min(axis=1), 0.05) == pytest.approx(first_of_many_factor(0.95, 25, 0.15), rel=0.01)


def test_factors_fall_as_more_is_asked():
    assert (np.diff(first_of_many_factor([0.5, 0.9, 0.99, 0.999999], 25, 0.15)) < 0).all()
    assert (np.diff(first_of_many_factor(0.95, [1, 5, 25, 1000, 10**6], 0.15)) < 0).all()
    assert (np.diff(confidence_factor(0.95, [1, 2, 10, 100], 0.15)) > 0).all()
    assert first_of_many_factor(0.5, 1, 0.3) == pytest.approx(1.0, abs=1e-15)


def test_order_is_share_then_due_then_hidden():
    share = np.array([0.2, 0.9, 0.2, 0.2])
    threshold = np.array([5e4, 9e4, 5e4, 4e4])
    hidden = np.array([False, False, True, False])
    assert inspection_priority(share, threshold, hidden).tolist() == [4, 1, 3, 2]


def test_order_of_endless_thresholds_is_an_order():
    endless = inspection_priority(np.zeros(3), np.full(3, np.inf), np.array([False, True, False]))
    assert endless.tolist() == [2, 1, 3]


@pytest.mark.parametrize("use_credit", [False, True])
def test_threshold_rests_on_the_life_without_credit_unless_asked(lap_text, tmp_path, use_credit):
    text = f"{lap_text}[inspection]\nuse_credit = {str(use_credit).lower()}\n"
    estimate = fatigue.estimate(fatigue.parse_case(text, "lap.toml", tmp_path))
    rows = estimate.rows
    basis = rows["life_flights" if use_credit else "life_no_credit_flights"]
    np.testing.assert_allclose(rows["threshold_flights"], basis * estimate.threshold.total, rtol=1e-12)
    np.testing.assert_allclose(rows["share_used"], 10000 / rows["threshold_flights"], rtol=1e-12)

"""Statistics of the threshold: exact order statistic and normal theory, derived; aluminium scatter is practice."""

import numpy as np
import pytest

from fatigue.scatter import confidence_factor, first_of_many_factor


def test_median_of_the_first_of_twenty():
    assert float(first_of_many_factor(0.5, 20, 0.15)) == pytest.approx(0.5326, abs=5e-5)


def test_one_article_with_known_scatter():
    """Scatter 0.14, 99.9 %, one article, sigma known: a factor of 4.091 on life.

    Reliability and confidence of 99.9 % combine in one normal quantile of the difference of two lives, sqrt(2) sigma.
    """
    single = float(first_of_many_factor(0.999, 1, 0.14))
    assert single == pytest.approx(10 ** (-0.14 * 3.0902), rel=1e-4)
    combined = 10 ** (0.14 * np.sqrt(2) * 3.090232)
    assert combined == pytest.approx(4.091, abs=5e-3) or combined > single


def test_against_simulation():
    random = np.random.default_rng(5)
    first = np.sort(10 ** random.normal(0, 0.15, (40_000, 25)).min(axis=1))
    quantile = first[int(0.05 * first.size)]
    assert float(first_of_many_factor(0.95, 25, 0.15)) == pytest.approx(quantile, rel=0.01)


def test_confidence_of_a_mean_of_tests():
    assert float(confidence_factor(0.95, 4, 0.15)) == pytest.approx(10 ** (-0.15 * 1.644854 / 2), rel=1e-6)
    assert float(confidence_factor(0.5, 1, 0.15)) == pytest.approx(1.0)

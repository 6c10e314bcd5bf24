"""Fits recover what tests were drawn from; 95 % intervals hold it in 92 to 98 of 100 trials; one member left out."""

import numpy as np
import pytest

from fatigue.material.coupons import Coupons
from fatigue.material.family_fit import fit_family
from fatigue.material.family_model import Model
from fatigue.material.library import family

TRUE = {"A1": 11.5, "A2": -3.1, "A3": 0.62, "A4": 80.0, "s": 0.15}


def drawn(seed):
    """Return 48 tests at two stress ratios, stopped at two million cycles."""
    random = np.random.default_rng(seed)
    top = np.tile(np.repeat([330.0, 260.0, 210.0, 175.0, 150.0, 138.0], 4), 2)
    ratio = np.repeat([0.05, 0.4], top.size // 2)
    top = np.where(ratio > 0.2, 1.33 * top, top)
    equivalent = top * (1 - ratio) ** TRUE["A3"]
    location = TRUE["A1"] + TRUE["A2"] * np.log10(equivalent - TRUE["A4"])
    life = 10 ** (location + random.normal(0, TRUE["s"], top.size))
    return Coupons("drawn", "", top, ratio, np.minimum(life, 2e6), life < 2e6, np.full(top.size, 2.0))


def test_the_average_of_many_fits_is_the_truth():
    found = [fit_family(drawn(seed), Model()).members[0] for seed in range(30)]
    at = np.array([150.0, 200.0, 300.0])
    truth = TRUE["A1"] + TRUE["A2"] * np.log10(at - TRUE["A4"])
    mean = np.mean([member.log_life(at) for member in found], axis=0)
    np.testing.assert_allclose(mean, truth, atol=0.03)


@pytest.mark.slow
def test_coverage_of_the_intervals():
    """500 trials; a true share of 95 % gives 92 to 98 % with near certainty."""
    inside = dict.fromkeys(TRUE, 0)
    trials = 500
    for seed in range(trials):
        for name, own in fit_family(drawn(1000 + seed), Model()).intervals(0.95).items():
            low = -np.inf if own.low_open else own.low
            high = np.inf if own.high_open else own.high
            inside[name] += low <= TRUE[name] <= high
    shares = {name: count / trials for name, count in inside.items()}
    print(shares)
    assert all(0.92 <= share <= 0.98 for share in shares.values()), shares


def test_leave_one_member_out():
    """K_t 4 of 2024-T3 from K_t 2 and 5 at equal life, R 0: kept with its error, whatever it is.

    Interpolated stress is 3.6 % low at 1e5 cycles and 11.4 % low at 1e6: lives 1.25 and 3.4 times too short.
    """
    sheet = family("2024-T3 sheet")
    by_kt = {member.kt: member for member in sheet.members}
    share = np.log(4 / 2) / np.log(5 / 2)
    log_life = np.array([5.0, 6.0])
    low, own, high = (np.asarray(by_kt[kt].equivalent(log_life)) for kt in (2.0, 4.0, 5.0))
    guessed = 10 ** ((1 - share) * np.log10(low) + share * np.log10(high))
    np.testing.assert_allclose(guessed / own - 1, LEFT_OUT_STRESS, atol=0.002)
    lives = 10 ** (np.asarray(by_kt[4.0].log_life(guessed)) - log_life)
    np.testing.assert_allclose(lives, LEFT_OUT_LIFE, rtol=0.02)


LEFT_OUT_STRESS, LEFT_OUT_LIFE = [-0.0355, -0.1139], [1.251, 3.379]

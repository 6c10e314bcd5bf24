"""Miner's sum."""

import numpy as np

from fatigue.damage import damage_per_cycle, life_in_flights, shortest


def test_sum_by_hand():
    life = np.array([[1e4, 1e5, np.inf], [2e4, 1e6, 1e7]])
    damage = damage_per_cycle(life, np.array([1.0, 5.0, 1e9]))
    np.testing.assert_allclose(damage, [[1e-4, 5e-5, 0.0], [5e-5, 5e-6, 100.0]], rtol=1e-15)
    np.testing.assert_allclose(life_in_flights(damage.sum(axis=1)), [1 / 1.5e-4, 1 / (100 + 5.5e-5)])


def test_no_damage_is_an_endless_life():
    assert life_in_flights(np.array([0.0]))[0] == np.inf
    np.testing.assert_allclose(life_in_flights(np.array([1e-4]), 0.5), [5e3])


def test_shortest_takes_the_first_of_equals():
    assert shortest(np.array([7e4, 5e4 * (1 + 1e-14), 5e4])) == 1
    assert shortest(np.array([np.inf, 1e5, 9e4])) == 2

"""Strain-life and loops: Coffin 1954, Manson 1953, Masing 1926, Neuber 1961; constants after SAE J1099 (memory).

Printed lives and mean-stress values were derived for this project from the published equations.
"""

import numpy as np
import pytest

from fatigue.material.hysteresis import follow
from fatigue.material.library import strain_life
from fatigue.material.local_strain import Assumptions, local_strain_life
from fatigue.material.loops import closed_loops
from fatigue.material.mean_stress import gerber, goodman, morrow, smith_watson_topper, walker
from fatigue.material.strain import branch_strain, cyclic_strain, life_at_strain, life_strain

K = strain_life("2024-T351")


@pytest.mark.parametrize(("amplitude", "cycles"), [(0.01, 522), (0.005, 1.050e4), (0.003, 2.83e5)])
def test_strain_life(amplitude, cycles):
    assert float(life_at_strain(amplitude, K)) == pytest.approx(cycles, rel=2e-3)


def test_mean_stress():
    found = [goodman(100, 50, 450), gerber(100, 50, 450), morrow(100, 50, 1100), smith_watson_topper(100, 50)]
    found.append(walker(100, 50, 0.56))
    np.testing.assert_allclose(found, [112.500, 101.250, 104.762, 122.474, 119.531], atol=5.1e-4)


def test_an_elastic_notch_keeps_its_elastic_stress():
    found = local_strain_life([[0.0]], [[100.0]], [1.0], K).loops
    assert float(found.stress_high[0, 0]) == pytest.approx(100.0, rel=1e-3)
    assert float(found.strain_range[0, 0]) == pytest.approx(100.0 / K.modulus, rel=1e-3)


def test_a_fully_plastic_life_is_the_plastic_line():
    """Where the elastic strain is below a hundredth, far outside tested lives, the plastic line alone remains."""
    cycles = 0.5e-6
    plastic = K.ductility_coefficient * (2 * cycles) ** K.ductility_exponent
    assert float(life_strain(cycles, K)) == pytest.approx(plastic, rel=0.01)
    assert float(life_at_strain(plastic, K)) == pytest.approx(cycles, rel=0.02)


def test_at_zero_mean_morrow_and_walker_correct_nothing():
    """Smith, Watson and Topper use stress times strain, which agrees only if the constants are compatible."""
    lives = [
        float(local_strain_life([[-400.0]], [[400.0]], [1.0], K, assumptions=Assumptions(mean=mean)).life[0])
        for mean in ("none", "morrow", "walker")
    ]
    np.testing.assert_allclose(lives[1:], lives[0], rtol=1e-6)


def test_loops_of_a_known_sequence_close():
    """Two small loops inside the largest; each closes at the tip it left, and its strain range is Masing's."""
    path = follow([700.0, -100.0, 500.0, 100.0, 600.0, 200.0, 700.0, -100.0], K)
    closed = [(loop.low.elastic, loop.high.elastic) for loop in path.closed]
    np.testing.assert_allclose(sorted(closed), [(-100.0, 700.0), (100.0, 500.0), (200.0, 600.0)], atol=1e-9)
    for loop in path.closed:
        way = float(branch_strain(loop.high.stress - loop.low.stress, K))
        assert loop.high.strain - loop.low.strain == pytest.approx(way, rel=1e-9)
    largest = max(path.closed, key=lambda loop: loop.high.elastic - loop.low.elastic)
    assert largest.high.strain == pytest.approx(float(cyclic_strain(largest.high.stress, K)), rel=1e-9)


def test_the_counted_loops_are_those_of_the_way():
    path = follow([700.0, -100.0, 700.0, -100.0], K)
    counted = closed_loops(np.array([[-100.0]]), np.array([[700.0]]), K)
    assert float(counted.stress_high[0, 0]) == pytest.approx(path.closed[0].high.stress, rel=1e-6)
    assert float(counted.stress_low[0, 0]) == pytest.approx(path.closed[0].low.stress, rel=1e-6)

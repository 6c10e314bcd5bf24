"""Neuber 1961 with the cyclic curve of Ramberg and Osgood 1943 (memory), against a root finder; 2024-T351 constants."""

import numpy as np
import pytest
from scipy.optimize import brentq

from fatigue.hole.relaxation import neuber_stress, surviving

CURVE = 73_100.0, 662.0, 0.070


@pytest.mark.parametrize("elastic", [1.0, 100.0, 345.0, 600.0, 1500.0, -400.0])
def test_against_a_root_finder(elastic):
    e, k, n = CURVE
    root = brentq(lambda s: s**2 / e + s * (s / k) ** (1 / n) - elastic**2 / e, 1e-9, 2000.0, xtol=1e-12)
    assert float(neuber_stress(elastic, *CURVE)) == pytest.approx(np.sign(elastic) * root, rel=1e-9)


def test_an_elastic_notch_keeps_everything():
    assert float(surviving(-100.0, 50.0, -150.0, *CURVE)) == pytest.approx(-100.0, rel=1e-4)
    assert float(surviving(100.0, 150.0, -50.0, *CURVE)) == pytest.approx(100.0, rel=1e-4)


def test_a_high_load_washes_compression_out():
    """The largest load yields the edge in tension, and letting go yields it back."""
    left = [float(surviving(-300.0, top, -300.0, *CURVE)) for top in (250.0, 500.0, 700.0, 900.0, 1200.0)]
    assert np.all(np.diff(left) > 0)
    assert left[0] == pytest.approx(-300.0, rel=0.01)
    assert left[-1] > -60.0


def test_a_deep_low_load_washes_compression_out():
    left = [float(surviving(-300.0, -100.0, low, *CURVE)) for low in (-320.0, -500.0, -700.0)]
    assert np.all(np.diff(left) > 0)
    assert left[-1] > -150.0


def test_tension_is_the_mirror_of_compression():
    here = float(surviving(-300.0, 700.0, -350.0, *CURVE))
    assert float(surviving(300.0, 350.0, -700.0, *CURVE)) == pytest.approx(-here, rel=1e-12)

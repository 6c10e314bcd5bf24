"""Neutral-line bending (Schijve 1972; Hartman and Schijve 1969), numbers derived as a boundary-value solution.

E = 72 000 MPa, free length 150 mm, pinned unless said otherwise. Limits after Goland and Reissner, derived.
"""

from dataclasses import replace

import numpy as np
import pytest

from fatigue.joint import solve_joint
from tests.support import make_doubler, make_lap, make_one_strap


def k_bend(splice, stress, row=0, sheet=0):
    joint = solve_joint(splice)
    i = list(zip(joint.row, joint.sheet, strict=True)).index((row, sheet))
    return joint.bending(np.array([float(stress)]))[i, 0] / stress


@pytest.fixture
def thick():
    return make_lap(rows=3, spacing=28.0, thickness=2.0)


def test_pinned(thick):
    assert k_bend(thick, 100) == pytest.approx(1.15568, abs=5e-6)


def test_clamped(thick):
    assert k_bend(replace(thick, ends="clamped"), 100) == pytest.approx(1.15566, abs=5e-6)


def test_plane_strain_stiffness(thick):
    """With E/(1 - nu^2) for E; nu = 0.33."""
    stiff = [replace(s, material=replace(s.material, modulus=72e3 / (1 - 0.33**2))) for s in thick.sheets]
    assert k_bend(replace(thick, sheets=tuple(stiff)), 100) == pytest.approx(1.18790, abs=5e-6)


@pytest.mark.parametrize(("stress", "value"), [(10, 1.9153), (40, 1.4391), (100, 1.1557), (200, 0.9897)])
def test_falls_with_load(thick, stress, value):
    assert k_bend(thick, stress) == pytest.approx(value, abs=5e-5)


def test_closed_form_of_an_equal_lap(thick):
    stress, t, span, free, modulus = 100.0, 2.0, 56.0, 150.0, 72e3
    a1 = np.sqrt(12 * stress / (modulus * t**2))
    a2 = np.sqrt(12 * stress * t / (modulus * (2 * t) ** 3))
    expected = 3 / (1 + 2 * np.sqrt(2) * np.tanh(a2 * span / 2) / np.tanh(a1 * free))
    assert k_bend(thick, stress) == pytest.approx(expected, rel=1e-9)


def test_light_load_limit(thick):
    assert k_bend(thick, 1e-7) == pytest.approx(3 / (1 + 56 / 300), rel=1e-5)


def test_long_and_highly_loaded_limit():
    assert k_bend(make_lap(rows=3, spacing=500.0, thickness=2.0), 300) == pytest.approx(0.78361, abs=5e-6)


def test_thin_sheet():
    assert k_bend(make_lap(rows=3, spacing=20.0, thickness=1.2), 100) == pytest.approx(1.0659, abs=5e-5)


def test_one_strap():
    splice = make_one_strap()
    assert k_bend(splice, 100, row=0, sheet=0) == pytest.approx(1.4791, abs=5e-5)
    assert k_bend(splice, 100, row=1, sheet=1) == pytest.approx(1.9831, abs=5e-5)


def test_one_sided_doubler():
    splice = make_doubler(rows=2, spacing=50.0, to_centre=50.0)
    assert k_bend(splice, 100) == pytest.approx(0.7798, abs=5e-5)

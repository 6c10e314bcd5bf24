import numpy as np
import pytest
from scipy.optimize import nnls

from fatigue.hole import complementarity
from fatigue.hole.complementarity import UnilateralContact


def made(seed, points=24):
    """A random compliance, decaying away from each point, and loads of either sign."""
    rng = np.random.default_rng(seed)
    root = rng.normal(size=(points, points)) + 4 * np.eye(points)
    return root @ root.T, rng.normal(size=(points, 2)), rng


def by_least_squares(compliance, gap):
    """Force of the same contact with a body that cannot move."""
    upper = np.linalg.cholesky(compliance).T
    return nnls(upper, -np.linalg.solve(upper.T, gap))[0]


@pytest.mark.parametrize("seed", range(8))
@pytest.mark.parametrize("patience", [complementarity.PATIENCE, 0])
def test_against_least_squares(seed, patience, monkeypatch):
    """With many points exchanged at once, and one by one."""
    monkeypatch.setattr(complementarity, "PATIENCE", patience)
    compliance, loads, rng = made(seed)
    held = UnilateralContact(compliance, np.zeros(24), loads, np.zeros(2))
    row = rng.normal(size=(6, 2))
    force, gap, movement = held.follow(row, np.ones(6))
    for i in range(6):
        np.testing.assert_allclose(force[i], by_least_squares(compliance, loads @ row[i]), atol=1e-8)
    np.testing.assert_allclose(gap * force, 0.0, atol=1e-12)
    np.testing.assert_allclose(movement, 0.0)


@pytest.mark.parametrize("seed", range(4))
def test_a_free_body_is_in_equilibrium(seed):
    compliance, loads, rng = made(seed)
    lever = np.cos(np.linspace(0, np.pi, 24))
    body = UnilateralContact(compliance, lever, loads, np.array([0.0, 3.0]))
    row = np.column_stack([rng.normal(size=7), rng.normal(size=7)])
    force, gap, movement = body.follow(row, np.ones(7))
    np.testing.assert_allclose(force @ lever, 3.0 * row[:, 1], atol=1e-5)
    np.testing.assert_allclose(force @ compliance - np.outer(movement, lever) + row @ loads.T, gap, atol=1e-7)
    assert force.min() >= 0
    assert gap.min() >= 0


def test_no_loads_at_all():
    compliance, loads, _ = made(0)
    body = UnilateralContact(compliance, np.ones(24), loads, np.zeros(2))
    force, gap, movement = body.follow(np.zeros((0, 2)), np.zeros(0))
    assert force.shape == gap.shape == (0, 24)
    assert movement.shape == (0,)

"""Newton's method for a likelihood within bounds, and profile-likelihood intervals by it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.stats import chi2

Array = NDArray[np.float64]
Objective = Callable[[Array], tuple[float, Array, Array]]
"""Value, gradient and Hessian at a point; the value is -inf where the point cannot be."""

MOST_STEPS = 200


@dataclass(frozen=True, eq=False)
class Maximum:
    """A maximum within bounds.

    Parameters
    ----------
    point : ndarray, shape (p,)
    value : float
    hessian : ndarray, shape (p, p)
    free : ndarray of bool, shape (p,)
        False where a bound holds the point.
    converged : bool
    """

    point: Array
    value: float
    hessian: Array
    free: NDArray[np.bool_]
    converged: bool


def maximise(objective: Objective, start: Array, lower: Array, upper: Array) -> Maximum:
    """Climb to a maximum by Newton steps, turned uphill where the surface is not concave and cut back at the bounds.

    Parameters
    ----------
    objective : callable
    start : ndarray, shape (p,)
    lower, upper : ndarray, shape (p,)
        Equal where a parameter is held.
    """
    point = np.clip(start, lower, upper)
    value, gradient, hessian = objective(point)
    free = _free(point, gradient, lower, upper)
    if not np.isfinite(value):
        return Maximum(point, -np.inf, hessian, free, False)
    for _ in range(MOST_STEPS):
        free = _free(point, gradient, lower, upper)
        step = np.zeros_like(point)
        if free.any():
            step[free] = _uphill(gradient[free], hessian[np.ix_(free, free)])
        if float(gradient @ step) < 1e-13:
            return Maximum(point, value, hessian, free, True)
        length, moved = 1.0, False
        while length > 1e-10:
            trial = np.clip(point + length * step, lower, upper)
            found = objective(trial)
            if np.isfinite(found[0]) and found[0] > value + 1e-4 * float(gradient @ (trial - point)):
                point, (value, gradient, hessian), moved = trial, found, True
                break
            length *= 0.4
        if not moved:  # rounding hides what is left to climb
            return Maximum(point, value, hessian, free, float(gradient @ step) < 1e-6)
    return Maximum(point, value, hessian, free, False)


def _free(point: Array, gradient: Array, lower: Array, upper: Array) -> NDArray[np.bool_]:
    held = ((point <= lower) & (gradient <= 0.0)) | ((point >= upper) & (gradient >= 0.0)) | (lower == upper)
    return np.asarray(~held)


def _uphill(gradient: Array, hessian: Array) -> Array:
    """Return the Newton step, with directions of the wrong curvature turned round."""
    scale = 1.0 / np.sqrt(np.maximum(np.abs(np.diag(hessian)), 1e-12))
    values, vectors = np.linalg.eigh(-hessian * np.outer(scale, scale))
    safe = np.maximum(np.abs(values), 1e-9 * max(float(np.abs(values).max()), 1e-300))
    return np.asarray(scale * (vectors @ ((vectors.T @ (scale * gradient)) / safe)))


@dataclass(frozen=True)
class Interval:
    """A profile-likelihood interval; an end is open where the likelihood does not fall enough before a bound."""

    low: float
    high: float
    low_open: bool = False
    high_open: bool = False


def profile_interval(
    objective: Objective, best: Maximum, index: int, lower: Array, upper: Array, level: float = 0.95
) -> Interval:
    """Return the values of one parameter whose best likelihood, all others free, is within chi^2/2 of the maximum.

    Parameters
    ----------
    objective : callable
    best : Maximum
    index : int
        Of the parameter.
    lower, upper : ndarray, shape (p,)
    level : float

    References
    ----------
    Venzon and Moolgavkar 1988; key ``venzon-moolgavkar-1988``.
    """
    ends = [_profile_end(objective, best, index, lower, upper, side, float(chi2.ppf(level, 1))) for side in (-1.0, 1.0)]
    return Interval(ends[0][0], ends[1][0], ends[0][1], ends[1][1])


def _profile_end(
    objective: Objective, best: Maximum, index: int, lower: Array, upper: Array, side: float, wanted: float
) -> tuple[float, bool]:
    """Find one end: the signed root of the deviance is nearly straight, so that secants find it in a few fits."""
    at = float(best.point[index])
    bound = float(lower[index] if side < 0 else upper[index])
    if at == bound:
        return bound, True
    direction, spread = _ridge(best, index)
    near, near_value = best.point, at

    def root(value: float) -> float:
        nonlocal near, near_value
        held_low, held_high = lower.copy(), upper.copy()
        held_low[index] = held_high[index] = value
        start = near + direction * (value - near_value)
        found = maximise(objective, start, held_low, held_high)
        if not np.isfinite(found.value):
            found = maximise(objective, near, held_low, held_high)
        if not np.isfinite(found.value):
            return np.inf
        near, near_value = found.point, value
        return float(np.sqrt(max(2.0 * (best.value - found.value), 0.0)))

    goal = float(np.sqrt(wanted))
    inside, inside_root = at, 0.0
    outside: float | None = None
    trial = at + side * goal * spread
    outside_root = np.inf
    for _ in range(60):
        if (trial - bound) * side >= 0.0:
            trial = bound
        value = root(trial) if np.isfinite(trial) else np.inf
        if abs(value - goal) < 1e-6:
            return trial, False
        if value < goal:
            if trial == bound:
                return bound, True
            inside, inside_root = trial, value
        else:
            outside, outside_root = trial, value
        if outside is None:
            growth = goal / inside_root if inside_root > 0.2 else 4.0
            trial = at + (inside - at) * min(growth, 4.0)
        elif np.isfinite(outside_root):
            share = (goal - inside_root) / (outside_root - inside_root)
            trial = inside + (outside - inside) * float(np.clip(share, 0.02, 0.98))
        else:
            trial = (inside + outside) / 2.0
        if abs(trial - inside) <= 1e-9 * max(abs(trial), spread):
            return trial, False
    return trial, False


def _ridge(best: Maximum, index: int) -> tuple[Array, float]:
    """Return how the others follow one parameter near the maximum, and that one's standard error."""
    others = best.free.copy()
    others[index] = False
    direction = np.zeros_like(best.point)
    direction[index] = 1.0
    curvature = float(best.hessian[index, index])
    if others.any():
        inner = best.hessian[np.ix_(others, others)]
        direction[others] = -np.linalg.lstsq(inner, best.hessian[others, index], rcond=None)[0]
        curvature += float(best.hessian[index, others] @ direction[others])
    spread = 1.0 / np.sqrt(-curvature) if curvature < 0.0 else max(abs(float(best.point[index])), 1.0) * 0.1
    return direction, float(spread)

"""Chance of cracks against flights: in a row of holes, and in a splice whose rows are not equally severe."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import betainc, ndtr

Array = NDArray[np.float64]


def cracked_chance(flights: ArrayLike, median: ArrayLike, scatter_log10: ArrayLike) -> Array:
    """Return the chance that one hole has cracked, its life being lognormal; a step where there is no scatter.

    Examples
    --------
    >>> float(cracked_chance(1e5, 1e5, 0.15))
    0.5
    """
    n, m, s = np.broadcast_arrays(*(np.asarray(v, dtype=np.float64) for v in (flights, median, scatter_log10)))
    with np.errstate(divide="ignore", invalid="ignore"):
        z = np.log10(n / m) / s
    return np.asarray(np.where(s > 0.0, ndtr(z), (n >= m).astype(np.float64)))


def order_chance(chance: ArrayLike, holes: ArrayLike, kth: ArrayLike = 1) -> Array:
    """Return the chance that at least k of m alike holes have cracked: the incomplete beta I_p(k, m - k + 1).

    Parameters
    ----------
    chance : array_like
        Of one hole.
    holes, kth : array_like
        m, and k from 1 to m.

    References
    ----------
    Exact order statistic; key ``weakest-link``.

    Examples
    --------
    >>> round(float(order_chance(0.01, 25)), 4)
    0.2222
    """
    p, m, k = (np.asarray(v, dtype=np.float64) for v in (chance, holes, kth))
    if np.any(k < 1) or np.any(k > m):
        raise ValueError("k must lie from 1 to the number of holes")
    return np.asarray(betainc(k, m - k + 1, p))


def splice_chance(by_row: ArrayLike) -> Array:
    """Return the chance of a crack anywhere from independent rows, shape (R, ...) -> (...)."""
    rows = np.asarray(by_row, dtype=np.float64)
    with np.errstate(divide="ignore"):
        return np.asarray(-np.expm1(np.log1p(-rows).sum(axis=0)))


def first_chance(
    median: ArrayLike, holes: ArrayLike, within_log10: float, between_log10: float = 0.0, points: int = 4001
) -> Array:
    """Return the chance of each location that its first crack is the splice's first.

    With S the chance that no hole of a location has cracked, integral of (1 - S_i)' prod S_j over log life. A scatter
    that all locations of a joint share moves them together and changes nothing; without scatter the shortest life is
    first, equal ones share.

    Parameters
    ----------
    median : array_like, shape (L,)
        Life of one hole, infinite where there is no damage [flights].
    holes : array_like, shape (L,) or scalar
    within_log10, between_log10 : float
        Hole to hole within a joint, and joint to joint.

    Returns
    -------
    ndarray, shape (L,)
        Sums to one.

    Examples
    --------
    >>> first_chance([1e5, 1e5], 25, 0.15).round(6).tolist()
    [0.5, 0.5]
    """
    life = np.log10(np.asarray(median, dtype=np.float64))
    m = np.broadcast_to(np.asarray(holes, dtype=np.float64), life.shape)
    if not np.isfinite(life).any():
        raise ValueError("no location has a finite life")
    if within_log10 <= 0.0:
        first = np.isclose(life, life.min(), rtol=0, atol=1e-12)
        return np.asarray(first / first.sum())
    finite = np.isfinite(life)
    bottom = life[finite].min() - 9 * within_log10
    grid = np.linspace(bottom, life[finite].min() + 4 * within_log10, points)
    z = (grid[:, None] - np.where(finite, life, 1e9)) / within_log10
    log_alone = m * np.log(np.clip(ndtr(-z), 1e-300, None))
    alone = -np.expm1(log_alone)
    others = np.exp(log_alone.sum(axis=1, keepdims=True) - log_alone)
    share = ((others[1:] + others[:-1]) / 2 * np.diff(alone, axis=0)).sum(axis=0)
    return np.asarray(share / share.sum())

"""Where a family fit starts: least squares over a grid of the two constants that enter the curve bent."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from fatigue.material.coupons import Coupons

Array = NDArray[np.float64]

EXPONENTS = (0.3, 0.45, 0.6, 0.8)
SHARES = (0.0, 0.4, 0.65, 0.8, 0.9, 0.96)
"""A4 over the least equivalent stress that failed."""


def starting_points(
    coupons: Coupons, kts: Array, form: str, exponent: float | None
) -> Iterator[tuple[Array, Array, float, Array, float]]:
    """Yield A1, A2, A3, A4 (by K_t but for A3) and s to start from, the most promising first.

    Parameters
    ----------
    coupons : Coupons
    kts : ndarray, shape (K,)
    form : str
    exponent : float or None
        A3 where it is held.
    """
    shares = SHARES if form == "handbook" else (0.0,)
    found = []
    for a3 in EXPONENTS if exponent is None else (exponent,):
        seq = coupons.top * (1.0 - coupons.ratio) ** a3
        rows = [
            _best_member(seq[own], coupons.log_life[own], coupons.failed[own], shares) for own in _members(coupons, kts)
        ]
        total = sum(row[3] for row in rows)
        a1, a2, a4 = (np.array([row[column] for row in rows]) for column in range(3))
        s = float(np.sqrt(max(total, 1e-6) / len(coupons)))
        found.append((total, (a1, a2, a3, a4, s)))
    found.sort(key=lambda one: one[0])
    for _, start in found[:2]:
        yield start
    if form == "handbook":  # the power law is a start of its own: the likelihood may have a second hill there
        a3 = found[0][1][2]
        seq = coupons.top * (1.0 - coupons.ratio) ** a3
        rows = [
            _best_member(seq[own], coupons.log_life[own], coupons.failed[own], (0.0,)) for own in _members(coupons, kts)
        ]
        a1, a2, a4 = (np.array([row[column] for row in rows]) for column in range(3))
        yield a1, a2, a3, a4, float(np.sqrt(max(sum(row[3] for row in rows), 1e-6) / len(coupons)))


def _members(coupons: Coupons, kts: Array) -> list[NDArray[np.bool_]]:
    return [coupons.kt == kt for kt in kts]


def _best_member(
    seq: Array, log_life: Array, failed: NDArray[np.bool_], shares: tuple[float, ...]
) -> tuple[float, float, float, float]:
    """Return A1, A2, A4 and the sum of squares of the best start of one K_t; run-outs below the curve count."""
    best = (0.0, -3.0, 0.0, np.inf)
    for share in shares:
        a4 = share * float(seq[failed].min())
        x = np.log10(seq[failed] - a4)
        spread = x - x.mean()
        slope = float(spread @ log_life[failed] / max(float(spread @ spread), 1e-12))
        slope = min(max(slope, -20.0), -0.5)
        a1 = float(log_life[failed].mean() - slope * x.mean())
        above = seq > a4
        expected = np.where(above, a1 + slope * np.log10(np.where(above, seq - a4, 1.0)), np.inf)
        short = np.where(failed, log_life - expected, np.maximum(log_life - expected, 0.0))
        squares = float(np.square(np.where(np.isfinite(short), short, 0.0)).sum())
        if squares < best[3]:
            best = (a1, slope, a4, squares)
    return best

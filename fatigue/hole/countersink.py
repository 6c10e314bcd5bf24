"""The countersunk hole."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

SMALLEST_SHANK = 0.25
"""Smallest straight-shank depth b/t the fit is valid for."""
KNIFE_EDGE = 1 / 3
"""Straight-shank depth b/t below which the edge is thin enough to be called a knife edge (common practice)."""

THICKNESS_RATIO = 0.4, 2.0
"""Span of t/r the fit is valid for."""


def countersink_flags(depth: float, thickness: float, radius: float) -> list[str]:
    """Return what a reader must know of the factor at a countersink, lengths in mm.

    Examples
    --------
    >>> countersink_flags(0.9, 1.2, 2.0)
    ['knife edge: straight shank b/t 0.25']
    """
    straight, ratio = 1 - depth / thickness, thickness / radius
    flags = []
    if straight < KNIFE_EDGE:
        flags.append(f"knife edge: straight shank b/t {straight:.2f}")
    if straight < SMALLEST_SHANK - 1e-9:
        flags.append(f"countersink factor extrapolated below b/t {SMALLEST_SHANK:g}")
    if not THICKNESS_RATIO[0] - 1e-9 <= ratio <= THICKNESS_RATIO[1] + 1e-9:
        low, high = THICKNESS_RATIO
        flags.append(f"countersink factor extrapolated: t/r {ratio:.2f} outside {low:g} to {high:g}")
    return flags


def countersink_factor(depth: ArrayLike, thickness: ArrayLike, radius: ArrayLike) -> NDArray[np.float64]:
    """Return the peak at a 100 deg countersunk hole over that at a plain one.

    1 + 0.429 (1 - b/t)^1.144 (t/r)^0.604 with b the straight part of the hole.

    Parameters
    ----------
    depth, thickness, radius : array_like
        Countersink depth, sheet thickness, hole radius [mm].

    Returns
    -------
    ndarray

    Notes
    -----
    A fit to three-dimensional finite elements, 2 %, valid for b/t >= 0.25 and t/r from 0.4 to 2.

    References
    ----------
    Computed for this project; key ``countersink``.

    Examples
    --------
    >>> round(float(countersink_factor(0.5, 1.0, 1.0)), 3)
    1.194
    """
    t = np.asarray(thickness, dtype=np.float64)
    straight = 1 - np.asarray(depth, dtype=np.float64) / t
    return np.asarray(1 + 0.429 * (1 - straight) ** 1.144 * (t / np.asarray(radius)) ** 0.604)

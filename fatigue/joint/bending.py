"""Secondary bending by the neutral-line model (Schijve 1972; Hartman and Schijve 1969).

The load's line of action is straight between its supports; u(x) is its height above the neutral line of the bent
joint. In a segment of constant section u'' = alpha^2 u with alpha^2 = P/(E I); where the neutral line jumps, u jumps by
as much the other way while u' goes on. Sections are taken per unit width.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


def section(modulus: ArrayLike, thickness: ArrayLike, height: ArrayLike) -> tuple[Array, Array]:
    """Return neutral height and bending stiffness of sheets bent as one solid beam.

    Parameters
    ----------
    modulus, thickness, height : array_like, shape (..., sheets)
        Young's moduli [MPa], thicknesses (0 where a sheet is absent) and heights of the mid-planes [mm].

    Returns
    -------
    neutral_height : ndarray, shape (...)
        [mm]
    stiffness : ndarray, shape (...)
        E I per unit width [N mm].
    """
    e, t, z = (np.asarray(value, dtype=np.float64) for value in (modulus, thickness, height))
    area = (e * t).sum(axis=-1)
    neutral = (e * t * z).sum(axis=-1) / area
    stiffness = (e * (t**3 / 12 + t * (z - neutral[..., None]) ** 2)).sum(axis=-1)
    return neutral, stiffness


def lever_arms(
    length: ArrayLike, stiffness: ArrayLike, neutral_height: ArrayLike, load: ArrayLike, ends: str, symmetric: bool
) -> tuple[Array, Array]:
    """Return the lever arm of the load at both ends of every segment.

    The unknowns are the arms at the stations between the segments; continuity of slope at each makes a tridiagonal
    system, written with alpha/tanh(alpha L) and alpha/sinh(alpha L) so that neither long nor lightly loaded segments
    lose digits, and solved for all load levels and variants at once.

    Parameters
    ----------
    length, stiffness, neutral_height : array_like, shape (..., m)
        Of the m segments in order along the load: length [mm], E I per unit width [N mm], height of the neutral line
        [mm].
    load : array_like, shape (...)
        Tensile load per unit width, at least 0; 0 gives the limit of a light load [N/mm]. Broadcasts with the leading
        dimensions of the segments.
    ends : str
        ``pinned`` or ``clamped``: the far ends of the free lengths.
    symmetric : bool
        The last segment ends at a line of symmetry rather than at a support.

    Returns
    -------
    at_start, at_end : ndarray, shape (..., m)
        Height of the load above the neutral line at each segment's two ends [mm].

    References
    ----------
    Schijve 1972, Hartman and Schijve 1969; keys ``schijve-1972``, ``hartman-schijve-1969``.
    """
    length, stiffness, z, p = (np.asarray(v, dtype=np.float64) for v in (length, stiffness, neutral_height, load))
    alpha = np.sqrt(p[..., None] / stiffness)
    c, s = _slopes(alpha, length)
    m = c.shape[-1]
    jump = np.broadcast_to(z[..., :-1] - z[..., 1:], (*c.shape[:-1], m - 1))

    # arms just before station i = 0 .. m; after it they are larger by the jump
    shape = (*c.shape[:-1], m + 1)
    lower, diagonal, upper, right = (np.zeros(shape) for _ in range(4))
    tilt = np.zeros(shape)
    lower[..., 1:m] = -s[..., :-1]
    diagonal[..., 1:m] = c[..., :-1] + c[..., 1:]
    upper[..., 1:m] = -s[..., 1:]
    right[..., 1:m] = -c[..., 1:] * jump
    right[..., 2:m] += s[..., 1:-1] * jump[..., :-1]
    after_last = jump[..., -1] if m > 1 else 0.0
    if ends == "pinned":
        diagonal[..., 0] = 1.0
    else:
        diagonal[..., 0], upper[..., 0], tilt[..., 0] = c[..., 0], -s[..., 0], -1.0
    if ends == "pinned" and not symmetric:
        diagonal[..., m] = 1.0
    else:
        diagonal[..., m], lower[..., m] = c[..., -1], -s[..., -1]
        right[..., m], tilt[..., m] = s[..., -1] * after_last, 1.0
    arms = _thomas(lower, diagonal, upper, right)
    if ends == "clamped" and not symmetric:
        # both ends keep their direction, so the line of action tilts by what brings the far end back to its height
        per_tilt = _thomas(lower, diagonal, upper, tilt)
        rise = z[..., -1] - z[..., 0]
        total = length.sum(axis=-1)
        free = arms[..., m] - arms[..., 0] + rise
        slope = free / (total - (per_tilt[..., m] - per_tilt[..., 0]))
        arms = arms + slope[..., None] * per_tilt
    at_start = arms[..., :-1].copy()
    at_start[..., 1:] += jump
    return at_start, arms[..., 1:]


def _slopes(alpha: Array, length: Array) -> tuple[Array, Array]:
    """Return alpha/tanh(alpha L) and alpha/sinh(alpha L), 1/L both where alpha L vanishes."""
    y = alpha * length
    light = y < 1e-4
    safe = np.where(light, 1.0, y)
    c = np.where(light, 1 + y**2 / 3, safe / np.tanh(safe)) / length
    s = np.where(light, 1 - y**2 / 6, 2 * safe * np.exp(-safe) / -np.expm1(-2 * safe)) / length
    return c, s


def _thomas(lower: Array, diagonal: Array, upper: Array, right: Array) -> Array:
    """Solve tridiagonal systems along the last axis, all leading ones at once; diagonally dominant, so no pivoting."""
    n = diagonal.shape[-1]
    ratio, value = np.empty_like(diagonal), np.empty_like(diagonal)
    ratio[..., 0] = upper[..., 0] / diagonal[..., 0]
    value[..., 0] = right[..., 0] / diagonal[..., 0]
    for i in range(1, n):
        pivot = diagonal[..., i] - lower[..., i] * ratio[..., i - 1]
        ratio[..., i] = upper[..., i] / pivot
        value[..., i] = (right[..., i] - lower[..., i] * value[..., i - 1]) / pivot
    for i in range(n - 2, -1, -1):
        value[..., i] -= ratio[..., i] * value[..., i + 1]
    return value

"""Turning points of a history: where it turns back, and its two ends."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


def turning_points(values: ArrayLike) -> Array:
    """Return the first value, every reversal and the last value.

    Parameters
    ----------
    values : array_like, shape (n,)
        Finite numbers of any type.

    Returns
    -------
    ndarray, shape (k,)
        Neighbours differ, and directions alternate.

    Raises
    ------
    ValueError
        If a value is not finite.

    Notes
    -----
    Values are compared, never subtracted: no difference can underflow, overflow or wrap round.

    Examples
    --------
    >>> turning_points([0, 1, 1, 2, -1])
    array([ 0.,  2., -1.])
    """
    peaks, valleys = peaks_and_valleys(finite(values))
    return interleaved(peaks, valleys)


def finite(values: ArrayLike) -> Array:
    """Return values as one row of float64.

    Raises
    ------
    ValueError
        If a value is not finite.
    """
    x = np.ascontiguousarray(np.asarray(values).reshape(-1), dtype=np.float64)
    # the smallest and the largest are not finite exactly where any value is not, and cost less to find
    if x.size and not (np.isfinite(x.min()) and np.isfinite(x.max())):
        raise ValueError("values must be finite")
    return x


def peaks_and_valleys(x: Array) -> tuple[Array, Array]:
    """Return the turning points as peaks and valleys that alternate, a peak first.

    A history that begins in a valley gets NaN, which compares with nothing, in place of the peak before it.

    Parameters
    ----------
    x : ndarray, shape (n,)
        Finite.

    Returns
    -------
    peaks, valleys : ndarray
        As many valleys as peaks, or one less.
    """
    if x.size > 1:
        changed = x[1:] != x[:-1]
        if not changed.all():
            x = x[np.concatenate([[True], changed])]
    if x.size < 2:
        return x.copy(), np.empty(0)
    rising = x[1:] > x[:-1]
    top = np.flatnonzero(rising[:-1] > rising[1:])
    bottom = np.flatnonzero(rising[:-1] < rising[1:])
    peaks = _with_ends(x, top, None if rising[0] else x[0], x[-1] if rising[-1] else None)
    valleys = _with_ends(x, bottom, x[0] if rising[0] else None, None if rising[-1] else x[-1])
    return (np.concatenate([[np.nan], peaks]) if rising[0] else peaks), valleys


def _with_ends(x: Array, before: NDArray[np.intp], first: float | None, last: float | None) -> Array:
    """Return the values one after the given places, with the history's own ends where they are given."""
    start = int(first is not None)
    out = np.empty(before.size + start + int(last is not None))
    x[1:].take(before, out=out[start : start + before.size], mode="clip")
    if first is not None:
        out[0] = first
    if last is not None:
        out[-1] = last
    return out


def interleaved(peaks: Array, valleys: Array) -> Array:
    """Return peaks and valleys in the order they come, without a NaN in front."""
    points = np.empty(peaks.size + valleys.size)
    points[0::2], points[1::2] = peaks, valleys
    return points[1:] if points.size and np.isnan(points[0]) else points


def separated(points: Array) -> tuple[Array, Array]:
    """Return turning points as peaks and valleys, a peak first: the reverse of `interleaved`."""
    if points.size < 2:
        return points.copy(), np.empty(0)
    if points[0] > points[1]:
        return np.ascontiguousarray(points[0::2]), np.ascontiguousarray(points[1::2])
    return np.concatenate([[np.nan], points[1::2]]), np.ascontiguousarray(points[0::2])

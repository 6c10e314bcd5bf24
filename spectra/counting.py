"""Rainflow counting (ASTM E1049-85): turning points, nested cycles peeled off, the rest left to `rainflow`.

Counting only compares values: a pair of neighbouring turning points that lies within its two outer neighbours is a
cycle, and taking it out changes nothing else. All such pairs are therefore taken out at once, pass after pass, with
array operations; what no pass can shorten any more (deep nests, the diverging-converging residue) goes to the package.
"""

from __future__ import annotations

import numpy as np
import rainflow
from numpy.typing import ArrayLike, NDArray

from spectra.cycles import Cycles, joined

Array = NDArray[np.float64]

LEAST_YIELD = 0.02
"""Share of the points a pass must remove for another pass to pay."""


def turning_points(values: ArrayLike) -> Array:
    """Return the first value, every reversal and the last value.

    Parameters
    ----------
    values : array_like, shape (n,)
        Finite.

    Returns
    -------
    ndarray, shape (k,)
        Neighbours differ, and directions alternate.

    Raises
    ------
    ValueError
        If a value is not finite.

    Examples
    --------
    >>> turning_points([0, 1, 1, 2, -1])
    array([ 0.,  2., -1.])
    """
    x = np.asarray(values, dtype=np.float64).reshape(-1)
    if not np.isfinite(x).all():
        raise ValueError("values must be finite")
    if x.size < 2:
        return np.array(x)
    x = x[np.concatenate([[True], x[1:] != x[:-1]])]
    if x.size < 3:
        return np.asarray(x)
    rising = x[1:] > x[:-1]
    keep = np.concatenate([[True], rising[1:] != rising[:-1], [True]])
    return np.asarray(x[keep])


def closed(points: Array) -> Array:
    """Return a repeating block's turning points, begun and ended at its largest value."""
    if points.size < 2:
        return points
    top = int(np.argmax(points))
    return turning_points(np.concatenate([points[top:], points[: top + 1]]))


def peel(points: Array) -> tuple[Cycles, Array]:
    """Take nested cycles out of turning points until a pass no longer pays.

    Parameters
    ----------
    points : ndarray
        Turning points.

    Returns
    -------
    cycles : Cycles
        Those taken out, each once.
    rest : ndarray
        Turning points of what remains: its cycles are those still to count.
    """
    found: list[Cycles] = []
    x = points
    while x.size >= 4:
        a, b, c, d = x[:-3], x[1:-2], x[2:-1], x[3:]
        nested = np.where(c > b, (c <= a) & (d <= b), (c >= a) & (d >= b))
        start = np.flatnonzero(nested)
        if start.size:
            # neighbours in a run share a point: take every second of the run
            run = np.concatenate([[True], np.diff(start) > 1])
            position = np.arange(start.size)
            in_run = position - np.maximum.accumulate(np.where(run, position, 0))
            start = start[in_run % 2 == 0]
        if start.size < max(1.0, LEAST_YIELD * x.size):
            break
        first, second = x[start + 1], x[start + 2]
        found.append(Cycles(np.minimum(first, second), np.maximum(first, second), np.ones(start.size)))
        keep = np.ones(x.size, dtype=bool)
        keep[start + 1] = keep[start + 2] = False
        x = x[keep]
    return joined(found), x


def count(values: ArrayLike, close: bool = True) -> Cycles:
    """Count a history's rainflow cycles.

    Parameters
    ----------
    values : array_like, shape (n,)
        Finite. Constant histories, and those of fewer than two values, have no cycles.
    close : bool
        Count the history as a block that repeats, so that every cycle closes. Otherwise what does not close counts as
        half cycles.

    Returns
    -------
    Cycles
        In the order found.

    Raises
    ------
    ValueError
        If a value is not finite.

    References
    ----------
    ASTM E1049-85; McInnes and Meehan 2008; keys ``astm-e1049``, ``mcinnes-meehan-2008``.

    Examples
    --------
    >>> table = count([-2, 1, -3, 5, -1, 3, -4, 4, -2])
    >>> sorted(table.range.tolist())
    [3.0, 4.0, 7.0, 9.0]
    """
    points = turning_points(values)
    if close:
        points = closed(points)
    if points.size < 2:
        return joined([])
    cycles, rest = peel(points)
    return joined([cycles, _count_rest(rest, close)])


def _count_rest(points: Array, close: bool) -> Cycles:
    """Count what is left with the `rainflow` package, on ranks: exact ties, no underflow of differences.

    The package needs three points and alternating ones; a history of two is one half cycle.
    """
    if points.size == 2:
        return Cycles(points.min(keepdims=True), points.max(keepdims=True), np.array([0.5]))
    rank = np.unique(points, return_inverse=True)[1].astype(np.float64)
    found = np.array([(start, end, number) for *_, number, start, end in rainflow.extract_cycles(rank)])
    first, second = points[found[:, 0].astype(np.int64)], points[found[:, 1].astype(np.int64)]
    cycles = Cycles(np.minimum(first, second), np.maximum(first, second), found[:, 2])
    # a closed history ends in the same half cycle twice, up and down: one cycle
    return cycles.merged() if close else cycles

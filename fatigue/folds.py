"""Maps from remote to local stress that rise and fall: what a cycle, or a history, passes on its way."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

SEEN = 1e-9
"""Change of a map, over its largest stress, below which it is rounding."""


def turning_levels(peak: Array, levels: Array) -> NDArray[np.int64]:
    """Return the places of the levels at which a map turns from rising to falling or back.

    Parameters
    ----------
    peak : ndarray, shape (n,)
        Local stress at the levels [MPa].
    levels : ndarray, shape (n,)
        Remote stress, ascending [MPa].

    Examples
    --------
    >>> turning_levels(np.array([20.0, 0.0, 0.0, 90.0]), np.array([-30.0, 0.0, 10.0, 40.0]))
    array([2])
    """
    step = np.diff(peak)
    moving = np.flatnonzero(np.abs(step) > SEEN * np.abs(peak).max(initial=0.0))
    signs = np.sign(step[moving])
    return np.asarray(moving[1:][signs[1:] != signs[:-1]], dtype=np.int64)


def spanned(peak: Array, levels: Array, turns: NDArray[np.int64], low: Array, high: Array) -> tuple[Array, Array]:
    """Return the smallest and the largest local stress between the two ends of cycles.

    A cycle from low to high passes every stress between them, so that where the map turns on the way its ends alone
    would miss a part of the local range.

    Parameters
    ----------
    peak, levels : ndarray, shape (n,)
        The map [MPa].
    turns : ndarray of int
        Places at which it turns.
    low, high : ndarray, shape (k,)
        Remote stress at the ends [MPa].

    Returns
    -------
    smallest, largest : ndarray, shape (k,)
        [MPa]

    Examples
    --------
    >>> peak, levels = np.array([20.0, 0.0, 90.0]), np.array([-30.0, 0.0, 40.0])
    >>> spanned(peak, levels, np.array([1]), np.array([-30.0]), np.array([40.0]))
    (array([0.]), array([90.]))
    """
    ends = np.interp(low, levels, peak), np.interp(high, levels, peak)
    smallest, largest = np.minimum(*ends), np.maximum(*ends)
    for turn in turns:
        passed = (low < levels[turn]) & (levels[turn] < high)
        smallest = np.where(passed, np.minimum(smallest, peak[turn]), smallest)
        largest = np.where(passed, np.maximum(largest, peak[turn]), largest)
    return smallest, largest


def by_way_of(values: Array, stations: Array, close: bool) -> Array:
    """Return a history with a point wherever it passes one of some levels.

    Parameters
    ----------
    values : ndarray, shape (n,)
        In the order flown.
    stations : ndarray
        Levels.
    close : bool
        Whether the way from the last value back to the first belongs to it.

    Examples
    --------
    >>> by_way_of(np.array([-30.0, 40.0]), np.array([0.0]), close=True)
    array([-30.,   0.,  40.,   0.])
    """
    if values.size < 2:
        return values
    path = np.append(values, values[0]) if close else values
    for station in stations:
        above = path - station
        passed = np.flatnonzero(above[:-1] * above[1:] < 0) + 1
        path = np.insert(path, passed, station)
    return path[:-1] if close else path

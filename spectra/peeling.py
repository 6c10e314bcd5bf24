"""Passes that take nested cycles out of a sequence of turning points, all at once.

Four neighbours a, b, c, d with b and c inside a and d hold the cycle (b, c), and taking it out changes no other cycle
(McInnes and Meehan 2008, key ``mcinnes-meehan-2008``). Which ones go first does not matter, so a pass takes out every
one there is. Between equal values the later one counts as the lower, so that no two such cycles share a point.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Pairs = tuple[Array, Array]
"""Lows and highs of closed cycles."""

FEWEST = 256
"""Points below which a pass costs more in calls than it saves."""
LEAST_YIELD = 1 / 16
"""Share of the peaks a pass must take out for another one to pay."""


def peel(peaks: Array, valleys: Array, fewest: int = FEWEST) -> tuple[list[Pairs], Array, Array]:
    """Take nested cycles out, pass after pass, while that pays.

    Parameters
    ----------
    peaks, valleys : ndarray
        Alternating, a peak first; see `turning.peaks_and_valleys`.
    fewest : int
        Stop below so many peaks.

    Returns
    -------
    pairs : list of (ndarray, ndarray)
        Lows and highs of the cycles taken out.
    peaks, valleys : ndarray
        What is left, alternating as before: its cycles are those still to count.
    """
    found: list[Pairs] = []
    while valleys.size > max(1, fewest):
        before = valleys.size
        pair, peaks, valleys = one_pass(peaks, valleys)
        found.append(pair)
        if pair[0].size < LEAST_YIELD * before:
            break
    return found, peaks, valleys


def one_pass(peaks: Array, valleys: Array) -> tuple[Pairs, Array, Array]:
    """Take out every cycle that is nested between its neighbours now."""
    number = valleys.size
    lower_peak = peaks[1:] <= peaks[:-1]
    lower_valley = valleys[1:] <= valleys[:-1]
    # within a fall from peak k to valley k + 1: valley k and peak k + 1
    falling = lower_peak[: number - 1] & lower_valley
    # within a rise from valley k to peak k + 2: peak k + 1 and valley k + 1
    rising = np.zeros(number - 1, dtype=bool)
    inner = min(number - 1, lower_peak.size - 1)
    np.logical_or(lower_valley[:inner], lower_peak[1 : inner + 1], out=rising[:inner])
    np.logical_not(rising[:inner], out=rising[:inner])

    gone_peak = np.zeros(peaks.size, dtype=bool)
    np.logical_or(falling, rising, out=gone_peak[1:number])
    gone_valley = np.zeros(number, dtype=bool)
    gone_valley[:-1] = falling
    gone_valley[1:] |= rising
    high = peaks.take(np.flatnonzero(gone_peak))
    low = valleys.take(np.flatnonzero(gone_valley))
    if not high.size:
        return (low, high), peaks, valleys
    left = peaks.take(np.flatnonzero(~gone_peak)), valleys.take(np.flatnonzero(~gone_valley))
    return (low, high), *left

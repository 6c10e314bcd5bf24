"""Where in a history each counted cycle has its ends."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from spectra.counting import count
from spectra.turning import finite

Index = NDArray[np.intp]


@dataclass(frozen=True, eq=False)
class Places:
    """Counted cycles by the places of their ends.

    Parameters
    ----------
    low, high : ndarray of int, shape (n,)
        Place of each end in the history.
    count : ndarray, shape (n,)
    """

    low: Index
    high: Index
    count: NDArray[np.float64]


def count_places(values: ArrayLike, close: bool = True) -> Places:
    """Count a history's cycles and say where their ends are.

    Counting only compares values, so it is done on their ranks, which are places; equal values rank in the order they
    come.

    Raises
    ------
    ValueError
        If a value is not finite.

    Examples
    --------
    >>> places = count_places([0.0, 5.0, 1.0, 9.0])
    >>> sorted(zip(places.low.tolist(), places.high.tolist()))
    [(0, 3), (2, 1)]
    """
    x = finite(values)
    order = np.argsort(x, kind="stable")
    rank = np.empty(x.size)
    rank[order] = np.arange(x.size)
    cycles = count(rank, close)
    low, high = order[cycles.low.astype(np.intp)], order[cycles.high.astype(np.intp)]
    real = x[low] != x[high]
    return Places(low[real], high[real], cycles.count[real])

"""The counted table: closed cycles with their two extremes and how often they come."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Cycles:
    """Counted cycles.

    Parameters
    ----------
    low, high : ndarray, shape (n,)
        Extremes of each cycle, low <= high, in the unit of what was counted.
    count : ndarray, shape (n,)
        How often each comes; 0.5 for the half cycles of an open history.
    """

    low: Array
    high: Array
    count: Array

    def __post_init__(self) -> None:
        for name in ("low", "high", "count"):
            object.__setattr__(self, name, locked(getattr(self, name)))
        if not self.low.size == self.high.size == self.count.size:
            raise ValueError("low, high and count must be equally long")
        if (self.low > self.high).any():
            raise ValueError("a cycle's low must not be above its high")

    def __len__(self) -> int:
        return self.low.size

    @property
    def range(self) -> Array:
        """High minus low."""
        return self.high - self.low

    @property
    def mean(self) -> Array:
        """Middle of low and high."""
        return self.low + self.range / 2

    @property
    def total(self) -> float:
        """Number of cycles."""
        return float(self.count.sum())

    def scaled(self, factor: float) -> Cycles:
        """Return the cycles of the history times a factor; a negative one turns it over."""
        low, high = self.low * factor, self.high * factor
        return owned(np.minimum(low, high), np.maximum(low, high), self.count)

    def per_flight(self, flights: float) -> Cycles:
        """Return the cycles of one flight out of so many."""
        if not flights > 0:
            raise ValueError("flights must be positive")
        return owned(self.low, self.high, self.count / flights)

    def merged(self) -> Cycles:
        """Return the same table with identical pairs joined, largest range first."""
        if not len(self):
            return self
        order = np.lexsort((self.low, self.high))
        low, high = self.low[order], self.high[order]
        first = np.flatnonzero(np.concatenate([[True], (np.diff(low) != 0) | (np.diff(high) != 0)]))
        count = np.add.reduceat(self.count[order], first)
        low, high = low[first], high[first]
        largest = np.lexsort((-high, -(high - low)))
        return owned(low[largest], high[largest], count[largest])

    def exceedances(self, levels: ArrayLike) -> Array:
        """Return how many cycles cross each level upward: those with low < level <= high."""
        levels = np.asarray(levels, dtype=np.float64)
        by_low, by_high = np.argsort(self.low), np.argsort(self.high)
        begun = np.concatenate([[0.0], np.cumsum(self.count[by_low])])
        done = np.concatenate([[0.0], np.cumsum(self.count[by_high])])
        started = begun[np.searchsorted(self.low[by_low], levels, side="left")]
        finished = done[np.searchsorted(self.high[by_high], levels, side="left")]
        return np.asarray(started - finished)


def locked(values: ArrayLike) -> Array:
    """Return values as one read-only row of float64, copied unless they are that already."""
    row = np.asarray(values)
    if row.flags.writeable or row.ndim != 1 or row.dtype != np.float64:
        row = np.array(values, dtype=np.float64).reshape(-1)
        row.setflags(write=False)
    return row


def owned(low: Array, high: Array, count: Array) -> Cycles:
    """Return a table of rows that nobody else holds: they are locked, not copied."""
    for row in (low, high, count):
        row.setflags(write=False)
    return Cycles(low, high, count)


def joined(tables: list[Cycles]) -> Cycles:
    """Return several tables as one."""
    if len(tables) == 1:
        return tables[0]
    return owned(*(stacked([getattr(table, name) for table in tables]) for name in ("low", "high", "count")))


def stacked(rows: list[Array]) -> Array:
    """Return rows end to end, an empty one if there are none."""
    return np.concatenate(rows) if rows else np.empty(0)

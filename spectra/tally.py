"""Closed cycles added up in bounded memory: exactly while their extremes take few values, in a grid from then on."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from spectra.cycles import Cycles, owned
from spectra.grid import BOUND, POWER, Gridded, grid_for, table_of

Array = NDArray[np.float64]

MOST_LEVELS = 2048
"""Different extremes that are counted exactly: their from-to table takes 32 MB. Recorders of 11 bits have no more."""


class Tally:
    """Cycles added up as they are found.

    Parameters
    ----------
    bottom, top : float
        Least and greatest value of the history.
    bound, power : float
        Of the grid, should one be needed; see `grid.grid_for`.
    """

    def __init__(self, bottom: float, top: float, bound: float = BOUND, power: float = POWER) -> None:
        self._levels = np.empty(0)
        self._table = np.zeros((0, 0), dtype=np.int64)
        self._limits = bottom, top, bound, power
        self._grid = grid_for(*self._limits) if top > bottom else None
        self._cells: NDArray[np.int64] | None = None

    def add(self, low: Array, high: Array) -> None:
        """Add closed cycles."""
        if not low.size:
            return
        if self._cells is None and not self._add_exactly(low, high):
            self._begin_grid()
        if self._cells is not None:
            assert self._grid is not None  # cycles have a range
            self._cells += np.bincount(self._grid.cell(low, high), minlength=self._grid.cells)

    def exact(self) -> Cycles | None:
        """Return the cycles, or None where a grid had to be begun."""
        if self._cells is not None:
            return None
        low, high = np.nonzero(self._table)
        return owned(self._levels[low], self._levels[high], self._table[low, high].astype(np.float64))

    def in_grid(self) -> Gridded:
        """Return the cycles of the grid that was begun."""
        assert self._cells is not None
        assert self._grid is not None
        return table_of(self._grid, self._cells)

    def _add_exactly(self, low: Array, high: Array) -> bool:
        at_low, at_high = self._places(low), self._places(high)
        if at_low is None or at_high is None:
            new = np.unique(np.concatenate([self._levels, low, high]))
            if new.size > MOST_LEVELS:
                return False
            table = np.zeros((new.size, new.size), dtype=np.int64)
            kept = np.searchsorted(new, self._levels)
            table[np.ix_(kept, kept)] = self._table
            self._levels, self._table = new, table
            at_low, at_high = np.searchsorted(new, low), np.searchsorted(new, high)
        side = self._levels.size
        self._table += np.bincount(at_low * side + at_high, minlength=side * side).reshape(side, side)
        return True

    def _places(self, values: Array) -> NDArray[np.intp] | None:
        """Return where values are among the levels, None if one is not."""
        if not self._levels.size:
            return None
        at = np.minimum(np.searchsorted(self._levels, values), self._levels.size - 1)
        return at if (self._levels[at] == values).all() else None

    def _begin_grid(self) -> None:
        so_far = self.exact()
        assert so_far is not None
        assert self._grid is not None
        cells = np.bincount(self._grid.cell(so_far.low, so_far.high), so_far.count, self._grid.cells)
        self._cells = cells.astype(np.int64)

"""A grid of ranges and means for more counted cycles than can be kept, with a bounded effect on damage."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from spectra.cycles import Cycles, owned
from spectra.faults import Fault, InputFaults

Array = NDArray[np.float64]

BOUND = 0.01
"""Share by which the grid may change damage, unless asked otherwise."""
POWER = 5.0
"""Power of the damage law the bound is stated for: near the slope of notched S-N curves between 1e5 and 1e6 cycles."""
SMALLEST = 1e-3
"""Ranges below this share of the largest are counted as this share: safe, and each does under 1e-12 of its damage."""
MOST_CELLS = 20_000_000


@dataclass(frozen=True)
class Grid:
    """Bins of range, each a fixed ratio wide, by bins of mean, all equally wide.

    Parameters
    ----------
    bottom, top : float
        Least and greatest value of what is counted.
    ratio : float
        Upper over lower edge of a range bin.
    ranges, means : int
        Number of bins.
    """

    bottom: float
    top: float
    ratio: float
    ranges: int
    means: int

    @property
    def cells(self) -> int:
        """Number of cells."""
        return self.ranges * self.means

    @property
    def mean_width(self) -> float:
        """Width of a bin of mean."""
        return (self.top - self.bottom) / self.means

    def cell(self, low: Array, high: Array) -> NDArray[np.intp]:
        """Return the cell of each cycle."""
        size = high - low
        with np.errstate(divide="ignore"):
            by_range = np.log((self.top - self.bottom) / size) / np.log(self.ratio)
        by_mean = (low + size / 2 - self.bottom) / self.mean_width
        nth_range = np.clip(by_range, 0, self.ranges - 1).astype(np.intp)
        nth_mean = np.clip(by_mean, 0, self.means - 1).astype(np.intp)
        return np.asarray(nth_range * self.means + nth_mean)


@dataclass(frozen=True, eq=False)
class Gridded:
    """What became of cycles put in a grid.

    Parameters
    ----------
    cycles : Cycles
        One pair for each cell that is not empty, at its middle; cells of the smallest ranges at their upper edge.
    widest, narrowest : Cycles
        The same with every range and mean at the upper (lower) edge of its cell: damage that rises with range and with
        mean lies between theirs.
    grid : Grid
    """

    cycles: Cycles
    widest: Cycles
    narrowest: Cycles
    grid: Grid

    def effect(self, power: float = POWER) -> float:
        """Return the most that the grid changes `power_damage`, as a share of it."""
        least, given, most = (power_damage(table, power) for table in (self.narrowest, self.cycles, self.widest))
        return max(most / given - 1.0, 1.0 - least / given) if given > 0 else 0.0

    def note(self, power: float = POWER) -> str:
        """Say what the grid did, for the reader of the counted table."""
        share = 50 * (self.grid.ratio - 1.0)
        return (
            f"cycles put in a grid of {self.grid.ranges} ranges by {self.grid.means} means: no range moved by more "
            f"than {share:.2g} %, no mean by more than {self.grid.mean_width / 2:.2g}; that changes damage by at most "
            f"{100 * self.effect(power):.2g} % (power {power:g} of range x maximum)"
        )


def grid_for(bottom: float, top: float, bound: float = BOUND, power: float = POWER) -> Grid:
    """Choose the grid that changes damage by no more than a bound.

    Half the bound is left to the range, (1 + half a bin)^power; half to the mean, at the largest cycle.

    Parameters
    ----------
    bottom, top : float
        Least and greatest value of what is counted.
    bound : float
        Share by which damage may change.
    power : float
        Of the damage law.

    Raises
    ------
    InputFaults
        If no grid that fits in memory keeps the bound.

    Examples
    --------
    >>> grid_for(0.0, 100.0).ranges
    3455
    """
    if not (top > bottom and 0 < bound < 1 and power > 0):
        raise ValueError("needs top > bottom, 0 < bound < 1, power > 0")
    half = bound / 2 / power
    ratio = (1 + half) / (1 - half)
    ranges = int(np.ceil(-np.log(SMALLEST) / np.log(ratio))) + 1
    means = int(np.ceil(1 / (2 * half)))
    if ranges * means > MOST_CELLS:
        raise InputFaults(
            "grid",
            [
                Fault(
                    "bound",
                    f"{100 * bound:g} % needs {ranges} ranges by {means} means; {MOST_CELLS:.0e} cells are the most.",
                    "Ask for a wider bound.",
                )
            ],
        )
    return Grid(bottom, top, float(ratio), ranges, means)


def table_of(grid: Grid, counts: NDArray[np.generic]) -> Gridded:
    """Return the cycles of a grid's counts, shape (ranges * means,)."""
    filled = np.flatnonzero(counts)
    nth_range, nth_mean = np.divmod(filled, grid.means)
    upper = (grid.top - grid.bottom) * grid.ratio ** -nth_range.astype(np.float64)
    smallest = nth_range == grid.ranges - 1
    size = np.where(smallest, upper, upper / np.sqrt(grid.ratio))
    mean = grid.bottom + (nth_mean + 0.5) * grid.mean_width
    number = counts[filled].astype(np.float64)
    half = grid.mean_width / 2
    return Gridded(
        _pairs(size, mean, number),
        _pairs(upper, mean + half, number),
        _pairs(np.where(smallest, 0.0, upper / grid.ratio), mean - half, number),
        grid,
    )


def gridded(cycles: Cycles, bound: float = BOUND, power: float = POWER) -> Gridded:
    """Put counted cycles in a grid that changes damage by no more than a bound.

    Raises
    ------
    InputFaults
        If no grid that fits in memory keeps the bound.
    """
    if not len(cycles) or not cycles.range.max() > 0:
        raise ValueError("no cycles to put in a grid")
    grid = grid_for(float(cycles.low.min()), float(cycles.high.max()), bound, power)
    return table_of(grid, np.bincount(grid.cell(cycles.low, cycles.high), cycles.count, grid.cells))


def _pairs(size: Array, mean: Array, number: Array) -> Cycles:
    return owned(mean - size / 2, mean + size / 2, number.copy())


def power_damage(cycles: Cycles, power: float = POWER) -> float:
    """Return the sum of n (range max)^(power/2), a maximum below zero doing none.

    Smith, Watson and Topper's parameter (key ``smith-watson-topper-1970``) in a power law: for comparisons where no
    hole is known.
    """
    return float(np.sum(cycles.count * (cycles.range * np.maximum(cycles.high, 0.0)) ** (power / 2)))

"""Edits of histories and counted tables: each returns a new one, and says what it took away in terms of damage."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from spectra.cycles import Cycles, joined, owned
from spectra.grid import POWER, power_damage
from spectra.places import count_places
from spectra.turning import turning_points

Array = NDArray[np.float64]
Damage = Callable[[Cycles], float]


@dataclass(frozen=True, eq=False)
class Edited:
    """A counted table before and after an edit.

    Parameters
    ----------
    before, after : Cycles
    words : str
        What was done.
    """

    before: Cycles
    after: Cycles
    words: str

    def removed(self, damage: Damage | None = None) -> float:
        """Return the share of the damage that the edit took away; negative where it added some.

        Parameters
        ----------
        damage : callable, optional
            Damage of a table; `grid.power_damage` if left out.
        """
        of = damage or power_damage
        whole = of(self.before)
        return 1.0 - of(self.after) / whole if whole > 0 else 0.0

    def note(self, damage: Damage | None = None, by: str = f"power {POWER:g} of range x maximum") -> str:
        """Say what was done and what it took away, in cycles and in damage."""
        cycles, share = self.before.total - self.after.total, self.removed(damage)
        verb = "takes away" if share >= 0 else "adds"
        gone = f"{cycles:.6g} of {self.before.total:.6g} cycles go"
        return f"{self.words}: {gone}; {verb} {100 * abs(share):.3g} % of the damage ({by})"


def omit_small(cycles: Cycles, width: float) -> Edited:
    """Leave out the cycles whose range is below a width.

    Examples
    --------
    >>> table = Cycles([0.0, 50.0], [90.0, 53.0], [1.0, 500.0])
    >>> omit_small(table, 5.0).after.range
    array([90.])
    """
    kept = cycles.range >= width
    after = owned(cycles.low[kept], cycles.high[kept], cycles.count[kept])
    return Edited(cycles, after, f"ranges below {width:g} left out")


def clip(cycles: Cycles, bottom: float = -np.inf, top: float = np.inf) -> Edited:
    """Cut what goes below a bottom or above a top.

    Cycles of the clipped history: clipping is monotone, so they are the clipped cycles, those without a range left out.

    Raises
    ------
    ValueError
        If the bottom is not below the top.
    """
    if not bottom < top:
        raise ValueError(f"bottom {bottom:g} must be below top {top:g}")
    low, high = np.clip(cycles.low, bottom, top), np.clip(cycles.high, bottom, top)
    kept = low < high
    sides = [text for text, side in ((f"below {bottom:g}", bottom), (f"above {top:g}", top)) if np.isfinite(side)]
    after = owned(low[kept], high[kept], cycles.count[kept]).merged()
    return Edited(cycles, after, f"values {' and '.join(sides)} clipped" if sides else "nothing clipped")


def scale(cycles: Cycles, factor: float) -> Edited:
    """Multiply by a factor; a negative one turns the cycles over."""
    return Edited(cycles, cycles.scaled(factor), f"scaled by {factor:g}")


def repeat(cycles: Cycles, times: float) -> Edited:
    """Count each cycle so many times as often."""
    if not times > 0:
        raise ValueError(f"{times:g} must be greater than 0")
    return Edited(cycles, owned(cycles.low, cycles.high, cycles.count * times), f"repeated {times:g} times")


def join(cycles: Cycles, *others: Cycles) -> Edited:
    """Add other tables: their cycles side by side, without what would close between them."""
    return Edited(cycles, joined([cycles, *others]).merged(), f"joined with {len(others)} more")


def gate(values: ArrayLike, width: float, close: bool = True) -> Array:
    """Return the turning points of a history without the ends of cycles whose range is below a width.

    Counted again, it has the cycles of the history but those. One that repeats begins at its top.

    Parameters
    ----------
    values : array_like, shape (n,)
    width : float
    close : bool
        The history repeats; otherwise only cycles that close within it are taken out.

    Examples
    --------
    >>> gate([0.0, 90.0, 50.0, 52.0, 0.0], 5.0)
    array([90.,  0.])
    """
    points = turning_points(values)
    if close and points.size > 1:  # from the top on; the way back to it is no turning point of its own
        top = int(np.argmax(points))
        points = turning_points(np.concatenate([points[top:], points[: top + 1]]))[:-1]
    places = count_places(points, close)
    small = (points[places.high] - points[places.low] < width) & (places.count == 1.0)
    kept = np.ones(points.size, dtype=bool)
    kept[places.low[small]] = kept[places.high[small]] = False
    return turning_points(points[kept] if kept.any() else points[:1])

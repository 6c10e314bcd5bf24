"""Histories too long for memory: counted block by block, in threads, into a bounded table."""

from __future__ import annotations

import mmap
import os
from collections import deque
from collections.abc import Callable, Iterator
from concurrent.futures import Future, ThreadPoolExecutor
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from spectra.counting import Part, count, count_part, finish, join_parts
from spectra.cycles import Cycles, joined
from spectra.grid import BOUND, POWER
from spectra.tally import Tally

Array = NDArray[np.float64]
Progress = Callable[[int, int], None]

BLOCK = 1 << 19
"""Values a thread counts at a time."""
SHORT = 1 << 21
"""Histories up to so many values are counted whole, all pairs kept."""


@dataclass(frozen=True, eq=False)
class LongCount:
    """Counted cycles of a long history and what a reader should know of them.

    Parameters
    ----------
    cycles : Cycles
        Identical pairs joined.
    notes : tuple of str
        What a grid did, where one was needed.
    effect : float
        The most by which the grid changes damage, as a share; 0 where the table is exact.
    """

    cycles: Cycles
    notes: tuple[str, ...]
    effect: float


def count_long(
    values: NDArray[Any],
    close: bool = True,
    bound: float = BOUND,
    power: float = POWER,
    threads: int | None = None,
    block: int = BLOCK,
    short: int = SHORT,
    on_progress: Progress | None = None,
) -> LongCount:
    """Count a history of any length in bounded memory.

    The same cycles as `count`; where a history is not short and the extremes take more than a few thousand values,
    those that close early are kept in a range-mean grid, and those of the residue, the largest among them, as they are.

    Parameters
    ----------
    values : ndarray, shape (n,)
        Finite. May be a memory map: its pages are given back as they are done.
    close : bool
        Count as a repeating block; see `count`.
    bound, power : float
        Share by which the grid may change damage, and the power of the damage law that is stated for.
    threads : int, optional
        As many as there are cores.
    block : int
        Values a thread counts at a time.
    short : int
        Histories up to so many values are counted whole, all pairs kept.
    on_progress : callable, optional
        Called with values done and in all, both passes counted.

    Returns
    -------
    LongCount

    Raises
    ------
    ValueError
        If a value is not finite.
    InputFaults
        If no grid keeps the bound.

    Examples
    --------
    >>> count_long(np.array([0.0, 5.0, 1.0, 5.0, 0.0])).cycles.range
    array([5., 4.])
    """
    if values.size <= short:
        return LongCount(count(values, close).merged(), (), 0.0)
    tell = on_progress or (lambda done, total: None)
    total = 2 * values.size
    done = 0
    bottom, top = np.inf, -np.inf
    for low, high, size in _in_threads(_extremes, values, block, threads):
        bottom, top, done = min(bottom, low), max(top, high), done + size
        tell(done, total)
    if values.size and not (np.isfinite(bottom) and np.isfinite(top)):
        raise ValueError("values must be finite")
    tally = Tally(bottom, top, bound, power)
    rest = count_part([])
    for part, size in _in_threads(_counted, values, block, threads):
        rest = join_parts([rest, Part(joined([]), part.residue)])
        for cycles in (part.cycles, rest.cycles):
            tally.add(cycles.low, cycles.high)
        rest = Part(joined([]), rest.residue)
        done += size
        tell(done, total)
    ends = finish(rest, close)
    exact = tally.exact()
    if exact is not None:
        return LongCount(joined([exact, ends]).merged(), (), 0.0)
    table = tally.in_grid()
    return LongCount(joined([table.cycles, ends]).merged(), (table.note(power),), table.effect(power))


def _extremes(x: NDArray[Any]) -> tuple[float, float, int]:
    return float(x.min()), float(x.max()), x.size


def _counted(x: NDArray[Any]) -> tuple[Part, int]:
    return count_part(x), x.size


def _in_threads(work: Callable[[Any], Any], values: NDArray[Any], block: int, threads: int | None) -> Iterator[Any]:
    """Yield what `work` makes of each block, in order, a few blocks ahead of the reader."""
    mapping = _mapping(values)
    many = threads or os.cpu_count() or 1
    with ThreadPoolExecutor(many) as pool:
        waiting: deque[Future[Any]] = deque()
        for start in range(0, values.size, block):
            waiting.append(pool.submit(work, values[start : start + block]))
            if len(waiting) > many:
                yield waiting.popleft().result()
                if mapping is not None:
                    mapping.madvise(mmap.MADV_DONTNEED)
        while waiting:
            yield waiting.popleft().result()


def _mapping(values: Any) -> mmap.mmap | None:
    """Return the file mapping behind an array that nobody can write to, if there is one."""
    while isinstance(values, np.ndarray) and not values.flags.writeable:
        values = values.base
    return values if isinstance(values, mmap.mmap) else None

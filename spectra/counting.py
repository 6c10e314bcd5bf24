"""Rainflow counting (ASTM E1049-85): nested cycles peeled off in passes, deep nests closed, the rest to `rainflow`.

Counting only compares values, and a cycle that is nested between its neighbours can be taken out at any time without
changing another. So a history may be cut anywhere, its parts counted on their own in any order, and what is left of
them joined and counted on: `count_part`, `join_parts`, `finish`. `count` does just that with parts that fit the cache.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import rainflow
from numpy.typing import ArrayLike, NDArray

from spectra.cycles import Cycles, joined, owned, stacked
from spectra.nests import close_nests
from spectra.peeling import Pairs, peel
from spectra.turning import finite, interleaved, peaks_and_valleys, separated, turning_points

Array = NDArray[np.float64]

CHUNK = 1 << 16
"""Values counted at a time: half a megabyte stays in the cache."""
FEW = 1024
"""Points few enough to be left to the `rainflow` package."""


@dataclass(frozen=True, eq=False)
class Part:
    """A stretch of history, counted as far as it can be on its own.

    Parameters
    ----------
    cycles : Cycles
        Closed within the stretch.
    residue : ndarray
        The turning points left, the stretch's first and last value among them.
    """

    cycles: Cycles
    residue: Array


def count_part(values: ArrayLike) -> Part:
    """Count a stretch of history as far as it can be on its own.

    Raises
    ------
    ValueError
        If a value is not finite.
    """
    pairs, rest = _reduced(finite(values))
    return Part(_cycles(pairs), rest)


def join_parts(parts: Sequence[Part]) -> Part:
    """Join stretches that follow each other: the same as counting them as one.

    Examples
    --------
    >>> halves = [count_part([0, 5, 2]), count_part([3, 1, 9])]
    >>> whole = join_parts(halves)
    >>> sorted(zip(whole.cycles.low.tolist(), whole.cycles.high.tolist())), whole.residue
    ([(1.0, 5.0), (2.0, 3.0)], array([0., 9.]))
    """
    pairs, rest = _reduced(stacked([part.residue for part in parts]))
    return Part(_cycles(pairs, *(part.cycles for part in parts)), rest)


def finish(part: Part, close: bool = True) -> Cycles:
    """Return all cycles of a history given as one part: those closed, and those of its residue."""
    return joined([part.cycles, _count_rest(part.residue, close)])


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
        Not joined and in no order: see `Cycles.merged`.

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
    x = np.asarray(values).reshape(-1)
    pairs: list[Pairs] = []
    rests: list[Array] = []
    for start in range(0, x.size, CHUNK):
        found, rest = _thinned(x[start : start + CHUNK])
        pairs += found
        rests.append(rest)
    return _cycles(pairs, _count_rest(stacked(rests), close))


def _thinned(x: Array) -> tuple[list[Pairs], Array]:
    """Take nested cycles out of a stretch while that is quick: what is left is short, or a deep nest."""
    pairs, peaks, valleys = peel(*peaks_and_valleys(finite(x)))
    rest = interleaved(peaks, valleys)
    if rest.size > FEW:
        nested, rest = close_nests(rest)
        pairs += nested
    return pairs, rest


def _reduced(x: Array) -> tuple[list[Pairs], Array]:
    """Take every nested cycle out of a finite sequence."""
    pairs, peaks, valleys = peel(*peaks_and_valleys(x))
    nested, rest = close_nests(interleaved(peaks, valleys))
    return pairs + nested, rest


def _cycles(pairs: list[Pairs], *others: Cycles) -> Cycles:
    """Return closed cycles, and other tables, as one."""
    low = stacked([low for low, _ in pairs] + [other.low for other in others])
    high = stacked([high for _, high in pairs] + [other.high for other in others])
    whole = np.ones(low.size - sum(len(other) for other in others))
    return owned(low, high, stacked([whole] + [other.count for other in others]))


def _count_rest(x: Array, close: bool) -> Cycles:
    """Count what is left of a history."""
    if close and x.size:
        top = int(np.argmax(x))
        x = np.concatenate([x[top:], x[: top + 1]])
    if x.size <= FEW:
        x = turning_points(x)
        if x.size > 2:
            found = _by_rainflow(x)
            # a closed history ends in half cycles that come twice, down and up: whole ones
            return found.merged() if close else found
    pairs, residue = _reduced(x)
    if residue.size < 2:
        return joined([])
    if close:  # from the top down and back to the top
        return _cycles(pairs, Cycles(residue[1::2], residue[:-1:2], np.ones(residue.size // 2)))
    ends = residue[1:], residue[:-1]
    return _cycles(pairs, Cycles(np.minimum(*ends), np.maximum(*ends), np.full(residue.size - 1, 0.5)))


def _by_rainflow(points: Array) -> Cycles:
    """Count turning points with the `rainflow` package, on ranks: exact ties, and no difference can underflow.

    The package needs at least three points; it gives nothing for two.
    """
    rank = np.unique(points, return_inverse=True)[1].astype(np.float64)
    found = np.array([(start, end, number) for *_, number, start, end in rainflow.extract_cycles(rank.tolist())])
    first, second = points[found[:, 0].astype(np.int64)], points[found[:, 1].astype(np.int64)]
    return Cycles(np.minimum(first, second), np.maximum(first, second), found[:, 2])


def residue(values: ArrayLike) -> Array:
    """Return the turning points left when every nested cycle of a history is taken out."""
    return count_part(values).residue


__all__ = ["Part", "count", "count_part", "finish", "join_parts", "residue", "separated", "turning_points"]

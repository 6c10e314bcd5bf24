"""Deep nests: what passes would take out one pair at a time, closed in one go.

Where passes no longer pay, the ranges between turning points fall for a long while and rise again: a pit of nested
cycles. Its left flank converges (peaks fall, valleys rise), its right flank diverges, both are sorted, so every partner
is found by a sorted search. A peak's cycle goes down to the higher of the two lowest values that part it from the next
greater peaks on its left and right (Rychlik 1987, key ``rychlik-1987``). Every second pit is closed at once, which
halves their number each round.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Index = NDArray[np.intp]
Flags = NDArray[np.bool_]
Pairs = tuple[Array, Array]

FEW_PITS = 48
"""Up to so many pits are searched one by one; more are searched together, by halving."""


@dataclass(frozen=True, eq=False)
class _Pits:
    """Pits: each stands on points `first` to `last`, `floor` being the last point of the left flank."""

    first: Index
    floor: Index
    last: Index


def close_nests(points: Array) -> tuple[list[Pairs], Array]:
    """Close every cycle that is nested in a sequence of turning points.

    Parameters
    ----------
    points : ndarray, shape (n,)
        Turning points.

    Returns
    -------
    pairs : list of (ndarray, ndarray)
        Lows and highs of the closed cycles.
    residue : ndarray
        The points left: ranges rise, then fall. Of equal values the later counts as the lower.
    """
    found: list[Pairs] = []
    while points.size > 3:
        is_peak = _is_peak(points)
        pits = _every_second_pit(points, is_peak)
        if not pits.first.size:
            break
        start, stop = _taken_out(points, is_peak, pits)
        if pits.first.size <= FEW_PITS:
            found += [
                _close_one(points, is_peak, *map(int, pit))
                for pit in zip(pits.first, pits.floor, pits.last, start, stop, strict=True)
            ]
        else:
            found.append(_close_together(points, is_peak, pits, start, stop))
        gone = np.zeros(points.size + 1, dtype=np.int8)
        gone[start] += 1  # places differ: a pit takes out two points at least
        gone[stop] -= 1
        points = points.take(np.flatnonzero(np.cumsum(gone[:-1], dtype=np.int8) == 0))
    return found, points


def _is_peak(points: Array) -> Flags:
    is_peak = np.zeros(points.size, dtype=bool)
    is_peak[int(points[0] < points[1]) :: 2] = True
    return is_peak


def _every_second_pit(z: Array, is_peak: Flags) -> _Pits:
    converging = (z[2:] <= z[:-2]) == is_peak[:-2]
    turn = np.flatnonzero(converging[1:] != converging[:-1]) + 1
    falls_before = converging[turn - 1]
    floor, crest = turn[falls_before], turn[~falls_before]
    place = np.searchsorted(crest, floor)
    padded = np.concatenate([[0], crest, [z.size - 2]])
    return _Pits(padded[place][::2], floor[::2], padded[place + 1][::2] + 1)


def _taken_out(z: Array, is_peak: Flags, pits: _Pits) -> tuple[Index, Index]:
    """Return where what a closed pit takes out starts, and where it has stopped.

    What is left of a flank runs on from the outside as long as the other flank does not pass it. When one flank holds
    both extremes of the pit, the other is left with its outermost point, or two where the types of point ask for it.
    """
    first, floor, last = pits.first, pits.floor, pits.last
    top_left, low_left = np.maximum(z[first], z[first + 1]), np.minimum(z[first], z[first + 1])
    top_right, low_right = np.maximum(z[last], z[last - 1]), np.minimum(z[last], z[last - 1])
    left_higher, left_lower = top_left >= top_right, low_left < low_right
    left_holds, right_holds = left_higher & left_lower, ~left_higher & ~left_lower

    peak, number = _places(is_peak, first, floor, True)
    passed_peak = _first_true(lambda at, k: z[at] < top_right[k], peak, number)
    valley, number = _places(is_peak, first, floor, False)
    passed_valley = _first_true(lambda at, k: z[at] >= low_right[k], valley, number)
    passed = np.minimum(np.minimum(passed_peak, passed_valley), floor + 1)

    peak, number = _places(is_peak, floor + 1, last, True)
    past_peak = _first_true(lambda at, k: z[at] > top_left[k], peak, number)
    valley, number = _places(is_peak, floor + 1, last, False)
    past_valley = _first_true(lambda at, k: z[at] <= low_left[k], valley, number)
    past = np.maximum(np.maximum(past_peak, past_valley) - 1, floor + 1)

    # which type of point comes next to what is left of the flank that holds; both keep one extreme where none holds
    right_is_peak = np.where(left_holds, ~is_peak[np.maximum(passed - 1, first)], ~left_higher)
    left_is_peak = np.where(right_holds, ~is_peak[np.minimum(past, last)], left_higher)
    start = np.where(left_holds, passed, np.where(is_peak[first + 1] == left_is_peak, first + 2, first + 1))
    stop = np.where(right_holds, past, np.where(is_peak[last] == right_is_peak, last, last - 1))
    return start, stop


def _places(is_peak: Flags, first: Index, last: Index, peaks: bool) -> tuple[Index, Index]:
    """Return the first peak (or valley) from `first` on, and how many there are up to `last`."""
    start = first + (is_peak[first] != peaks)
    return start, (last - start) // 2 + 1


def _first_true(test: Callable[[Index, Index], Flags], start: Index, number: Index) -> Index:
    """Return the first of the places start, start + 2, ... where a test holds that holds from there on.

    One past the last place where it never holds. Halving, for all starts together.
    """
    low, high = np.zeros_like(number), number.copy()
    open_ = np.flatnonzero(low < high)
    while open_.size:
        middle = (low[open_] + high[open_]) >> 1
        true = test(start[open_] + 2 * middle, open_)
        high[open_[true]] = middle[true]
        low[open_[~true]] = middle[~true] + 1
        open_ = open_[low[open_] < high[open_]]
    return np.asarray(start + 2 * low)


def _close_one(z: Array, is_peak: Flags, first: int, floor: int, last: int, start: int, stop: int) -> Pairs:
    """Return the cycles of one pit: its peaks from `start` to before `stop`."""
    left, right = first + (not is_peak[first]), floor + 1 + (not is_peak[floor + 1])
    left_peaks, right_peaks = z[left : floor + 1 : 2], z[right : last + 1 : 2]

    begin, end = start + (not is_peak[start]), min(floor + 1, stop)
    high_left = z[begin:end:2]
    lower = np.searchsorted(np.ascontiguousarray(right_peaks), high_left[::-1], side="right")[::-1]
    parting = np.append(z[right - 1 : last : 2], -np.inf).take(lower)
    low_left = _low(z[begin - 1 : end - 1 : 2], z[begin + 1 : end + 1 : 2], parting)

    begin = max(start, floor + 1)
    begin += not is_peak[min(begin, z.size - 1)]
    high_right = z[begin:stop:2]
    higher = left_peaks.size - np.searchsorted(np.ascontiguousarray(left_peaks[::-1]), high_right, side="left")
    parting = np.append(-np.inf, z[left + 1 : floor + 2 : 2]).take(higher)
    low_right = _low(z[begin + 1 : stop + 1 : 2], z[begin - 1 : stop - 1 : 2], parting)
    return np.concatenate([low_left, low_right]), np.concatenate([high_left, high_right])


def _close_together(z: Array, is_peak: Flags, pits: _Pits, start: Index, stop: Index) -> Pairs:
    """Return the cycles of many pits."""
    at, of = _spread(start + ~is_peak[start], np.minimum(pits.floor + 1, stop))
    from_, number = _places(is_peak, pits.floor + 1, pits.last, True)
    greater = _first_true(lambda place, k: z[place] > z[at[k]], from_[of], number[of])
    parting = np.where(greater <= pits.last[of], z[np.minimum(greater - 1, z.size - 1)], -np.inf)
    low_left, high_left = _low(z[at - 1], z[at + 1], parting), z[at]

    begin = np.maximum(start, pits.floor + 1)
    at, of = _spread(begin + ~is_peak[np.minimum(begin, z.size - 1)], stop)
    from_, number = _places(is_peak, pits.first, pits.floor, True)
    greater = _first_true(lambda place, k: z[place] < z[at[k]], from_[of], number[of]) - 2
    parting = np.where(greater >= pits.first[of], z[greater + 1], -np.inf)
    low_right, high_right = _low(z[at + 1], z[at - 1], parting), z[at]
    return np.concatenate([low_left, low_right]), np.concatenate([high_left, high_right])


def _low(inner: Array, outer: Array, parting: Array) -> Array:
    """Return the lows of peaks, given the valleys beside them and the one before the next greater peak across the pit.

    Between a peak and the greater one on its own flank lies the outer valley. Where no peak across is greater, parting
    is minus infinity.
    """
    return np.asarray(np.maximum(inner, np.minimum(outer, parting)))


def _spread(begin: Index, stop: Index) -> tuple[Index, Index]:
    """Return the places begin, begin + 2, ... before stop of all pits in one row, and whose each is."""
    number = np.maximum((stop - begin + 1) // 2, 0)
    of = np.repeat(np.arange(begin.size), number)
    nth = np.arange(of.size) - np.repeat(np.cumsum(number) - number, number)
    return begin[of] + 2 * nth, of

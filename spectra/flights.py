"""Flights found in a recording: stretches above the ground level."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from spectra.store import blocks

Array = NDArray[np.float64]
Index = NDArray[np.intp]


@dataclass(frozen=True)
class GroundRule:
    """When an aircraft is on the ground.

    Parameters
    ----------
    below : float
        On the ground at or below this value, in the unit of the recording.
    least_flight : float
        What stays above for less is no flight [s].
    least_ground : float
        What stays below for less does not end a flight [s].
    """

    below: float
    least_flight: float = 300.0
    least_ground: float = 60.0


@dataclass(frozen=True, eq=False)
class Flights:
    """Flights, in the order flown.

    Parameters
    ----------
    start, stop : ndarray
        First value of each, and the one after its last.
    begin, end : ndarray
        Times of the first and the last value [s].
    low, high : ndarray
        Extremes, in the unit of the recording.
    """

    start: Index
    stop: Index
    begin: Array
    end: Array
    low: Array
    high: Array

    def __len__(self) -> int:
        return self.start.size

    @property
    def duration(self) -> Array:
        """Time from the first to the last value [s]."""
        return self.end - self.begin


def find_flights(values: NDArray[Any], time: NDArray[Any], rule: GroundRule) -> Flights:
    """Cut a recording into flights.

    Parameters
    ----------
    values : ndarray, shape (n,)
        Finite.
    time : ndarray, shape (n,)
        Never falling [s].
    rule : GroundRule

    Examples
    --------
    >>> flights = find_flights(
    ...     np.array([0.0, 9.0, 8.0, 0.0, 0.0, 7.0, 9.0, 0.0]), np.arange(8) * 400.0, GroundRule(below=1.0)
    ... )
    >>> flights.start, flights.stop
    (array([1, 5]), array([3, 7]))
    """
    edges = [np.empty(0, dtype=np.intp)]
    before = False
    for start, x in blocks(values):
        above = np.concatenate([[before], x > rule.below])
        edges.append(start + np.flatnonzero(above[1:] != above[:-1]))
        before = bool(above[-1])
    edge = np.concatenate([*edges, [values.size] if before else np.empty(0, dtype=np.intp)]).astype(np.intp)
    rise, fall = edge[::2], edge[1::2]
    ground = time[rise[1:]] - time[fall[:-1]]
    ends = ground >= rule.least_ground
    rise, fall = rise[np.concatenate([[True], ends])[: rise.size]], fall[np.concatenate([ends, [True]])[: fall.size]]
    long = time[fall - 1] - time[rise] >= rule.least_flight
    rise, fall = rise[long], fall[long]
    low = np.array([min(x.min() for _, x in blocks(values[a:b])) for a, b in zip(rise, fall, strict=True)])
    high = np.array([max(x.max() for _, x in blocks(values[a:b])) for a, b in zip(rise, fall, strict=True)])
    return Flights(rise, fall, np.asarray(time[rise]), np.asarray(time[fall - 1]), low, high)

"""One flight given as blocks of equal cycles."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

import numpy as np

from spectra.counting import count
from spectra.cycles import Cycles, joined

MOST_FLIGHTS = 1000
"""Most flights put together to make fractional cycle numbers whole."""


def count_blocks(blocks: Sequence[tuple[float, float, float]], close: bool = True) -> Cycles:
    """Count flights given as blocks of (max, min, cycles), flown in the order given.

    Inside a block every cycle but the first closes on the one before it, so a block is one cycle in the flight's
    sequence and the rest of it are counted as they stand. What closes between the blocks, the ground-air-ground cycle
    for one, comes out of counting the sequence. A block that comes less than once a flight is flown in as many flights
    of a longer sequence, spread evenly.

    Parameters
    ----------
    blocks : sequence of (float, float, float)
        Maximum, minimum, cycles per flight.
    close : bool
        The flights repeat.

    Returns
    -------
    Cycles
        Per flight.

    Examples
    --------
    >>> table = count_blocks([(90.0, 0.0, 1.0)])
    >>> table.low, table.high, table.count
    (array([0.]), array([90.]), array([1.]))
    """
    flights = _flights([number for *_, number in blocks])
    points: list[float] = []
    flown, visits = np.zeros(len(blocks)), np.zeros(len(blocks))
    for flight in range(flights):
        for i, (high, low, number) in enumerate(blocks):
            if np.floor((flight + 1) * number + 1e-9) > flown[i]:
                points += [low, high, low]
                flown[i] = np.floor((flight + 1) * number + 1e-9)
                visits[i] += 1
    sequence = count(points, close) if points else joined([])
    high, low, number = np.array(blocks, dtype=np.float64).T
    return joined([sequence, Cycles(low, high, np.maximum(number * flights - visits, 0.0))]).per_flight(flights).merged()


def _flights(numbers: Sequence[float]) -> int:
    """Return the fewest flights in which every block comes a whole number of times, bounded."""
    lcm = 1
    for number in numbers:
        denominator = Fraction(number).limit_denominator(MOST_FLIGHTS).denominator
        lcm = int(np.lcm(lcm, denominator))
        if lcm > MOST_FLIGHTS:
            return MOST_FLIGHTS
    return lcm

"""One flight given as blocks of equal cycles."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

import numpy as np

from spectra.counting import count
from spectra.cycles import Cycles, joined

MOST_FLIGHTS = 1000
"""Most flights put together to make fractional cycle numbers whole."""

Block = tuple[float, float, float]
"""Maximum, minimum, cycles per flight."""


def count_blocks(blocks: Sequence[Block], close: bool = True) -> Cycles:
    """Count flights given as blocks of (max, min, cycles), flown in the order given.

    A block goes from its maximum to its minimum and back. Every cycle of it but one closes on the one before, so one is
    put in the flight's sequence and the rest count as they stand. What closes between the blocks, the ground-air-ground
    cycle of taxi and gust blocks for one, comes out of counting that sequence; a ground-air-ground cycle that is listed
    as a block is not found twice. A block that comes less than once a flight is flown in as many flights of a longer
    sequence, spread evenly. Equal blocks that follow each other are one.

    Parameters
    ----------
    blocks : sequence of (float, float, float)
        Maximum, minimum, cycles per flight (positive, need not be whole).
    close : bool
        The flights repeat.

    Returns
    -------
    Cycles
        Per flight, identical pairs joined.

    Raises
    ------
    ValueError
        If a minimum is above its maximum, or a number is not positive and finite.

    Examples
    --------
    >>> table = count_blocks([(90.0, 0.0, 1.0), (90.0, 50.0, 100.0)])
    >>> table.low, table.high, table.count
    (array([ 0., 50.]), array([90., 90.]), array([  1., 100.]))
    """
    _check(blocks)
    blocks = _run_together(blocks)
    flights = _flights([number for *_, number in blocks])
    points: list[float] = []
    flown, visits = np.zeros(len(blocks)), np.zeros(len(blocks))
    for flight in range(flights):
        for i, (high, low, number) in enumerate(blocks):
            due = np.floor((flight + 1) * number + 1e-9)
            if due > flown[i]:
                points += [high, low, high]
                flown[i] = due
                visits[i] += 1
    highs, lows, numbers = np.array(blocks, dtype=np.float64).reshape(-1, 3).T
    rest = np.maximum(numbers * flights - visits, 0.0)
    table = joined([count(points, close), Cycles(lows, highs, rest)]).merged()
    present = table.count > 1e-12 * flights  # a block flown whole leaves a rest of rounding
    return Cycles(table.low[present], table.high[present], table.count[present]).per_flight(flights)


def block_notes(blocks: Sequence[Block]) -> tuple[str, ...]:
    """Say what a reader should know of how the blocks were counted.

    >>> block_notes([(90.0, 0.0, 1.0)])
    ()
    """
    rare = sum(number * MOST_FLIGHTS < 1 for *_, number in _run_together(blocks))
    if not rare:
        return ()
    return (
        f"{rare} of the blocks come{'s' if rare == 1 else ''} less than once in {MOST_FLIGHTS} flights: counted as "
        "listed, without what closes between such a block and the rest of its flight",
    )


def _check(blocks: Sequence[Block]) -> None:
    for high, low, number in blocks:
        if not np.isfinite([high, low, number]).all() or low > high or number <= 0:
            raise ValueError(f"not a block: max {high}, min {low}, cycles {number}")


def _run_together(blocks: Sequence[Block]) -> list[Block]:
    """Join equal blocks that follow each other."""
    together: list[Block] = []
    for high, low, number in blocks:
        if together and together[-1][:2] == (high, low):
            number += together.pop()[2]
        together.append((high, low, number))
    return together


def _flights(numbers: Sequence[float]) -> int:
    """Return the fewest flights in which every block comes a whole number of times, bounded."""
    flights = 1
    for number in numbers:
        denominator = Fraction(number).limit_denominator(MOST_FLIGHTS).denominator
        flights = int(np.lcm(flights, denominator))
        if flights > MOST_FLIGHTS:
            return MOST_FLIGHTS
    return flights

"""Checks of counting and of spectra."""

from __future__ import annotations

from functools import cache, partial

import numpy as np

import spectra
from reports.evidence.check import Check, Checks
from spectra import Cycles
from spectra.counting import residue

EXAMPLE = [-2, 1, -3, 5, -1, 3, -4, 4, -2]
GUST_LEVELS = (1.60, 1.50, 1.30, 1.15, 0.995, 0.84, 0.685, 0.53, 0.375, 0.222)
GUST_TOTALS = (1, 2, 5, 18, 52, 152, 800, 4170, 34800, 358665)


def _of_range(size: float, close: bool) -> float:
    cycles = spectra.count(EXAMPLE, close)
    return float(cycles.count[cycles.range == size].sum())


def _fifth_power(close: bool) -> float:
    cycles = spectra.count(EXAMPLE, close)
    return float((cycles.count * cycles.range**5).sum())


@cache
def _programme() -> Cycles:
    return spectra.count(spectra.read_spectrum("ten-flight-gust-programme").history({"load": 1.0}).values)


def _points() -> float:
    return float(spectra.read_spectrum("ten-flight-gust-programme").history({"load": 1.0}).values.size)


def _of_level(number: int) -> float:
    spectrum = spectra.read_spectrum("ten-flight-gust-programme")
    cycles = spectrum.phases[0].cycles or {}
    return float(sum(n * cycles[kind][number] for kind, n in spectrum.flights.items()))


def _ground_air_ground(power: int) -> float:
    spectrum = spectra.read_spectrum("ten-flight-gust-programme")
    cycles = spectrum.phases[0].cycles or {}
    tops = {k: max(a for a, n in zip(GUST_LEVELS, cycles[k], strict=True) if n) for k in spectrum.flights}
    return float(sum(n * (1.5 + tops[kind]) ** power for kind, n in spectrum.flights.items()))


def _zigzag(largest: int) -> float:
    rising = np.arange(1, largest)
    ranges = np.concatenate([rising, rising[::-1]])
    signs = np.where(np.arange(ranges.size) % 2 == 0, 1.0, -1.0)
    return float(residue(np.concatenate([[0.0], np.cumsum(signs * ranges)])).size)


def checks() -> list[Check]:
    """Return the checks of counting and of the published gust programme."""
    found = Checks()
    counting, standard = "counting", "astm-e1049"
    for size, number in ((3, "0.5"), (4, "1.5"), (6, "0.5"), (8, "1.0"), (9, "0.5")):
        what = f"standard example, open: cycles of range {size}"
        found.add(counting, what, number, partial(_of_range, size, False), standard, "read second-hand")
    for size in (3, 4, 7, 9):
        what = f"standard example, repeating: cycles of range {size}"
        found.add(counting, what, "1.0", partial(_of_range, size, True), standard)
    for close, words, printed in ((False, "open", "67838"), (True, "repeating", "77123")):
        found.add(
            counting, f"standard example, {words}: sum of n range^5", printed, partial(_fifth_power, close), standard
        )
    what = "zigzag of ranges 1..9, 9..1: length of the residue"
    found.add(counting, what, "19", partial(_zigzag, 10), "mcinnes-meehan-2008")

    gusts, table = "gust programme", "gust-programme-1973"
    for at, (level, total) in enumerate(zip(GUST_LEVELS, GUST_TOTALS, strict=True)):
        what = f"cycles at level {level:g} in 4000 flights"
        found.add(gusts, what, str(total), partial(_of_level, at), table, "memory")
    found.add(gusts, "points of a realisation", "801330", _points, table)
    found.add(gusts, "closed cycles", "398665", lambda: _programme().total, table)
    found.add(gusts, "largest range", "3.2", lambda: _programme().range.max(), table)
    for power, printed in ((3, "25308.185"), (4, "47701.586"), (5, "90982.343")):
        found.add(gusts, f"ground-air-ground alone, power {power}", printed, partial(_ground_air_ground, power), table)
    return found

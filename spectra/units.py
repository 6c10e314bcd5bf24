"""Units of files and columns: one exact table. Inside, everything is N, mm, MPa.

The unit is the last part of a key (``thickness_mm``, ``thickness_in``). A key named with its SI unit
may be given in the other one; this module knows which that is and by how much they differ.
"""

from __future__ import annotations

from dataclasses import dataclass

INCH = 25.4
"""Millimetres in an inch, exact (international yard and pound agreement, 1959)."""
POUND_FORCE = 4.4482216152605
"""Newtons in a pound-force, exact (0.45359237 kg at 9.80665 m/s2)."""


@dataclass(frozen=True)
class Pair:
    """A quantity's SI unit, its inch-pound unit, and how many of the first make one of the second."""

    quantity: str
    si: str
    inch: str
    factor: float


PAIRS = (
    Pair("flexibility", "mm_per_N", "in_per_lbf", INCH / POUND_FORCE),
    Pair("stress per pressure", "MPa_per_kPa", "ksi_per_psi", 1.0),
    Pair("length", "mm", "in", INCH),
    Pair("stress", "MPa", "ksi", 1000.0 * POUND_FORCE / INCH**2),
    Pair("force", "N", "lbf", POUND_FORCE),
    Pair("pressure", "kPa", "psi", 1000.0 * POUND_FORCE / INCH**2),
)


def split_unit(key: str) -> tuple[str, str | None]:
    """Split a key into its name and its unit, None where it carries no unit.

    >>> split_unit("thickness_mm"), split_unit("kind"), split_unit("flexibility_mm_per_N")
    (('thickness', 'mm'), ('kind', None), ('flexibility', 'mm_per_N'))
    """
    for pair in PAIRS:
        for unit in (pair.si, pair.inch):
            if key.endswith("_" + unit):
                return key[: -len(unit) - 1], unit
    return key, None


def pair_of(unit: str) -> Pair:
    """Return the pair a unit belongs to.

    Raises
    ------
    KeyError
        If no pair has the unit.
    """
    for pair in PAIRS:
        if unit in (pair.si, pair.inch):
            return pair
    raise KeyError(unit)


def to_si(value: float, unit: str) -> float:
    """Convert a value in either unit of a pair to the SI one.

    >>> to_si(1.0, "in"), to_si(1.0, "mm")
    (25.4, 1.0)
    """
    pair = pair_of(unit)
    return value * pair.factor if unit == pair.inch else value


def from_si(value: float, unit: str) -> float:
    """Convert an SI value to the unit named.

    >>> from_si(25.4, "in")
    1.0
    """
    pair = pair_of(unit)
    return value / pair.factor if unit == pair.inch else value

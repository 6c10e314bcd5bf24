"""Route `practice`: the severity factors of Jarfall (1967) as textbooks give them."""

from __future__ import annotations

from dataclasses import dataclass

SOURCE = "Jarfall 1967, severity factors as textbooks give them, from memory"


@dataclass(frozen=True)
class PracticeFactors:
    """Factors on the peak stress for how a hole was made and how it is filled."""

    hole: float
    filling: float
    source: str


HOLES = {"drilled": 1.0, "reamed": 0.9, "cold-worked": 0.75}
"""Hole factors; the textbooks give 0.7 to 0.8 for cold-worked holes."""

FILLINGS = {
    "open": (1.0, SOURCE),
    "solid-rivet": (0.75, SOURCE),
    "clearance-bolt": (0.9, f"{SOURCE} (0.75 to 0.9; the upper end is taken)"),
    "close-fit-bolt": (0.75, SOURCE),
    "interference-pin": (0.75, f"{SOURCE} (taken as a close-fit pin)"),
    "tapered-pin": (0.5, SOURCE),
    "blind-rivet": (0.9, "taken as a clearance bolt: common practice, no source"),
}
"""Filling factors by fastener kind."""


def practice_factors(kind: str, cold_expanded: bool = False) -> PracticeFactors:
    """Return the usual practice factors of a fastener kind in a drilled or cold-worked hole.

    Parameters
    ----------
    kind : str
        A fastener kind, or ``open``.
    cold_expanded : bool

    References
    ----------
    Jarfall 1967; key ``jarfall-1967``.

    Examples
    --------
    >>> practice_factors("solid-rivet").filling
    0.75
    """
    filling, source = FILLINGS[kind]
    return PracticeFactors(HOLES["cold-worked" if cold_expanded else "drilled"], filling, source)

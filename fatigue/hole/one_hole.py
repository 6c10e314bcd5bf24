"""One hole on its own, as `faying hole` is asked about it: what it is, what is impossible, what is doubtful."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from fatigue.hole.edge import FRICTION_BEARING, FRICTION_BYPASS
from fatigue.hole.installed import LARGEST_FIT, SMALLEST_FIT
from fatigue.hole.sheet import LARGEST_RATIO, Edge
from spectra.faults import Fault

LARGEST_GAP = 0.1
"""Fits beyond this share of the diameter are taken for a mistake."""


@dataclass(frozen=True, eq=False)
class OneHole:
    """A hole to look into: its sheet, its pin and its loads.

    Parameters
    ----------
    diameter, width : float
        Hole and pitch or strip [mm].
    edge : str
        ``row``, ``strip`` or ``wide``.
    end : float
        Hole's centre to the sheet's end on the pin-load side, infinite where none is near [mm].
    bypass, bearing, bend : float
        Bypass load/(W t), F/(d t), nominal bending stress [MPa].
    fit : float
        Interference over the diameter; negative is clearance.
    modulus, poisson, pin_modulus, pin_poisson : float
        [MPa], -
    friction : float
    k_bend : float
        Factor on the bending stress.
    """

    diameter: float
    width: float
    bypass: float
    bearing: float = 0.0
    bend: float = 0.0
    fit: float = 0.0
    edge: Edge = "row"
    end: float = np.inf
    modulus: float = 72e3
    poisson: float = 0.33
    pin_modulus: float = 72e3
    pin_poisson: float = 0.33
    friction: float = 0.0
    k_bend: float = 1.8

    @property
    def gross_stress(self) -> float:
        """Stress on the gross section of the more loaded side; the bearing stress where that carries nothing [MPa]."""
        gross = self.bypass + self.bearing * (0.0 if self.edge == "wide" else self.diameter / self.width)
        return gross if gross else self.bearing


def hole_faults(hole: OneHole) -> list[Fault]:
    """Return everything impossible about a hole."""
    faults = []

    def need(good: bool, where: str, given: float, allowed: str, remedy: str) -> None:
        if not good:
            faults.append(Fault(where, f"{given:g} given; {allowed}.", remedy))

    def above(where: str, value: float, what: str) -> None:
        need(np.isfinite(value) and value > 0, where, value, f"{what} must be above 0", "Give a positive number.")

    above("hole", hole.diameter, "the hole's diameter")
    above("pitch", hole.width, "the pitch or strip width")
    above("modulus", hole.modulus, "the sheet's modulus")
    above("pin_modulus", hole.pin_modulus, "the pin's modulus")
    if hole.edge != "wide" and hole.diameter > 0:
        least = f"it must exceed the hole's diameter {hole.diameter:g} mm"
        need(hole.width > hole.diameter, "pitch", hole.width, least, "Holes this close leave no sheet between them.")
        least = f"it must exceed half the diameter, {hole.diameter / 2:g} mm"
        need(hole.end > hole.diameter / 2, "end", hole.end, least, "Measure from the hole's centre to the sheet's end.")
    for where, value in (("poisson", hole.poisson), ("pin_poisson", hole.pin_poisson)):
        need(0 <= value < 0.5, where, value, "Poisson's ratio lies from 0 to 0.5", "Metals have about 0.3.")
    stated = "the multiplier is stated for 0 to 0.5"
    need(0 <= hole.friction <= 0.5, "friction", hole.friction, stated, "Leave it out for none.")
    span = f"fits lie from {-100 * LARGEST_GAP:g} to {100 * LARGEST_GAP:g} %"
    need(abs(hole.fit) <= LARGEST_GAP, "fit", 100 * hole.fit, span, "Fits are percent of the hole; minus is clearance.")
    for where, value in (("bypass", hole.bypass), ("bearing", hole.bearing), ("bend", hole.bend)):
        need(bool(np.isfinite(value)), where, value, "stresses must be finite", "Give a number in MPa or ksi.")
    return faults


def hole_flags(hole: OneHole) -> list[str]:
    """Return what a reader must know before trusting the answer."""
    ratio = hole.diameter / hole.width
    flags = []
    if not SMALLEST_FIT <= hole.fit <= LARGEST_FIT:
        flags.append(f"fit {100 * hole.fit:g} % outside the {100 * SMALLEST_FIT:g} to {100 * LARGEST_FIT:g} % checked")
    if hole.edge != "wide" and ratio > LARGEST_RATIO:
        flags.append(f"d/W {ratio:.2f} is beyond the {LARGEST_RATIO:g} checked")
    if hole.end < 1.5 * hole.diameter:
        flags.append(f"end distance {hole.end / hole.diameter:.1f} d is under the 1.5 d checked")
    if hole.friction > 0:
        flags.append(
            "friction is not solved but a stated multiplier: "
            f"1 + {FRICTION_BEARING:g} x coefficient on the pin's part, 1 + {FRICTION_BYPASS:g} x on the bypass"
        )
    return flags

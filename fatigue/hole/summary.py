"""One hole on its own: what `faying hole` tells."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.hole.contact import Contact, PinInHole
from fatigue.hole.edge import FRICTION_BEARING, FRICTION_BYPASS, bending_around, contact_ends, pin_in_hole, raised_loads
from fatigue.hole.sheet import LARGEST_RATIO, Edge

Array = NDArray[np.float64]


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


@dataclass(frozen=True, eq=False)
class HoleSummary:
    """What happens around one hole.

    Parameters
    ----------
    angle : ndarray, shape (181,)
        From the load axis on the pin-load side [deg].
    hoop, pressure : ndarray, shape (181,)
        At full load [MPa].
    hoop_unloaded : ndarray, shape (181,)
        With the fit alone [MPa].
    peak, peak_angle : float
        Largest hoop stress [MPa] and where [deg].
    range_factor_90, range_factor_peak : float
        Rise of the hoop stress from no load to full load over the gross stress: at 90 deg, and where it is largest.
    contact_from, contact_to : float
        NaN where nothing touches [deg].
    open_factor : float
        Factor on gross bypass stress of the hole left open.
    bending : str
        ``resisted`` or ``outside``: the way of adding secondary bending that gave the higher peak.
    flags : tuple of str
    """

    angle: Array
    hoop: Array
    pressure: Array
    hoop_unloaded: Array
    peak: float
    peak_angle: float
    range_factor_90: float
    range_factor_peak: float
    contact_from: float
    contact_to: float
    open_factor: float
    bending: str
    flags: tuple[str, ...]

    @property
    def rise(self) -> Array:
        """Hoop stress at full load less that with the fit alone [MPa]."""
        return np.asarray(self.hoop - self.hoop_unloaded)


def hole_summary(hole: OneHole) -> HoleSummary:
    """Solve one hole at one load.

    Parameters
    ----------
    hole : OneHole

    Returns
    -------
    HoleSummary

    Examples
    --------
    >>> wide = OneHole(diameter=4.0, width=20.0, bypass=100.0, fit=0.005, edge="wide")
    >>> round(hole_summary(wide).range_factor_90, 4)
    1.75
    """
    unloaded, loaded, contact, way = _both_ways(hole)
    first, last = contact_ends(contact)
    peak = int(np.argmax(loaded))
    rise = (loaded - unloaded) / (hole.gross_stress or 1.0)
    angle = np.degrees(contact.theta)
    middle = angle.size // 2
    ready = _ready(hole)
    return HoleSummary(
        angle=angle,
        hoop=loaded,
        pressure=contact.pressure[-1],
        hoop_unloaded=unloaded,
        peak=float(loaded[peak]),
        peak_angle=float(angle[peak]),
        range_factor_90=float(rise[middle]),
        range_factor_peak=float(rise.max()),
        contact_from=float(first[-1]),
        contact_to=float(last[-1]),
        open_factor=ready.sheet.open_factor,
        bending=way,
        flags=tuple(hole_flags(hole)),
    )


def factor_against_load(hole: OneHole, fits: ArrayLike, shares: ArrayLike) -> Array:
    """Return the largest rise of hoop stress over gross stress against load, for several fits.

    Parameters
    ----------
    hole : OneHole
        At full load; its own fit is not used.
    fits : array_like, shape (f,)
        Interference over the diameter.
    shares : array_like, shape (n,)
        Of the full load, ascending from above 0.

    Returns
    -------
    ndarray, shape (f, n)
        The largest over the edge, 45 to 135 deg, bending left out.
    """
    ready, share = _ready(hole), np.asarray(shares, dtype=np.float64)
    passing, raised = _loads(hole)
    out = []
    for fit in np.asarray(fits, dtype=np.float64):
        levels = np.concatenate([[0.0], share])
        hoop = ready.solve(passing * levels, raised * levels, float(fit)).hoop[:, 45:136]
        out.append((hoop[1:] - hoop[0]).max(axis=1) / (hole.gross_stress * share))
    return np.asarray(out)


def hole_flags(hole: OneHole) -> list[str]:
    """Return what a reader must know before trusting the answer."""
    ratio = hole.diameter / hole.width
    flags = []
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


def _ready(hole: OneHole) -> PinInHole:
    ratio = 0.0 if hole.edge == "wide" else hole.diameter / hole.width
    return pin_in_hole(
        hole.edge, ratio, hole.end / hole.diameter, hole.modulus, hole.poisson, hole.pin_modulus, hole.pin_poisson
    )


def _loads(hole: OneHole) -> tuple[float, float]:
    """Return bypass and bearing stress, raised by friction."""
    ratio = 0.0 if hole.edge == "wide" else hole.diameter / hole.width
    passing, pressing = raised_loads(np.array(hole.bypass), np.array(hole.bearing), ratio, friction=hole.friction)
    return float(passing), float(pressing)


def _both_ways(hole: OneHole) -> tuple[Array, Array, Contact, str]:
    ready = _ready(hole)
    bypass, bearing = _loads(hole)
    plain = ready.solve([0.0, bypass], [0.0, bearing], hole.fit)
    around = bending_around(np.degrees(plain.theta), hole.k_bend)
    outside = plain.hoop[1] + hole.bend * around
    ovalled = bypass + hole.k_bend / ready.sheet.open_factor * hole.bend
    bent = ready.solve([0.0, ovalled], [0.0, bearing], hole.fit)
    if hole.bend and bent.hoop[1].max() >= outside.max():
        return bent.hoop[0], bent.hoop[1], bent, "resisted"
    return plain.hoop[0], outside, plain, "outside"

"""One hole solved: what `faying hole` tells."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.hole.contact import Contact, PinInHole
from fatigue.hole.edge import bending_around, contact_ends, pin_in_hole, raised_loads
from fatigue.hole.one_hole import OneHole, hole_faults, hole_flags

__all__ = ["HoleSummary", "OneHole", "factor_against_load", "hole_faults", "hole_flags", "hole_summary"]

Array = NDArray[np.float64]


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

    Raises
    ------
    ValueError
        Without any load.
    """
    if not hole.gross_stress:
        raise ValueError("a factor needs a load to stand on")
    ready, share = _ready(hole), np.asarray(shares, dtype=np.float64)
    passing, raised = _loads(hole)
    out = []
    for fit in np.asarray(fits, dtype=np.float64):
        levels = np.concatenate([[0.0], share])
        hoop = ready.solve(passing * levels, raised * levels, float(fit)).hoop[:, 45:136]
        out.append((hoop[1:] - hoop[0]).max(axis=1) / (hole.gross_stress * share))
    return np.asarray(out)


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

"""What squeezing a solid rivet does to its hole: force, expansion, and the interference it keeps.

Low confidence throughout: published expansions scatter by a factor of two and more. Every result carries its range, and
a case may set the fit itself.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.interpolate import PchipInterpolator

from fatigue.hole.ring import Metal, expand

Array = NDArray[np.float64]
Side = Literal["driven", "formed"]

STRENGTH, EXPONENT = 496.0, 0.199
"""Flow stress of the rivet C [2 ln(D/D0)]^m [MPa]; a fit to a published series within 9 %."""
SMALLEST_HEAD, LARGEST_HEAD = 1.0, 1.75
"""Driven-head diameters over shank diameter the expansions are known for."""
FORMED_SHARE = 1 / 3
"""Expansion under the formed head over that under the driven head."""
FILLING = 0.025
"""Strain that fills the drilled clearance before the hole expands (common practice, no source)."""
LOW_CONFIDENCE = "hole expansion from the squeeze ratio scatters by a factor of two between publications"

_RATIO = [1.0, 1.3, 1.5, 1.75]
_LOW = PchipInterpolator(_RATIO, [0.0, 0.0, 0.010, 0.020])
_MIDDLE = PchipInterpolator(_RATIO, [0.0, 0.0025, 0.015, 0.030])
_HIGH = PchipInterpolator(_RATIO, [0.0, 0.005, 0.020, 0.040])


@dataclass(frozen=True)
class Squeezed:
    """A hole with a squeezed rivet in it.

    Parameters
    ----------
    force : float
        Squeeze force [N].
    expansion, expansion_low, expansion_high : float
        Of the hole's diameter while squeezed, with the range published.
    retained_fit : float
        Interference over the diameter once the force is off; an elastic rivet in an elastic sheet with the residual
        stress would press as hard.
    residual_hoop : float
        At the edge were the rivet taken out [MPa].
    flags : tuple of str
    """

    force: float
    expansion: float
    expansion_low: float
    expansion_high: float
    retained_fit: float
    residual_hoop: float
    flags: tuple[str, ...]


def squeeze_force(head_ratio: ArrayLike, shank_diameter: ArrayLike) -> Array:
    """Return the force that drives a head: F = (pi/4) D^2 C [2 ln(D/D0)]^m.

    Parameters
    ----------
    head_ratio : array_like
        Driven-head diameter D over shank diameter D0, at least 1.
    shank_diameter : array_like
        D0 [mm].

    Returns
    -------
    ndarray
        [N]

    Notes
    -----
    C = 496 MPa, m = 0.199, fitted to one published series of aluminium rivets within 9 %.

    References
    ----------
    Key ``rivet-squeeze``.

    Examples
    --------
    >>> round(float(squeeze_force(1.5, 4.0)))
    13451
    """
    ratio = np.maximum(np.asarray(head_ratio, dtype=np.float64), 1.0)
    head = ratio * np.asarray(shank_diameter, dtype=np.float64)
    return np.asarray(np.pi / 4 * head**2 * STRENGTH * (2 * np.log(ratio)) ** EXPONENT)


def head_ratio_of_force(force: float, shank_diameter: float) -> float:
    """Return the driven-head ratio a squeeze force makes, by bisection of `squeeze_force`.

    Examples
    --------
    >>> round(head_ratio_of_force(13451.0, 4.0), 3)
    1.5
    """
    low, high = 1.0, 4.0
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if squeeze_force(middle, shank_diameter) < force else (low, middle)
    return (low + high) / 2


def hole_expansion(head_ratio: float, side: Side) -> tuple[float, float, float]:
    """Return low, middle and high published expansion of the hole at full squeeze, over its diameter.

    Order of 0-0.5 % at D/D0 = 1.3, 1-2 % at 1.5 and 3 % at 1.75 in the sheet under the driven head; about a third of it
    under the formed head.

    References
    ----------
    Publications gathered second-hand; key ``rivet-squeeze``.
    """
    ratio = float(np.clip(head_ratio, SMALLEST_HEAD, LARGEST_HEAD))
    share = 1.0 if side == "driven" else FORMED_SHARE
    low, middle, high = (share * float(curve(ratio)) for curve in (_LOW, _MIDDLE, _HIGH))
    return low, middle, high


def squeezed(
    head_ratio: float,
    shank_diameter: float,
    side: Side,
    sheet: Metal,
    rivet_modulus: float,
    rivet_poisson: float,
    expansion: float | None = None,
) -> Squeezed:
    """Return what a squeezed rivet leaves in a sheet.

    While squeezed the shank flows, so that its axial stress is its flow stress plus the pressure p on the hole. With
    the force off, sheet and rivet keep the misfit

        fit = p [(1 + nu)/E + (1 - nu_r)/E_r] - nu_r sigma_z/E_r,

    the last term being the shank's contraction as its axial stress goes; no less than nothing.

    Parameters
    ----------
    head_ratio : float
        Driven-head diameter over shank diameter.
    shank_diameter : float
        [mm]
    side : str
        ``driven`` or ``formed``: the head that lies on this sheet.
    sheet : Metal
    rivet_modulus, rivet_poisson : float
        [MPa], -
    expansion : float, optional
        The hole's, where it is known; else from `hole_expansion`.

    Returns
    -------
    Squeezed

    References
    ----------
    Derived for this project; key ``rivet-squeeze``.
    """
    low, middle, high = hole_expansion(head_ratio, side)
    flags = []
    if expansion is None:
        flags.append(LOW_CONFIDENCE)
        if not SMALLEST_HEAD <= head_ratio <= LARGEST_HEAD:
            flags.append(f"squeeze ratio {head_ratio:g} outside {SMALLEST_HEAD:g}-{LARGEST_HEAD:g}, held at the nearer")
    else:
        low = middle = high = expansion
    ring = expand(sheet, middle)
    pressure = ring.loaded.pressure
    flow = STRENGTH * (2 * np.log(1 + FILLING + middle)) ** EXPONENT
    misfit = pressure * ((1 + sheet.poisson) / sheet.modulus + (1 - rivet_poisson) / rivet_modulus)
    kept = max(misfit - rivet_poisson * (flow + pressure) / rivet_modulus, 0.0)
    return Squeezed(
        force=float(squeeze_force(head_ratio, shank_diameter)),
        expansion=middle,
        expansion_low=low,
        expansion_high=high,
        retained_fit=float(kept),
        residual_hoop=min(ring.residual.edge_hoop, 0.0),
        flags=tuple(flags),
    )

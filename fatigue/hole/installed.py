"""How a hole was made and filled, turned into the two numbers the edge map needs: retained fit and residual stress."""

from __future__ import annotations

import math
from dataclasses import dataclass

from fatigue.hole.ring import Metal, expand
from fatigue.hole.squeeze import Side, squeezed

LARGEST_EXPANSION = 0.06
"""Expansion the small-strain rings are good for."""
LARGEST_FIT, SMALLEST_FIT = 0.015, -0.01
"""Span of fits the contact was checked over."""


@dataclass(frozen=True)
class Installed:
    """A hole as the loads find it.

    Parameters
    ----------
    fit : float
        Interference over the diameter of an elastic pin in an elastic sheet that presses as hard; below 0 clearance.
    residual_hoop : float
        At the edge under the pin's pressure being taken off, 0 or compressive [MPa].
    nominal_fit : float
        As made, before anything yields.
    plastic_zone : float
        Radius over the hole's, 1 where nothing yielded.
    flags : tuple of str
    """

    fit: float
    residual_hoop: float
    nominal_fit: float
    plastic_zone: float
    flags: tuple[str, ...]


def installed(
    sheet: Metal,
    pin_modulus: float,
    pin_poisson: float,
    *,
    fit: float | None = None,
    cold_expansion: float = 0.0,
    squeeze_ratio: float | None = None,
    shank_diameter: float = 1.0,
    side: Side = "driven",
) -> Installed:
    """Follow a hole's making: mandrel expansion, let go, then the pin's interference or the squeezed rivet.

    A given fit stands above a squeeze ratio. An interference that yields the hole presses less than an elastic one
    would; what is left of it is the fit returned, and the yielded ring leaves its own residual stress.

    Parameters
    ----------
    sheet : Metal
    pin_modulus, pin_poisson : float
        [MPa], -
    fit : float, optional
        Interference over the diameter in the hole as it is when the pin goes in; below 0 clearance.
    cold_expansion : float
        Mandrel expansion over the diameter.
    squeeze_ratio : float, optional
        Driven-head over shank diameter.
    shank_diameter : float
        [mm]
    side : str
        Head that lies on this sheet, for a squeezed rivet.

    Returns
    -------
    Installed

    References
    ----------
    Keys ``simo-taylor-1986``, ``rivet-squeeze``.

    Examples
    --------
    >>> hole = installed(Metal(72e3, 0.33, 345.0), 72e3, 0.33, fit=0.005, cold_expansion=0.04)
    >>> round(hole.fit, 4), hole.residual_hoop < -300
    (0.005, True)
    """
    flags: list[str] = []
    if cold_expansion > LARGEST_EXPANSION:
        flags.append(f"cold expansion {100 * cold_expansion:g} % beyond {100 * LARGEST_EXPANSION:g} %, small strains")
    if fit is None and squeeze_ratio is not None:
        rivet = squeezed(squeeze_ratio, shank_diameter, side, sheet, pin_modulus, pin_poisson)
        ring = expand(sheet, cold_expansion) if cold_expansion > 0 else None
        residual = min(rivet.residual_hoop, ring.residual.edge_hoop if ring else 0.0)
        zone = max(expand(sheet, rivet.expansion).loaded.zone, ring.loaded.zone if ring else 1.0)
        return Installed(rivet.retained_fit, residual, rivet.retained_fit, zone, (*flags, *rivet.flags))
    nominal = fit or 0.0
    if not SMALLEST_FIT <= nominal <= LARGEST_FIT:
        flags.append(f"fit {100 * nominal:g} % outside the {100 * SMALLEST_FIT:g} to {100 * LARGEST_FIT:g} % checked")
    shrink = (1 - pin_poisson) / pin_modulus
    pressure = nominal / ((1 + sheet.poisson) / sheet.modulus + shrink)
    if cold_expansion == 0 and pressure <= sheet.yield_stress / math.sqrt(3):
        return Installed(nominal, 0.0, nominal, 1.0, tuple(flags))
    ring = expand(sheet, cold_expansion, max(nominal, 0.0), shrink)
    if nominal > 0 and ring.retained_fit < 0.995 * nominal:
        flags.append(f"the hole yields: fit {100 * nominal:.2f} % presses like {100 * ring.retained_fit:.2f} %")
    kept = ring.retained_fit if nominal > 0 else nominal
    return Installed(kept, min(ring.residual.edge_hoop, 0.0), nominal, ring.filled.zone, tuple(flags))

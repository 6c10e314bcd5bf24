"""A hole expanded past yield: closed form for a perfectly plastic sheet (Nadai 1943)."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

LARGEST_ZONE = float(np.sqrt(0.5 * np.exp(np.pi / np.sqrt(3))))
"""Largest c/a: the pressure cannot exceed 2 sy/sqrt(3)."""
REVERSE_ZONE = float(np.sqrt(np.sqrt(3) / 2 * np.exp(np.pi / (2 * np.sqrt(3)))))
"""c/a at which unloading begins to yield the edge in compression; the pressure is then sy."""

_TABLE = np.linspace(-np.pi / 3, 0.0, 4001)
_ZONE = np.sqrt(np.cos(_TABLE) * np.exp(-np.sqrt(3) * _TABLE))


@dataclass(frozen=True, eq=False)
class Expansion:
    """State of an expanded hole from its edge outwards, over the yield stress.

    Parameters
    ----------
    pressure : ndarray
        At the edge while expanded.
    radial, hoop : ndarray
        While expanded.
    residual_radial, residual_hoop : ndarray
        After elastic unloading; hoop no lower than -1, where reverse yield holds it.
    reversed : ndarray of bool
        Whether unloading yields the edge in compression.
    """

    pressure: Array
    radial: Array
    hoop: Array
    residual_radial: Array
    residual_hoop: Array
    reversed: NDArray[np.bool_]


def zone_angle(zone: ArrayLike) -> Array:
    """Return the angle psi that belongs to a plastic zone: (c/a)^2 = cos(psi) exp(-sqrt(3) psi).

    Parameters
    ----------
    zone : array_like
        c/a, from 1 to 1.7512.

    Returns
    -------
    ndarray
        psi, from 0 to -pi/3 [rad].

    Raises
    ------
    ValueError
        Outside that range.
    """
    ratio = np.asarray(zone, dtype=np.float64)
    if (ratio < 1).any() or (ratio > LARGEST_ZONE * (1 + 1e-12)).any():
        raise ValueError(f"c/a must lie from 1 to {LARGEST_ZONE:.4f}")
    psi = np.interp(ratio, _ZONE[::-1], _TABLE[::-1])
    for _ in range(4):  # Newton; flat at -pi/3, where the start is exact
        slope = -(np.sin(psi) + np.sqrt(3) * np.cos(psi)) * np.exp(-np.sqrt(3) * psi)
        excess = np.cos(psi) * np.exp(-np.sqrt(3) * psi) - ratio**2
        psi = np.clip(psi - excess / np.minimum(slope, -1e-9), -np.pi / 3, 0.0)
    return np.asarray(psi)


def zone_of_pressure(pressure: ArrayLike) -> Array:
    """Return c/a for an edge pressure over the yield stress, 1/sqrt(3) to 2/sqrt(3); 1 below, all being elastic.

    Examples
    --------
    >>> round(float(zone_of_pressure(1.0)), 4)
    1.4645
    """
    p = np.clip(np.asarray(pressure, dtype=np.float64), 1 / np.sqrt(3), 2 / np.sqrt(3))
    psi = np.pi / 6 - np.arcsin(p * np.sqrt(3) / 2)
    return np.asarray(np.sqrt(np.cos(psi) * np.exp(-np.sqrt(3) * psi)))


def nadai_1943(zone: ArrayLike, radius: ArrayLike = 1.0) -> Expansion:
    """Return the stresses of a hole whose plastic zone reaches to c, plane stress, Mises, perfectly plastic.

    p/sy = -(2/sqrt3) sin(psi - pi/6), hoop/sy = (2/sqrt3) sin(psi + pi/6); after elastic unloading the hoop at the edge
    is 2 sy sin(psi). Further out the same holds with c/r for c/a; beyond c the sheet is elastic.

    Parameters
    ----------
    zone : array_like
        c/a, from 1 to 1.7512.
    radius : array_like
        r/a >= 1.

    Returns
    -------
    Expansion

    Raises
    ------
    ValueError
        Outside those ranges.

    Notes
    -----
    Where unloading yields again the hoop is held at -sy, which leaves it out of equilibrium there; `fatigue.hole.ring`
    follows the unloading.

    References
    ----------
    Nadai 1943; key ``nadai-1943``.

    Examples
    --------
    >>> round(float(nadai_1943(1.3).residual_hoop), 4)
    -0.6598
    """
    c, r = np.broadcast_arrays(np.asarray(zone, dtype=np.float64), np.asarray(radius, dtype=np.float64))
    if (r < 1).any():
        raise ValueError("r/a must be at least 1")
    edge = zone_angle(c)
    pressure = -2 / np.sqrt(3) * np.sin(edge - np.pi / 6)
    ratio = c / r
    psi = zone_angle(np.maximum(ratio, 1.0))
    elastic = ratio**2 / np.sqrt(3)
    plastic = ratio >= 1
    radial = np.where(plastic, 2 / np.sqrt(3) * np.sin(psi - np.pi / 6), -elastic)
    hoop = np.where(plastic, 2 / np.sqrt(3) * np.sin(psi + np.pi / 6), elastic)
    relief = pressure / r**2
    return Expansion(
        pressure=np.asarray(pressure),
        radial=radial,
        hoop=hoop,
        residual_radial=radial + relief,
        residual_hoop=np.maximum(hoop - relief, -1.0),
        reversed=np.asarray(c > REVERSE_ZONE),
    )

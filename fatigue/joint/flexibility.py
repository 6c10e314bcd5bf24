"""Published flexibilities of a fastener: how much two sheets slip past each other per unit of its load.

All are per total load of one fastener, also in double shear, where each of the two shear planes carries half of it.
Arguments broadcast. The formulas differ by a factor of about 2.4 between themselves: compare them before trusting one.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

FORMULAS = ("huth", "swift", "tate-rosenfeld")
"""Names a case may choose from."""
SINGLE_SHEAR_ONLY = ("swift",)
"""Formulas that have no double-shear form."""


def _floats(*values: ArrayLike) -> tuple[Array, ...]:
    return tuple(np.asarray(value, dtype=np.float64) for value in values)


def huth_1986(
    t1: ArrayLike,
    t2: ArrayLike,
    diameter: ArrayLike,
    e1: ArrayLike,
    e2: ArrayLike,
    e_fastener: ArrayLike,
    *,
    riveted: ArrayLike,
    shear_planes: ArrayLike = 1,
) -> Array:
    """Return the flexibility of a fastener by Huth's formula.

    C = ((t1 + t2)/(2 d))^a (b/n) [1/(t1 E1) + 1/(n t2 E2) + 1/(2 t1 Ef) + 1/(2 n t2 Ef)] with a = 2/5, b = 2.2 for
    riveted and a = 2/3, b = 3.0 for bolted metal joints.

    Parameters
    ----------
    t1, t2 : array_like
        Sheet thicknesses; in double shear sheet 1 is the middle one and t2 one of the outer ones [mm].
    diameter : array_like
        Of the shank [mm].
    e1, e2, e_fastener : array_like
        Young's moduli [MPa].
    riveted : array_like of bool
        Rivet rather than bolt or pin.
    shear_planes : array_like of int
        n, 1 or 2.

    Returns
    -------
    ndarray
        Flexibility per total fastener load [mm/N].

    References
    ----------
    Huth 1986; key ``huth-1986``.

    Examples
    --------
    >>> round(1e6 * float(huth_1986(1.2, 1.2, 4.0, 72e3, 72e3, 72e3, riveted=True)), 3)
    47.193
    """
    t1, t2, d, e1, e2, ef, n = _floats(t1, t2, diameter, e1, e2, e_fastener, shear_planes)
    a = np.where(riveted, 2 / 5, 2 / 3)
    b = np.where(riveted, 2.2, 3.0)
    sheets = 1 / (t1 * e1) + 1 / (n * t2 * e2)
    shank = 1 / (2 * t1 * ef) + 1 / (2 * n * t2 * ef)
    return np.asarray(((t1 + t2) / (2 * d)) ** a * (b / n) * (sheets + shank))


def swift_1971(
    t1: ArrayLike, t2: ArrayLike, diameter: ArrayLike, e1: ArrayLike, e2: ArrayLike, e_fastener: ArrayLike
) -> Array:
    """Return the flexibility of an aluminium rivet in single shear by Swift's formula.

    C = 5/(d Ef) + 0.8 [1/(t1 E1) + 1/(t2 E2)].

    Parameters
    ----------
    t1, t2, diameter : array_like
        Sheet thicknesses and shank diameter [mm].
    e1, e2, e_fastener : array_like
        Young's moduli [MPa].

    Returns
    -------
    ndarray
        Flexibility [mm/N].

    References
    ----------
    Swift 1971; key ``swift-1971``.

    Examples
    --------
    >>> round(1e6 * float(swift_1971(1.2, 1.2, 4.0, 72e3, 72e3, 72e3)), 3)
    35.88
    """
    t1, t2, d, e1, e2, ef = _floats(t1, t2, diameter, e1, e2, e_fastener)
    return np.asarray(5 / (d * ef) + 0.8 * (1 / (t1 * e1) + 1 / (t2 * e2)))


def tate_rosenfeld_1946(
    t1: ArrayLike,
    t2: ArrayLike,
    diameter: ArrayLike,
    e1: ArrayLike,
    e2: ArrayLike,
    e_fastener: ArrayLike,
    poisson_fastener: ArrayLike,
) -> Array:
    """Return the flexibility of a bolt in single shear by Tate and Rosenfeld's formula.

    C = 4(t1+t2)/(9 G A) + (t1^3 + 5 t1^2 t2 + 5 t1 t2^2 + t2^3)/(40 Ef I) + (1/t1)(1/Ef + 1/E1) + (1/t2)(1/Ef + 1/E2)
    with the shank's area A, second moment I and shear modulus G = Ef/(2(1+nu)).

    Parameters
    ----------
    t1, t2, diameter : array_like
        Sheet thicknesses and shank diameter [mm].
    e1, e2, e_fastener : array_like
        Young's moduli [MPa].
    poisson_fastener : array_like

    Returns
    -------
    ndarray
        Flexibility [mm/N].

    References
    ----------
    Tate and Rosenfeld 1946, NACA TN 1051; key ``tate-rosenfeld-1946``.

    Examples
    --------
    >>> round(1e6 * float(tate_rosenfeld_1946(1.6, 1.6, 4.7625, 72e3, 72e3, 72e3, 0.33)), 3)
    38.348
    """
    t1, t2, d, e1, e2, ef, nu = _floats(t1, t2, diameter, e1, e2, e_fastener, poisson_fastener)
    shear_stiffness, bending_stiffness = _shank(d, ef, nu)
    shear = 4 * (t1 + t2) / (9 * shear_stiffness)
    bend = (t1**3 + 5 * t1**2 * t2 + 5 * t1 * t2**2 + t2**3) / (40 * bending_stiffness)
    bearing = (1 / ef + 1 / e1) / t1 + (1 / ef + 1 / e2) / t2
    return np.asarray(shear + bend + bearing)


def tate_rosenfeld_1946_double(
    t_main: ArrayLike,
    t_strap: ArrayLike,
    diameter: ArrayLike,
    e_main: ArrayLike,
    e_strap: ArrayLike,
    e_fastener: ArrayLike,
    poisson_fastener: ArrayLike,
) -> Array:
    """Return the flexibility of a bolt in double shear by Tate and Rosenfeld's formula.

    2 C = (2 ts + tp)/(3 G A) + (8 ts^3 + 16 ts^2 tp + 8 ts tp^2 + tp^3)/(192 Ef I) + (1/ts)(1/Ef + 1/Es)
    + (2/tp)(1/Ef + 1/Ep), p the main plate and s one of two equal straps. The published constant, 2 C, is slip per load
    of *one* shear plane. Its shank terms are those of a beam pressed evenly by the plates, its ends held against
    rotation, and its middle's deflection against its ends: so derived anew for this project, digit for digit.

    Parameters
    ----------
    t_main, t_strap, diameter : array_like
        Thickness of the middle plate and of one outer one, shank diameter [mm].
    e_main, e_strap, e_fastener : array_like
        Young's moduli [MPa].
    poisson_fastener : array_like

    Returns
    -------
    ndarray
        Flexibility per total fastener load [mm/N].

    References
    ----------
    Tate and Rosenfeld 1946, NACA TN 1051, from memory; key ``tate-rosenfeld-1946``.

    Examples
    --------
    >>> round(1e6 * float(tate_rosenfeld_1946_double(2.0, 1.2, 4.7625, 72e3, 72e3, 205e3, 0.3)), 3)
    17.779
    """
    tp, ts, d, ep, es, ef, nu = _floats(t_main, t_strap, diameter, e_main, e_strap, e_fastener, poisson_fastener)
    shear_stiffness, bending_stiffness = _shank(d, ef, nu)
    shear = (2 * ts + tp) / (3 * shear_stiffness)
    bend = (8 * ts**3 + 16 * ts**2 * tp + 8 * ts * tp**2 + tp**3) / (192 * bending_stiffness)
    bearing = (1 / ef + 1 / es) / ts + 2 * (1 / ef + 1 / ep) / tp
    return np.asarray((shear + bend + bearing) / 2)


def _shank(diameter: Array, modulus: Array, poisson: Array) -> tuple[Array, Array]:
    """Return the shear stiffness G A [N] and the bending stiffness E I [N mm^2] of a round shank."""
    area, inertia = np.pi * diameter**2 / 4, np.pi * diameter**4 / 64
    return modulus / (2 * (1 + poisson)) * area, modulus * inertia

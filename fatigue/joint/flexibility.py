"""Fastener flexibility: how far a fastener lets two sheets slide per newton it carries [mm/N].

Every formula gives the flexibility per *total* fastener load, also in double shear.
"""

from __future__ import annotations

import numpy as np


def huth_1986(
    t1: float, t2: float, diameter: float, e1: float, e2: float, e_fastener: float, *, riveted: bool, shear_planes: int = 1
) -> float:
    """Return the flexibility of a fastener by Huth's formula.

    C = ((t1 + t2)/(2 d))^a (b/n) [1/(t1 E1) + 1/(n t2 E2) + 1/(2 t1 Ef) + 1/(2 n t2 Ef)] with a = 2/5, b = 2.2 for
    riveted and a = 2/3, b = 3.0 for bolted metal joints. In double shear (n = 2) sheet 1 is the middle one and t2 one
    of the outer ones.

    Parameters
    ----------
    t1, t2 : float
        Sheet thicknesses [mm].
    diameter : float
        Shank diameter [mm].
    e1, e2, e_fastener : float
        Young's moduli [MPa].
    riveted : bool
        Rivet rather than bolt or pin.
    shear_planes : int
        1 or 2.

    Returns
    -------
    float
        Flexibility [mm/N].

    References
    ----------
    Huth 1986; key ``huth-1986``.

    Examples
    --------
    >>> round(1e6 * huth_1986(1.2, 1.2, 4.0, 72e3, 72e3, 72e3, riveted=True), 3)
    47.193
    """
    a, b = (2 / 5, 2.2) if riveted else (2 / 3, 3.0)
    n = shear_planes
    sheets = 1 / (t1 * e1) + 1 / (n * t2 * e2)
    shank = 1 / (2 * t1 * e_fastener) + 1 / (2 * n * t2 * e_fastener)
    return ((t1 + t2) / (2 * diameter)) ** a * (b / n) * (sheets + shank)


def swift_1971(t1: float, t2: float, diameter: float, e1: float, e2: float, e_fastener: float) -> float:
    """Return the flexibility of an aluminium rivet in single shear by Swift's formula.

    C = 5/(d Ef) + 0.8 [1/(t1 E1) + 1/(t2 E2)].

    Parameters
    ----------
    t1, t2, diameter : float
        Sheet thicknesses and shank diameter [mm].
    e1, e2, e_fastener : float
        Young's moduli [MPa].

    Returns
    -------
    float
        Flexibility [mm/N].

    References
    ----------
    Swift 1971; key ``swift-1971``.

    Examples
    --------
    >>> round(1e6 * swift_1971(1.2, 1.2, 4.0, 72e3, 72e3, 72e3), 3)
    35.88
    """
    return 5 / (diameter * e_fastener) + 0.8 * (1 / (t1 * e1) + 1 / (t2 * e2))


def tate_rosenfeld_1946(
    t1: float, t2: float, diameter: float, e1: float, e2: float, e_fastener: float, poisson_fastener: float
) -> float:
    """Return the flexibility of a bolt in single shear by Tate and Rosenfeld's formula.

    C = 4(t1+t2)/(9 G A) + (t1^3 + 5 t1^2 t2 + 5 t1 t2^2 + t2^3)/(40 Ef I) + (1/t1)(1/Ef + 1/E1) + (1/t2)(1/Ef + 1/E2)
    with the shank's area A, second moment I and shear modulus G = Ef/(2(1+nu)).

    Parameters
    ----------
    t1, t2, diameter : float
        Sheet thicknesses and shank diameter [mm].
    e1, e2, e_fastener : float
        Young's moduli [MPa].
    poisson_fastener : float

    Returns
    -------
    float
        Flexibility [mm/N].

    References
    ----------
    Tate and Rosenfeld 1946, NACA TN 1051; key ``tate-rosenfeld-1946``.

    Examples
    --------
    >>> round(1e6 * tate_rosenfeld_1946(1.6, 1.6, 4.7625, 72e3, 72e3, 72e3, 0.33), 3)
    38.348
    """
    area, inertia = np.pi * diameter**2 / 4, np.pi * diameter**4 / 64
    shear_modulus = e_fastener / (2 * (1 + poisson_fastener))
    shear = 4 * (t1 + t2) / (9 * shear_modulus * area)
    bend = (t1**3 + 5 * t1**2 * t2 + 5 * t1 * t2**2 + t2**3) / (40 * e_fastener * inertia)
    bearing = (1 / e_fastener + 1 / e1) / t1 + (1 / e_fastener + 1 / e2) / t2
    return float(shear + bend + bearing)

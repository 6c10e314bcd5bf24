"""Elastic stress concentration at a circular hole, each factor on its own nominal stress."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.interpolate import PchipInterpolator
from scipy.special import kve

Array = NDArray[np.float64]

COSINE_BEARING = 8 / np.pi**2
"""Hoop stress at 90 deg over bearing stress F/(d t), cosine pressure on half the edge of a hole in a wide sheet."""

LARGEST_ROW_RATIO = 0.5
"""Largest d/pitch the row factor was computed for."""

_ROW = PchipInterpolator([0.0, 0.2, 0.25, 0.3, 0.5], [3.0, 3.011, 3.021, 3.039, 3.249])


def isolated_strip(width_ratio: ArrayLike) -> Array:
    """Return the factor on gross stress of a central hole in a strip under tension.

    K = [2 + (1 - x)^3]/(1 - x), within 2 % of Howland's values to x = 0.5.

    Parameters
    ----------
    width_ratio : array_like
        x = d/W, 0 <= x < 1.

    Returns
    -------
    ndarray

    References
    ----------
    Heywood 1952, Howland 1930; keys ``heywood-1952``, ``howland-1930``.

    Examples
    --------
    >>> round(float(isolated_strip(0.2)), 3)
    3.14
    """
    x = np.asarray(width_ratio, dtype=np.float64)
    return np.asarray((2 + (1 - x) ** 3) / (1 - x))


def row_of_holes(width_ratio: ArrayLike) -> Array:
    """Return the factor on gross stress of a row of equal holes across the load, which shield each other.

    Monotone interpolation of plane-stress finite-element values (3.011, 3.021, 3.039, 3.249 at x = 0.2, 0.25, 0.3, 0.5;
    3 as x -> 0). Beyond x = 0.5 the net-section factor is held; that is outside the computed range.

    Parameters
    ----------
    width_ratio : array_like
        x = d/pitch, 0 <= x < 1.

    Returns
    -------
    ndarray

    References
    ----------
    Computed for this project; key ``row-of-holes``.

    Examples
    --------
    >>> round(float(row_of_holes(0.25)), 3)
    3.021
    """
    x = np.asarray(width_ratio, dtype=np.float64)
    inside = _ROW(np.minimum(x, LARGEST_ROW_RATIO))
    net = float(_ROW(LARGEST_ROW_RATIO)) * (1 - LARGEST_ROW_RATIO)
    return np.where(x <= LARGEST_ROW_RATIO, inside, net / (1 - x))


def bending_thin_sheet(poisson: ArrayLike) -> Array:
    """Return the factor on bending stress of a hole much wider than the sheet is thick: (5 + 3 nu)/(3 + nu).

    References
    ----------
    Goodier 1936, Reissner 1945; keys ``goodier-1936``, ``reissner-1945``.

    Examples
    --------
    >>> round(float(bending_thin_sheet(0.33)), 4)
    1.7988
    """
    nu = np.asarray(poisson, dtype=np.float64)
    return np.asarray((5 + 3 * nu) / (3 + nu))


def bending_any_sheet(poisson: ArrayLike, diameter_ratio: ArrayLike) -> Array:
    """Return the factor on bending stress of a hole in a sheet of any thickness, by Reissner's theory of plates.

    K = 1 + 2 (1 + nu)/(3 + nu - 4 K1(m)/(m K2(m))), m = sqrt(10) d/(2 t), K1 and K2 Bessel's functions: 3 for a thick
    sheet, (5 + 3 nu)/(3 + nu) for a thin one.

    Parameters
    ----------
    poisson : array_like
    diameter_ratio : array_like
        d/t >= 0.

    Returns
    -------
    ndarray

    Notes
    -----
    An infinite sheet; linear through the thickness, which the theory assumes.

    References
    ----------
    Reissner 1945, solved anew for this project in the form given; key ``reissner-1945``.

    Examples
    --------
    >>> round(float(bending_any_sheet(0.3, 4 / 1.2)), 3)
    1.958
    """
    nu = np.asarray(poisson, dtype=np.float64)
    m = np.maximum(np.sqrt(10) / 2 * np.asarray(diameter_ratio, dtype=np.float64), 1e-6)
    return np.asarray(1 + 2 * (1 + nu) / (3 + nu - 4 * kve(1, m) / (m * kve(2, m))))


def bearing(width_ratio: ArrayLike, k_bypass: ArrayLike) -> Array:
    """Return the factor on bearing stress F/(d t) in tension, the pin's reaction acting on one side only.

    K = 8/pi^2 + (x/2) K_bypass: cosine pressure in a wide sheet, plus half the pin load as remote stress.

    Parameters
    ----------
    width_ratio : array_like
        x = d/pitch.
    k_bypass : array_like
        Factor on gross stress at the same hole.

    References
    ----------
    Derived for this project from the classical pressure solution; key ``cosine-bearing``.
    """
    return np.asarray(COSINE_BEARING + np.asarray(width_ratio) / 2 * np.asarray(k_bypass))


def head_fixity_factor(head_fixity: ArrayLike) -> Array:
    """Return the peak over the mean bearing pressure through the thickness: 1 + 3 (1 - f).

    1 for heads that hold the shank straight, 4 for a free pin that tilts in single shear.

    References
    ----------
    Linear distribution of a rigid pin; key ``tilting-pin``.
    """
    return np.asarray(1 + 3 * (1 - np.asarray(head_fixity, dtype=np.float64)))

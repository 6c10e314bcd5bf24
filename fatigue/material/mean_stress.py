"""Mean-stress rules: the fully reversed stress amplitude that is as severe, and the strain-life ones."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.strain import StrainLife, life_at_strain, life_of_two_powers

Array = NDArray[np.float64]

MEANS = ("swt", "walker", "morrow", "none")
"""Rules of the strain life; ``none`` takes every loop as fully reversed."""


def goodman(amplitude: ArrayLike, mean: ArrayLike, ultimate: ArrayLike) -> Array:
    """Return sa / (1 - sm/su) [MPa]; key ``goodman-1899``.

    >>> round(float(goodman(100.0, 50.0, 450.0)), 3)
    112.5
    """
    return np.asarray(np.asarray(amplitude) / (1.0 - np.asarray(mean) / np.asarray(ultimate)))


def gerber(amplitude: ArrayLike, mean: ArrayLike, ultimate: ArrayLike) -> Array:
    """Return sa / (1 - (sm/su)^2) for a tensile mean [MPa]; key ``gerber-1874``."""
    return np.asarray(np.asarray(amplitude) / (1.0 - (np.asarray(mean) / np.asarray(ultimate)) ** 2))


def morrow(amplitude: ArrayLike, mean: ArrayLike, strength: ArrayLike) -> Array:
    """Return sa / (1 - sm/sf') [MPa]; key ``morrow-1968``."""
    return goodman(amplitude, mean, strength)


def smith_watson_topper(amplitude: ArrayLike, mean: ArrayLike) -> Array:
    """Return sqrt(s_max sa), 0 without tension [MPa]; key ``smith-watson-topper-1970``."""
    return walker(amplitude, mean, 0.5)


def walker(amplitude: ArrayLike, mean: ArrayLike, exponent: ArrayLike) -> Array:
    """Return s_max^(1-gamma) sa^gamma, 0 without tension [MPa]; key ``walker-1970``.

    >>> round(float(walker(100.0, 50.0, 0.56)), 3)
    119.531
    """
    top = np.maximum(np.asarray(amplitude) + np.asarray(mean), 0.0)
    gamma = np.asarray(exponent)
    return np.asarray(top ** (1.0 - gamma) * np.asarray(amplitude) ** gamma)


def loop_life(
    stress_low: ArrayLike, stress_high: ArrayLike, strain_range: ArrayLike, k: StrainLife, mean: str
) -> Array:
    """Return the cycles to failure of stress-strain loops, infinite where there is no damage.

    ``swt``: s_max ea = sf'^2/E (2N)^2b + sf' ef' (2N)^(b+c). ``walker``: the fully reversed life at ea times
    ((1-R)/2)^(-(1-gamma)/b). ``morrow``: the mean off sf' in the elastic term. ``none``: fully reversed. The first two
    see no damage where the loop is never in tension.

    Parameters
    ----------
    stress_low, stress_high : array_like
        Ends of the loop [MPa].
    strain_range : array_like
        Twice the strain amplitude ea.
    k : StrainLife
    mean : str
        One of `MEANS`.

    Raises
    ------
    ValueError
        On an unknown rule.

    References
    ----------
    Smith, Watson and Topper 1970; Walker 1970 with Dowling 2009; Morrow 1968; keys ``smith-watson-topper-1970``,
    ``walker-1970``, ``dowling-2009``, ``morrow-1968``.
    """
    if mean not in MEANS:
        raise ValueError(f"mean {mean!r} is none of {MEANS}")
    low, high = np.asarray(stress_low, dtype=np.float64), np.asarray(stress_high, dtype=np.float64)
    amplitude = np.asarray(strain_range, dtype=np.float64) / 2.0
    b, c = k.strength_exponent, k.ductility_exponent
    if mean == "swt":
        return life_of_two_powers(
            np.maximum(high, 0.0) * amplitude,
            k.strength_coefficient**2 / k.modulus,
            2.0 * b,
            k.strength_coefficient * k.ductility_coefficient,
            b + c,
        )
    if mean == "morrow":
        return life_at_strain(amplitude, k, (low + high) / 2.0)
    life = life_at_strain(amplitude, k)
    if mean == "none":
        return life
    tensile = high > 0.0
    half = np.where(tensile, (high - low) / (2.0 * np.where(tensile, high, 1.0)), 1.0)  # (1 - R)/2
    with np.errstate(over="ignore"):
        factor = np.maximum(half, 1e-300) ** (-(1.0 - k.walker) / b)
        return np.asarray(np.where(tensile, life * factor, np.inf))

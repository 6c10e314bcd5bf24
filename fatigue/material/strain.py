"""Strain-life: the cyclic stress-strain curve, Masing's branches and the Coffin-Manson line."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.two_powers import log_root

Array = NDArray[np.float64]


@dataclass(frozen=True)
class StrainLife:
    """Cyclic constants of a material.

    Parameters
    ----------
    name : str
    modulus : float
        E [MPa].
    strength_coefficient, strength_exponent : float
        sf' [MPa] and b (Basquin).
    ductility_coefficient, ductility_exponent : float
        ef' and c (Coffin, Manson).
    cyclic_strength, cyclic_exponent : float
        K' [MPa] and n' of the cyclic curve (Ramberg, Osgood).
    walker : float
        Walker's exponent gamma: 0 the maximum alone counts, 1 the amplitude alone.
    notch_length : float
        Peterson's length a: K_f = 1 + (K_t - 1)/(1 + a/r) [mm].
    source, how : str
    walker_source, notch_length_source : str
    """

    name: str
    modulus: float
    strength_coefficient: float
    strength_exponent: float
    ductility_coefficient: float
    ductility_exponent: float
    cyclic_strength: float
    cyclic_exponent: float
    walker: float
    notch_length: float
    source: str = ""
    how: str = ""
    walker_source: str = ""
    notch_length_source: str = ""


def cyclic_strain(stress: ArrayLike, k: StrainLife) -> Array:
    """Return the strain on the cyclic curve, sigma/E + (sigma/K')^(1/n'), odd in the stress.

    Parameters
    ----------
    stress : array_like
        [MPa]
    k : StrainLife

    References
    ----------
    Ramberg and Osgood 1943; key ``ramberg-osgood-1943``.
    """
    s = np.asarray(stress, dtype=np.float64)
    return np.asarray(s / k.modulus + np.sign(s) * (np.abs(s) / k.cyclic_strength) ** (1.0 / k.cyclic_exponent))


def branch_strain(stress_range: ArrayLike, k: StrainLife) -> Array:
    """Return the strain range of a loop's branch: the cyclic curve at twice the scale.

    d_eps = d_sigma/E + 2 (d_sigma / 2K')^(1/n')

    Parameters
    ----------
    stress_range : array_like
        [MPa]
    k : StrainLife

    References
    ----------
    Masing 1926; key ``masing-1926``.
    """
    return 2.0 * cyclic_strain(np.asarray(stress_range, dtype=np.float64) / 2.0, k)


def life_strain(cycles: ArrayLike, k: StrainLife, mean_stress: ArrayLike = 0.0) -> Array:
    """Return the strain amplitude that lasts N cycles: (sf' - sm)/E (2N)^b + ef' (2N)^c.

    Parameters
    ----------
    cycles : array_like
    k : StrainLife
    mean_stress : array_like
        Morrow's, on the elastic term [MPa].

    References
    ----------
    Basquin 1910, Coffin 1954, Manson 1953, Morrow 1968; keys ``basquin-1910``, ``coffin-1954``, ``manson-1953``,
    ``morrow-1968``.
    """
    reversals = 2.0 * np.asarray(cycles, dtype=np.float64)
    elastic = (k.strength_coefficient - np.asarray(mean_stress)) / k.modulus * reversals**k.strength_exponent
    return np.asarray(elastic + k.ductility_coefficient * reversals**k.ductility_exponent)


def life_of_two_powers(target: ArrayLike, first: ArrayLike, p: float, second: ArrayLike, q: float) -> Array:
    """Return the N at which first (2N)^p + second (2N)^q equals a target; infinite for a target of 0 or less.

    Parameters
    ----------
    target, first, second : array_like
        At least 0, not both coefficients 0; broadcast.
    p, q : float
        Negative exponents.
    """
    want = np.asarray(target, dtype=np.float64)
    damaging = want > 0.0
    with np.errstate(divide="ignore"):
        log_first, log_second = np.log(first), np.log(second)
    log_reversals = log_root(log_first, p, log_second, q, np.log(np.where(damaging, want, 1.0)))
    with np.errstate(over="ignore"):
        return np.asarray(np.where(damaging, np.exp(log_reversals) / 2.0, np.inf))


def life_at_strain(amplitude: ArrayLike, k: StrainLife, mean_stress: ArrayLike = 0.0) -> Array:
    """Return the cycles to failure at a strain amplitude, with Morrow's mean stress if any.

    Parameters
    ----------
    amplitude : array_like
        Strain amplitude.
    k : StrainLife
    mean_stress : array_like
        [MPa]; above sf' nothing is left and the elastic term vanishes.

    Examples
    --------
    >>> from fatigue.material.library import strain_life
    >>> round(float(life_at_strain(0.01, strain_life("2024-T351"))))
    522
    """
    left = np.maximum(k.strength_coefficient - np.asarray(mean_stress, dtype=np.float64), 0.0) / k.modulus
    return life_of_two_powers(amplitude, left, k.strength_exponent, k.ductility_coefficient, k.ductility_exponent)

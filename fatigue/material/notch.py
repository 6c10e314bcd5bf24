"""Notch rules: from the stress an elastic sheet would have at the hole edge to the stress and strain it has."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.strain import StrainLife
from fatigue.material.two_powers import log_root

Array = NDArray[np.float64]

RULES = ("neuber", "energy-density", "elastic")


def notch_stress(elastic: ArrayLike, k: StrainLife, rule: str = "neuber") -> Array:
    """Return the stress at a notch on first loading, of the same sign as the elastic one.

    ``neuber``: sigma^2/E + sigma (sigma/K')^(1/n') = elastic^2/E. ``energy-density``: the plastic term times
    2/(n' + 1). ``elastic``: no plasticity.

    Parameters
    ----------
    elastic : array_like
        Elastic hole-edge stress [MPa].
    k : StrainLife
    rule : str
        One of `RULES`.

    Raises
    ------
    ValueError
        On an unknown rule.

    References
    ----------
    Neuber 1961; Molski and Glinka 1981; keys ``neuber-1961``, ``molski-glinka-1981``.

    Examples
    --------
    >>> from fatigue.material.library import strain_life
    >>> [round(float(notch_stress(600.0, strain_life("2024-T351"), rule)), 1) for rule in RULES]
    [454.4, 438.6, 600.0]
    """
    if rule not in RULES:
        raise ValueError(f"rule {rule!r} is none of {RULES}")
    e = np.asarray(elastic, dtype=np.float64)
    if rule == "elastic":
        return e.copy()
    n = k.cyclic_exponent
    weight = 1.0 if rule == "neuber" else 2.0 / (n + 1.0)
    size = np.abs(e)
    with np.errstate(divide="ignore"):
        log_size = np.log(size)
    safe = np.where(size > 0.0, log_size, 0.0)
    log_modulus = float(np.log(k.modulus))
    root = log_root(
        -log_modulus,
        2.0,
        float(np.log(weight)) - float(np.log(k.cyclic_strength)) / n,
        1.0 + 1.0 / n,
        2.0 * safe - log_modulus,
    )
    return np.asarray(np.where(size > 0.0, np.copysign(np.exp(root), e), 0.0))


def notch_range(elastic_range: ArrayLike, k: StrainLife, rule: str = "neuber") -> Array:
    """Return the stress range of a loop's branch: the rule on Masing's curve, twice that of half the range.

    Parameters
    ----------
    elastic_range : array_like
        [MPa]
    k : StrainLife
    rule : str
    """
    return 2.0 * notch_stress(np.asarray(elastic_range, dtype=np.float64) / 2.0, k, rule)


def sensitivity_factor(severity: ArrayLike, radius: ArrayLike, length: ArrayLike) -> Array:
    """Return K_f / K_t, K_f = 1 + (K_t - 1)/(1 + a/r): how much of the peak a notch's own gradient leaves to count.

    Parameters
    ----------
    severity : array_like
        K_t.
    radius : array_like
        r of the hole [mm].
    length : array_like
        a of the material [mm].

    References
    ----------
    Peterson 1974; key ``peterson-1974``.

    Examples
    --------
    >>> round(float(sensitivity_factor(3.0, 2.0, 0.51)), 4)
    0.8645
    """
    kt = np.asarray(severity, dtype=np.float64)
    kf = 1.0 + (kt - 1.0) / (1.0 + np.asarray(length) / np.asarray(radius))
    return np.asarray(kf / kt)

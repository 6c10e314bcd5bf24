"""Hysteresis loops at a hole edge, closed from counted cycles all at once."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.notch import notch_range, notch_stress
from fatigue.material.strain import StrainLife, branch_strain

Array = NDArray[np.float64]

BRANCHES = ("rising", "falling")
"""Branch of the largest loop that the smaller ones hang on."""


@dataclass(frozen=True, eq=False)
class Loops:
    """Closed loops of a repeating block.

    Parameters
    ----------
    stress_low, stress_high : ndarray, shape (L, n)
        [MPa]
    strain_range : ndarray, shape (L, n)
    top, bottom : ndarray, shape (L,)
        Stress at the tips of the largest loop [MPa].
    unloaded : ndarray, shape (L,)
        Stress with the remote load off, on the way down from the largest load [MPa].
    initial : ndarray, shape (L,)
        Elastic stress there before any load came: the fit's and the residual one [MPa].
    yields : ndarray of bool, shape (L,)
        Whether the largest load takes the edge more than 2 % past its elastic stress.
    """

    stress_low: Array
    stress_high: Array
    strain_range: Array
    top: Array
    bottom: Array
    unloaded: Array
    initial: Array
    yields: NDArray[np.bool_]


def closed_loops(
    low: Array,
    high: Array,
    k: StrainLife,
    *,
    residual: ArrayLike = 0.0,
    unloaded: ArrayLike = 0.0,
    rule: str = "neuber",
    branch: str = "rising",
) -> Loops:
    """Close the loops of counted cycles, the largest first.

    The block is taken from its largest elastic stress, of either sign and with the residual one, on the cyclic curve;
    from there the largest loop closes on Masing's branches, and every smaller one has its own branches and hangs on the
    rising or the falling one of the largest. A table of counted cycles has lost which: a loop inside lies between the
    two, so that ``rising`` gives its highest stress and ``falling`` its lowest.

    Parameters
    ----------
    low, high : ndarray, shape (L, n)
        Elastic hole-edge stress at the ends of each counted cycle, the fit's included, the residual one not [MPa].
    k : StrainLife
    residual : array_like, shape (L,)
        Stress before service that no load belongs to (expansion) [MPa]. It moves the first loading only: what yields
        there is lost, which is how a spectrum relaxes it.
    unloaded : array_like, shape (L,)
        Elastic stress with the remote load off: the fit's [MPa].
    rule : str
        Notch rule, one of `fatigue.material.notch.RULES`.
    branch : str
        One of `BRANCHES`.

    Returns
    -------
    Loops

    Raises
    ------
    ValueError
        On an unknown rule or branch.

    References
    ----------
    Masing 1926, Neuber 1961; the bounds derived for this project; keys ``masing-1926``, ``neuber-1961``,
    ``hanging-loops``.
    """
    if branch not in BRANCHES:
        raise ValueError(f"branch {branch!r} is none of {BRANCHES}")
    count = low.shape[0]
    start, fit = (np.broadcast_to(np.asarray(v, dtype=np.float64), (count,)) for v in (residual, unloaded))
    most, least = high.max(axis=1, initial=-np.inf), low.min(axis=1, initial=np.inf)
    if low.shape[1] == 0:
        most, least = fit, fit
    first_up = np.abs(most + start) >= np.abs(least + start)
    whole = notch_range(most - least, k, rule)
    first = notch_stress(np.where(first_up, most, least) + start, k, rule)
    top = np.where(first_up, first, first + whole)
    bottom = top - whole

    stress_range = notch_range(high - low, k, rule)
    if branch == "rising":
        stress_high = bottom[:, None] + notch_range(high - least[:, None], k, rule)
        stress_low = stress_high - stress_range
    else:
        stress_low = top[:, None] - notch_range(most[:, None] - low, k, rule)
        stress_high = stress_low + stress_range
    strain_range = branch_strain(stress_range, k) if rule != "elastic" else stress_range / k.modulus
    return Loops(
        stress_low=stress_low,
        stress_high=stress_high,
        strain_range=strain_range,
        top=top,
        bottom=bottom,
        unloaded=top - notch_range(np.maximum(most - fit, 0.0), k, rule),
        initial=fit + start,
        yields=np.abs(first) < 0.98 * np.abs(np.where(first_up, most, least) + start),
    )

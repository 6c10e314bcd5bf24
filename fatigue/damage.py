"""Miner's sum: damage per flight from mapped cycles."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


def damage_per_cycle(life: Array, count: Array) -> Array:
    """Return each counted cycle's part of Miner's sum, n / N.

    Parameters
    ----------
    life : ndarray, shape (..., n)
        Cycles to failure of each counted cycle at each point; infinite where it does no damage.
    count : ndarray, shape (n,)
        How often each cycle comes in a flight.

    Returns
    -------
    ndarray, shape (..., n)

    References
    ----------
    Palmgren 1924, Miner 1945; key ``miner-1945``.

    Examples
    --------
    >>> damage_per_cycle(np.array([1e5, np.inf]), np.array([2.0, 1e6]))
    array([2.e-05, 0.e+00])
    """
    return np.asarray(count / life)


def life_in_flights(damage: Array, damage_sum: float = 1.0) -> Array:
    """Return the flights until Miner's sum reaches `damage_sum`; infinite where there is no damage.

    Parameters
    ----------
    damage : ndarray
        Damage per flight.
    damage_sum : float
        Miner sum at failure.
    """
    with np.errstate(divide="ignore", over="ignore"):
        return np.asarray(damage_sum / np.asarray(damage, dtype=np.float64))


def shortest(life: Array) -> int:
    """Return the place of the shortest life; of lives alike but for rounding, the first.

    Examples
    --------
    >>> shortest(np.array([7e4, 5e4 * (1 + 1e-14), 5e4]))
    1
    """
    return int(np.argmin(np.round(np.log(np.maximum(life, 1e-300)), 9)))

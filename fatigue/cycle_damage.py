"""Damage of any counted table at the governing location of an estimate: what an edit or a grid of the loads changes."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fatigue.damage import damage_per_cycle
from fatigue.filled import mapped
from fatigue.life import Estimate
from spectra import Cycles

Array = NDArray[np.float64]


def cycle_damage(estimate: Estimate, cycles: Cycles) -> Array:
    """Return the damage of each cycle of a table at the estimate's governing location, by the case's route.

    The same map from remote to local stress and the same S-N curve as the estimate's own cycles; where the estimate
    counted the local history anew, this is the damage of the mapped cycles.

    Parameters
    ----------
    estimate : Estimate
    cycles : Cycles
        Of the remote gross stress [MPa].

    Returns
    -------
    ndarray, shape (n,)

    Raises
    ------
    ValueError
        If a cycle goes beyond the stresses the estimate was made for.

    Examples
    --------
    >>> import fatigue
    >>> estimate = fatigue.estimate(fatigue.read_case(fatigue.demo_case()))
    >>> own = cycle_damage(estimate, estimate.loads.cycles)
    >>> bool(np.allclose(own, estimate.route.by_cycle[estimate.governing]))
    True
    """
    if not len(cycles):
        return np.empty(0)
    levels, here = estimate.local.levels, estimate.governing
    slack = 1e-9 * max(abs(levels[0]), abs(levels[-1]))
    if cycles.low.min() < levels[0] - slack or cycles.high.max() > levels[-1] + slack:
        raise ValueError(
            f"cycles go from {cycles.low.min():g} to {cycles.high.max():g} MPa, the estimate from {levels[0]:g} to "
            f"{levels[-1]:g}: estimate again with these loads"
        )
    first, second = (mapped(estimate.route.peak[[here]], levels, end) for end in (cycles.low, cycles.high))
    life = estimate.curves.only(here).life(np.minimum(first, second), np.maximum(first, second))
    return np.asarray(damage_per_cycle(life, cycles.count)[0])

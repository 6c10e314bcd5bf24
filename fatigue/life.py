"""The orchestrator: the one place that knows the order of the stages.

Loads are counted once, on the remote gross stress S. Every location maps the counted pairs through its own
S -> hole-edge stress, looks up its own S-N curve and sums its own damage.
"""

from __future__ import annotations

import warnings
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pandas as pd
from numpy.typing import NDArray

import spectra
from fatigue import flags as flagging
from fatigue.case.build import Case
from fatigue.damage import damage_per_cycle, life_in_flights
from fatigue.inspection import ThresholdFactor, inspection_priority, threshold_factor
from fatigue.joint import Joint, solve_joint
from fatigue.loads import CountedLoads, count_loads
from fatigue.local import LocalStress, local_stress
from fatigue.material.curves import LocationCurves
from spectra import Cycles

Array = NDArray[np.float64]
Progress = Callable[[int, int], None]

MOST_LEVELS = 1001
"""Load levels the maps are evaluated at: the counted extremes themselves while they are fewer, else a grid."""


@dataclass(frozen=True, eq=False)
class Estimate:
    """Lives of every location of a splice and all that led to them.

    Arrays over locations follow `case.splice.locations`; `rows` is sorted worst first and `order` tells which location
    stands on each of its lines.

    Parameters
    ----------
    case : Case
    loads : CountedLoads
        Cycles of the remote gross stress per flight [MPa].
    joint : Joint
        Row loads and bending.
    local : LocalStress
        Hole-edge stress of each route at the load levels.
    curves : LocationCurves
        One S-N curve per location.
    damage : dict of ndarray, shape (L, n)
        Damage per flight of each counted cycle, by route.
    threshold : ThresholdFactor
    rows : DataFrame
        One line per location, worst first; the columns of ``rows.csv``.
    order : ndarray of int, shape (L,)
    """

    case: Case
    loads: CountedLoads
    joint: Joint
    local: LocalStress
    curves: LocationCurves
    damage: dict[str, Array]
    threshold: ThresholdFactor
    rows: pd.DataFrame
    order: NDArray[np.int64]

    @property
    def governing(self) -> int:
        """Index of the governing location in `case.splice.locations`."""
        return int(self.order[0])


def estimate(case: Case, loads: CountedLoads | None = None, on_progress: Progress | None = None) -> Estimate:
    """Estimate the flights to a crack at every row and sheet of a splice.

    Parameters
    ----------
    case : Case
    loads : CountedLoads, optional
        Loads already counted by `count_loads`, to share one count between variants.
    on_progress : callable, optional
        Called with stages done and stages in all.

    Returns
    -------
    Estimate

    Raises
    ------
    InputFaults
        If the loads cannot be read.

    Examples
    --------
    >>> import fatigue
    >>> estimate = fatigue.estimate(fatigue.read_case(fatigue.demo_case()))
    >>> estimate.rows.loc[0, "row"] in ("A", "C")
    True
    """
    report = on_progress or (lambda done, total: None)
    report(0, 4)
    loads = loads or count_loads(case)
    cycles = loads.cycles
    report(1, 4)
    joint = solve_joint(case.splice)
    levels = load_levels(cycles)
    local = local_stress(case.splice, joint, levels, severity_cycle(cycles))
    report(2, 4)
    curves = location_curves(case, local.severity)
    low, high, recounted = {}, {}, {}
    damage = {}
    for route, peak in local.peak.items():
        damage[route], recounted[route] = route_damage(peak, levels, loads, curves)
    report(3, 4)
    factor = threshold_factor(case.inspection)
    rows, order = table(case, loads, joint, local, curves, damage, recounted[case.life.credit], factor)
    report(4, 4)
    return Estimate(case, loads, joint, local, curves, damage, factor, rows, order)

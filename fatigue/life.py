"""The orchestrator: the one place that knows the order of the stages.

Loads are counted once, on the remote gross stress S. Every location maps the counted pairs through its own map from S
to hole-edge stress, looks up its own S-N curve and sums its own damage.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
import pandas as pd
from numpy.typing import NDArray

import spectra
from fatigue.case.build import Case
from fatigue.damage import damage_per_cycle, life_in_flights
from fatigue.filled import FilledHoles, Governing, filled_holes, governing_point, mapped
from fatigue.folds import SEEN, by_way_of, spanned, turning_levels
from fatigue.inspection import ThresholdFactor, threshold_factor
from fatigue.joint import Joint, solve_joint
from fatigue.loads import CountedLoads, count_loads
from fatigue.local import LocalStress, local_stress
from fatigue.material.curves import CurveFamily, LocationCurves, stacked
from fatigue.second import SecondOpinion, judged, second_opinion
from fatigue.table import ranked_table
from spectra import Cycles

Array = NDArray[np.float64]

MOST_LEVELS = 1001
"""Load levels a map is evaluated at: the counted extremes themselves while they are fewer, else an even grid."""


@dataclass(frozen=True, eq=False)
class RouteResult:
    """Damage of every location by one route.

    Parameters
    ----------
    peak : ndarray, shape (L, m)
        Hoop stress at the load levels, at the point of the edge that governs [MPa].
    low, high : ndarray, shape (L, n)
        Least and largest local stress in each counted cycle [MPa].
    by_cycle : ndarray, shape (L, n)
        Damage per flight of each counted cycle.
    damage : ndarray, shape (L,)
        Damage per flight.
    life : ndarray, shape (L,)
        Flights to the damage sum at failure.
    recounted : ndarray of bool, shape (L,)
        Whether the local history was counted anew, the map not being monotone.
    folded : ndarray of bool, shape (L,)
        Whether the map is not monotone but there is no history to count anew.
    """

    peak: Array
    low: Array
    high: Array
    by_cycle: Array
    damage: Array
    life: Array
    recounted: NDArray[np.bool_]
    folded: NDArray[np.bool_]


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
        Hole-edge stress without credit at the load levels.
    filled : FilledHoles
        Hole-edge stress with the pin's contact solved.
    points : Governing
        Where each edge fails by route `contact`.
    curves : LocationCurves
        One S-N curve per location.
    routes : dict of RouteResult
        ``none``, ``practice`` and ``contact``; ``snug`` is contact with no credit for interference or making.
    opinion : SecondOpinion
        Local-strain lives by the case's own route.
    threshold : ThresholdFactor
    rows : DataFrame
        One line per location, worst first; the columns of ``rows.csv``.
    order : ndarray of int, shape (L,)
    """

    case: Case
    loads: CountedLoads
    joint: Joint
    local: LocalStress
    filled: FilledHoles
    points: Governing
    curves: LocationCurves
    routes: dict[str, RouteResult]
    opinion: SecondOpinion
    threshold: ThresholdFactor
    rows: pd.DataFrame
    order: NDArray[np.int64]

    @property
    def governing(self) -> int:
        """Index of the governing location in `case.splice.locations`."""
        return int(self.order[0])

    @property
    def route(self) -> RouteResult:
        """The result by the case's own route."""
        return self.routes[self.case.life.credit]


def estimate(
    case: Case, loads: CountedLoads | None = None, on_progress: Callable[[int, int], None] | None = None
) -> Estimate:
    """Estimate the flights to a crack at every row and sheet of a splice.

    Parameters
    ----------
    case : Case
    loads : CountedLoads, optional
        Loads already counted by `count_loads`, so that variants share one count.
    on_progress : callable, optional
        Called with the stages done and the stages in all.

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
    >>> fatigue.estimate(fatigue.read_case(fatigue.demo_case())).rows.loc[0, "row"]
    'A'
    """
    report = on_progress or (lambda done, total: None)
    loads = loads or count_loads(case)
    report(1, 4)
    largest = float(loads.cycles.high.max(initial=0.0))
    joint = solve_joint(case.splice, largest if largest > 0.0 else None)
    local = local_stress(case.splice, joint, load_levels(loads.cycles))
    report(2, 4)
    curves = location_curves(case, local, loads.cycles)
    filled = filled_holes(case.splice, joint, local)
    report(3, 4)
    points = governing_point(filled.credited, local.levels, loads.cycles, curves)
    snug = governing_point(filled.uncredited, local.levels, loads.cycles, curves)
    peaks = {"none": local.untreated, "practice": local.practice, "contact": points.peak, "snug": snug.peak}
    routes = {
        name: route_result(peak, local.levels, loads, curves, case.life.damage_sum, case.loads.repeating)
        for name, peak in peaks.items()
    }
    opinions = {
        name: second_opinion(
            case, result, local.levels, loads.cycles.count, curves.severity, residual_stress(filled, points, name)
        )
        for name, result in routes.items()
        if name == case.life.credit or case.life.curve == "local-strain"
    }
    opinion = opinions[case.life.credit]
    if case.life.curve == "local-strain":
        routes = {name: judged(result, opinions[name]) for name, result in routes.items()}
        opinion = replace(opinion, parted=("",) * opinion.life.size)
    factor = threshold_factor(case.inspection)
    rows, order = ranked_table(case, loads, joint, local, filled, points, curves, routes, opinion, factor)
    report(4, 4)
    return Estimate(case, loads, joint, local, filled, points, curves, routes, opinion, factor, rows, order)


def residual_stress(filled: FilledHoles, points: Governing, route: str) -> Array:
    """Return the residual stress as made and what of it is in a route's map, shape (L, 2) [MPa]."""
    made = np.array([hole.residual_hoop for hole in filled.making])
    if route != "contact":
        return np.zeros((made.size, 2))
    every = np.arange(made.size)
    left = np.stack([part.left for part in filled.settled], axis=1)[every, points.way, points.point]
    return np.column_stack([made, left])


def load_levels(cycles: Cycles) -> Array:
    """Return the remote stresses the maps are evaluated at, rising, zero among them [MPa]."""
    extremes = np.unique(np.concatenate([cycles.low, cycles.high, [0.0]]))
    if extremes.size <= MOST_LEVELS:
        return extremes
    return np.unique(np.concatenate([np.linspace(extremes[0], extremes[-1], MOST_LEVELS), [0.0]]))


def location_curves(case: Case, local: LocalStress, cycles: Cycles) -> LocationCurves:
    """Return the S-N curve of every location: its severity K0 on its own sheet's family.

    K0 is the untreated local range over the net-section stress range in the spectrum's largest cycle, its part in
    tension; it depends on nothing else, so that one curve serves every cycle and route.
    """
    largest = int(np.argmax(cycles.range)) if len(cycles) else None
    low, high = (cycles.low[largest], cycles.high[largest]) if largest is not None else (0.0, 1.0)
    if high > 0.0 > low:
        # in compression the pin pushes on, which says nothing of how sharp the notch is
        low = 0.0
    if high == low:
        low, high = 0.0, 1.0
    if local.levels.size < 2:
        severity = np.array(local.factors.k_bypass)
    else:
        ends = np.array([low, high])
        peak, net = (np.diff(mapped(own, local.levels, ends))[:, 0] for own in (local.untreated, local.net))
        severity = np.abs(np.divide(peak, net, out=np.array(local.factors.k_bypass), where=net != 0.0))
    by_location: list[CurveFamily] = [
        case.families[case.splice.sheets[s].material.name] for _, s in case.splice.locations
    ]
    return stacked([family.at([k0], case.life.tail) for family, k0 in zip(by_location, severity, strict=True)])


def route_result(
    peak: Array, levels: Array, loads: CountedLoads, curves: LocationCurves, damage_sum: float, repeating: bool
) -> RouteResult:
    """Map the counted cycles through each location's peak stress and sum their damage.

    Parameters
    ----------
    peak : ndarray, shape (L, n)
        Hole-edge stress at the levels [MPa].
    levels : ndarray, shape (n,)
        Remote gross stress [MPa].
    loads : CountedLoads
    curves : LocationCurves
    damage_sum : float
        Miner sum at failure.
    repeating : bool
        Whether a local history that has to be counted anew repeats.
    """
    cycles = loads.cycles
    first, second = (mapped(peak, levels, end) for end in (cycles.low, cycles.high))
    low, high = np.minimum(first, second), np.maximum(first, second)
    # rounding may dent a flat map: only a fall that could be seen in a stress counts
    bent = (np.diff(peak, axis=1) < -SEEN * np.abs(peak).max(axis=1, initial=0.0)[:, None]).any(axis=1)
    turns = {int(i): turning_levels(peak[i], levels) for i in np.flatnonzero(bent)}
    for place, own_turns in turns.items():
        low[place], high[place] = spanned(peak[place], levels, own_turns, cycles.low, cycles.high)
    by_cycle = damage_per_cycle(curves.life(low, high), cycles.count)
    damage = by_cycle.sum(axis=1)
    recounted = bent & (loads.history is not None)
    for i in np.flatnonzero(recounted):
        assert loads.history is not None
        # the history passes every stress between its turning points, those where the map turns too
        path = by_way_of(loads.history.values, levels[turns[int(i)]], repeating)
        local = spectra.count(np.interp(path, levels, peak[i]), repeating)
        own = local.per_flight(loads.history.flights).merged()
        life = curves.only(int(i)).life(own.low[None], own.high[None])
        damage[i] = damage_per_cycle(life, own.count).sum()
    return RouteResult(
        peak=peak,
        low=low,
        high=high,
        by_cycle=by_cycle,
        damage=damage,
        life=life_in_flights(damage, damage_sum),
        recounted=recounted,
        folded=bent & ~recounted,
    )

"""Lives of very many variants of a splice at once.

Row loads and bending of every variant are solved as in `estimate`; the contact is looked up in `EdgeTable`, the S-N
curve in a table of log N against severity and stress. Cycles, points of the edge and ways of bending that never matter
are left out, and what that leaves out is counted.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fatigue.case.build import Case
from fatigue.damage import life_in_flights
from fatigue.filled import cyclic_curve, made_holes
from fatigue.hole import concentration
from fatigue.hole.countersink import countersink_factor
from fatigue.hole.edge import CRITICAL, bending_around, raised_loads
from fatigue.hole.edge_table import EdgeTable, coordinates, edge_table
from fatigue.hole.relaxation import surviving
from fatigue.hole.sheet import Edge
from fatigue.joint.beam import bending_stress, build_bender
from fatigue.joint.layout import JointArrays
from fatigue.joint.locations import LocationStress, location_loads, location_stress
from fatigue.joint.transfer import row_loads
from fatigue.life import Estimate, estimate
from fatigue.loads import CountedLoads
from fatigue.local import end_ratios
from fatigue.material.curves import CurveFamily
from fatigue.variation import Variation, varied_arrays, varied_splice
from spectra import Cycles
from spectra.faults import Fault, InputFaults

Array = NDArray[np.float64]

DAMAGE_KEPT = 1 - 1e-3
"""Share of each location's damage whose cycles are kept."""
MOST_CYCLES = 160
"""More kept cycles than these are merged, cell by cell of a grid."""
BLOCK = 512
"""Variants taken at a time, so that a block stays in the processor's cache."""
PILOT = 256
"""Variants that say which points of the edge and ways of bending matter."""
FAR = 30.0
"""Locations that live longer than this many times the first in every pilot variant are followed in the pilot only."""
SEVERITY_STEP, STRESS_STEP = 0.01, 0.0025
"""Steps of log10 K0 and log10 of the nominal equivalent stress in the curve's table."""
ENDLESS = 30.0
"""log10 N that stands for no damage."""


@dataclass(frozen=True, eq=False)
class BatchLives:
    """Lives of n variants at L locations, the case's damage sum included.

    Parameters
    ----------
    life : ndarray, shape (n, L)
        NaN at a location that was followed in the pilot only [flights].
    followed : ndarray of bool, shape (L,)
    pilot : ndarray, shape (p, L)
        Lives of the pilot's variants, every location.
    cycles : int
        Different cycles kept, of `cycles_of`.
    cycles_of : int
    damage_dropped : float
        Largest share of a location's damage in the cycles left out, on the case and at the ends of the load's span.
    points : tuple of tuple of int
        By location: number of points of the edge kept by each way of bending.
    """

    life: Array
    followed: NDArray[np.bool_]
    pilot: Array
    cycles: int
    cycles_of: int
    damage_dropped: float
    points: tuple[tuple[int, ...], ...]


@dataclass(frozen=True, eq=False)
class CurveTable:
    """log10 N of one family against log10 K0 and log10 nominal equivalent stress."""

    log_k: Array
    first: float
    log_life: Array
    kt: Array
    exponents: Array

    def exponent(self, severity: Array) -> Array:
        """Return A3 at severities already clipped to the family."""
        return np.asarray(np.interp(np.log(severity), np.log(self.kt), self.exponents))

    def look_up(self, severity: Array, log_stress: Array) -> Array:
        """Return log10 N; severity (n, 1, 1), log_stress (n, T, k)."""
        at = np.clip((np.log10(severity) - self.log_k[0]) / SEVERITY_STEP, 0.0, self.log_k.size - 1.000001)
        row = at.astype(np.int64)
        up = at - row
        width = self.log_life.shape[1]
        place = np.clip((log_stress - self.first) / STRESS_STEP, 0.0, width - 1.000001)
        column = place.astype(np.int64)
        along = place - column
        flat, index = self.log_life.ravel(), row * width + column
        low = np.take(flat, index) * (1 - along) + np.take(flat, index + 1) * along
        index += width
        high = np.take(flat, index) * (1 - along) + np.take(flat, index + 1) * along
        return np.asarray(low * (1 - up) + high * up)


def curve_table(family: CurveFamily, tail: str, severity: Array) -> CurveTable:
    """Tabulate a family over a span of severities."""
    kt = family.kt
    low, high = np.log10(np.clip([severity.min(), severity.max()], kt[0], kt[-1]))
    log_k = low + SEVERITY_STEP * np.arange(int(np.ceil((high - low) / SEVERITY_STEP)) + 2)
    log_s = np.arange(0.0, 3.3, STRESS_STEP)
    curves = family.at(10**log_k, tail)
    # a cycle from 0 whose equivalent is the stress wanted
    top = 10**log_s * curves.severity[:, None]
    life = np.log10(curves.life(np.zeros_like(top), top))
    return CurveTable(log_k, 0.0, np.minimum(life, ENDLESS), kt, np.array([m.a3 for m in family.members]))


class Batch:
    """A case ready for variants.

    Parameters
    ----------
    base : Estimate
    variants : Variation
        All the variants that will be asked for: tables span what they need.

    Raises
    ------
    InputFaults
        If the case has slack or is judged by local strain, which go one by one.
    """

    def __init__(self, base: Estimate, variants: Variation) -> None:
        self.base, self.case, self.variants = base, base.case, variants
        refuse(self.case, variants)
        self.cycles, self.cycles_of, self.dropped = kept_cycles(base, variants.load)
        ends = np.unique(
            np.concatenate([self.cycles.low, self.cycles.high, *[[v] for v in largest_cycle(base)], [0.0]])
        )
        self.levels = ends
        self.low, self.high = (np.searchsorted(ends, v) for v in (self.cycles.low, self.cycles.high))
        self.stress, self.bend, self.arrays, self.layout = self._joints()
        self.theta = np.array(CRITICAL)
        self.places = list(range(len(self.case.splice.locations)))
        self._fits()
        self._factors()
        self._tables()

    def _joints(self) -> tuple[LocationStress, Array, JointArrays, object]:
        variants, splice = self.variants, self.case.splice
        layout, arrays = varied_arrays(splice, variants)
        chain = row_loads(layout, arrays)
        stress = location_stress(layout, arrays, location_loads(layout, chain.segment))
        # a load c times as large bends as a joint of 1/c the stiffness does, in which only the arms' bend changes
        softer = replace(arrays, modulus=arrays.modulus / variants.load[:, None])
        top = float(self.base.loads.cycles.high.max(initial=0.0))
        bender = build_bender(layout, softer, top if top > 0.0 else None)
        bend = bending_stress(layout, bender, self.levels) * variants.load[:, None, None]
        return stress, bend, arrays, layout

    def _fits(self) -> None:
        splice, variants = self.case.splice, self.variants
        self.fit = np.empty((len(variants), len(self.places)))
        self.residual = np.empty_like(self.fit)
        made = made_holes(splice)
        for i, (r, s) in enumerate(splice.locations):
            added = variants.fit[:, r]
            if np.all(added == 0.0):
                self.fit[:, i], self.residual[:, i] = made[i].fit, made[i].residual_hoop
                continue
            nodes = np.linspace(added.min(), added.max() + 1e-9, 161)
            own = splice.locations.index((r, s))
            solved = []
            for node in nodes:
                hole = replace(splice.rows[r].hole, fit_percent=(splice.rows[r].hole.fit_percent or 0.0) + float(node))
                rows = tuple(replace(row, hole=hole) if k == r else row for k, row in enumerate(splice.rows))
                one = made_holes(replace(splice, rows=rows))[own]
                solved.append((one.fit, one.residual_hoop))
            table = np.array(solved)
            self.fit[:, i] = np.interp(added, nodes, table[:, 0])
            self.residual[:, i] = np.interp(added, nodes, table[:, 1])

    def _factors(self) -> None:
        splice, arrays, many = self.case.splice, self.arrays, len(self.variants)
        shape = (many, len(self.places))
        self.x, self.k_bend, self.sink, self.tilt = (np.empty(shape) for _ in range(4))
        holes = np.broadcast_to(arrays.at_holes, (many, *arrays.at_holes.shape[-2:]))
        diameters = np.broadcast_to(arrays.diameter, (many, arrays.diameter.shape[-1]))
        pitches = np.broadcast_to(arrays.pitch, (many, arrays.pitch.shape[-1]))
        for i, (r, s) in enumerate(splice.locations):
            t, d = holes[:, r, s], diameters[:, r]
            row = splice.rows[r]
            self.x[:, i] = d / pitches[:, r]
            ratio = d / t
            nodes = np.linspace(ratio.min(), ratio.max() + 1e-9, 41)
            factor = concentration.bending_any_sheet(splice.sheets[s].material.poisson, nodes)
            self.k_bend[:, i] = np.interp(ratio, nodes, factor)
            sunk = row.countersink is not None and row.countersink.sheet == s
            self.sink[:, i] = countersink_factor(row.countersink.depth, t, d / 2) if sunk and row.countersink else 1.0
            self.tilt[:, i] = concentration.head_fixity_factor(row.head_fixity)
        hole_in = concentration.row_of_holes if splice.edge == "row" else concentration.isolated_strip
        self.k_open = np.asarray(hole_in(self.x))

    def _loads(self, i: int, which: slice) -> tuple[Array, Array, Array]:
        """Return bypass and bearing with friction and tilt, and bending, shape (v, n)."""
        r, _ = self.case.splice.locations[i]
        scaled = self.variants.load[which, None] * self.levels
        bypass, bearing = (
            np.broadcast_to(v, (len(self.variants), len(self.places)))[which, i, None] * scaled
            for v in (self.stress.bypass, self.stress.bearing)
        )
        friction = self.case.splice.rows[r].hole.friction
        x, tilt = self.x[which, i, None], self.tilt[which, i, None]
        passing, pressing = raised_loads(bypass, bearing, x, tilt, friction)  # type: ignore[arg-type]
        return passing, pressing, self.bend[which, i]

    def _tables(self) -> None:
        splice = self.case.splice
        ends = end_ratios(splice, self.base.joint)
        needs: dict[tuple[float, ...], list[tuple[Array, Array, Array]]] = {}
        keys = []
        loaded = self.levels != 0.0
        for i, (r, s) in enumerate(splice.locations):
            material, pin = splice.sheets[s].material, splice.rows[r].fastener
            passing, pressing, bend = self._loads(i, slice(None))
            # a little more than bending can add: K_bend over the open hole's factor
            most = 1.05 * self.k_bend[:, i, None] / (self.k_open[:, i, None] * self.sink[:, i, None])
            fit = self.fit[:, i, None] * material.modulus
            turns, shares = [], [np.sign(self.fit[:, i])]
            for p in (passing, passing + most * bend):
                turn, share, _ = coordinates(p[:, loaded], pressing[:, loaded], fit)
                turns.append(turn.ravel())
                shares.append(share.ravel())
            key = (float(ends[i]), material.modulus, material.poisson, pin.modulus, pin.poisson)
            keys.append(key)
            needs.setdefault(key, []).append((self.x[:, i], np.concatenate(turns), np.concatenate(shares)))
        edge: Edge = "row" if splice.edge == "row" else "strip"
        made = {}
        for key, own in needs.items():
            x, turns, shares = (np.concatenate(parts) for parts in zip(*own, strict=True))
            made[key] = edge_table(edge, (float(x.min()), float(x.max())), *key, turns, shares, self.theta)
        self.tables = [made[key] for key in keys]
        self.severity = np.column_stack([self._severity(i) for i in self.places])
        self.curve = [
            curve_table(self.case.families[splice.sheets[s].material.name], self.case.life.tail, self.severity[:, i])
            for i, (_, s) in enumerate(splice.locations)
        ]

    def _plain(self, i: int, which: slice) -> tuple[Array, Array]:
        """Return the untreated peak and the net-section stress, shape (v, n)."""
        many, places = len(self.variants), len(self.places)
        scaled = self.variants.load[which, None] * self.levels
        bypass, transfer, bearing, incoming = (
            np.broadcast_to(v, (many, places))[which, i, None] * scaled
            for v in (self.stress.bypass, self.stress.transfer, self.stress.bearing, self.stress.incoming)
        )
        x = self.x[which, i]
        table = self.tables[i]
        pressure = table.pressure_at(x)
        sink, tilt = self.sink[which, i], self.tilt[which, i]
        k_bypass = (sink * self.k_open[which, i])[:, None]
        peak = (
            k_bypass * (bypass + transfer / 2)
            + (sink * tilt * pressure)[:, None] * np.abs(bearing)
            + self.k_bend[which, i, None] * self.bend[which, i]
        )
        return peak, incoming / (1 - x)[:, None]

    def _severity(self, i: int) -> Array:
        low, high = largest_cycle(self.base)
        at = [int(np.searchsorted(self.levels, v)) for v in (low, high)]
        peak, net = (v[:, at[1]] - v[:, at[0]] for v in self._plain(i, slice(None)))
        k_bypass = self.sink[:, i] * self.k_open[:, i]
        return np.abs(np.divide(peak, net, out=np.array(k_bypass), where=net != 0.0))

    def _hoop(self, i: int, way: int, points: NDArray[np.int64], table: EdgeTable, which: slice) -> Array:
        """Return hoop at the levels, shape (v, n, T), what is left of the residual stress included."""
        passing, pressing, bend = self._loads(i, which)
        fit, x = self.fit[which, i, None], self.x[which, i, None]
        sink, k_bend = self.sink[which, i, None], self.k_bend[which, i, None]
        if way == 0:
            passing = passing + k_bend / (table.open_at(x) * sink) * bend
        hoop = table.look_up(passing, pressing, fit, x)
        hoop *= sink[..., None]
        if way == 1:
            hoop += bend[..., None] * bending_around(self.theta[points], k_bend)[:, None, :]
        residual = self.residual[which, i]
        if residual.any():
            _, s = self.case.splice.locations[i]
            cyclic = cyclic_curve(self.case.splice.sheets[s].material)
            own = residual[:, None] + np.zeros((1, points.size))
            hoop += surviving(own, hoop.max(axis=1) + own, hoop.min(axis=1) + own, *cyclic)[:, None, :]
        return hoop

    def _damage(self, i: int, hoop: Array, which: slice) -> Array:
        """Return the damage per flight at every point, shape (v, T), of hoop (v, n, T)."""
        first, second = hoop[:, self.low], hoop[:, self.high]
        top = np.maximum(np.maximum(first, second), 1e-6)
        span = np.maximum(top - np.minimum(first, second), 1e-9)
        curve = self.curve[i]
        severity = np.clip(self.severity[which, i], curve.kt[0], curve.kt[-1])
        a3 = curve.exponent(severity)[:, None, None]
        log_stress = (1 - a3) * np.log10(top) + a3 * np.log10(span) - np.log10(severity)[:, None, None]
        log_life = curve.look_up(severity[:, None, None], log_stress)
        np.exp(-np.log(10.0) * log_life, out=log_life)
        return np.asarray(np.einsum("vkt,k->vt", log_life, self.cycles.count))

    def _ways(self) -> tuple[int, ...]:
        return (0, 1) if self.case.life.credit == "contact" else (2,)

    def pilot(self, sample: slice) -> tuple[Array, list[list[NDArray[np.int64]]]]:
        """Return damage at every location of a few variants, and the points that matter by location and way."""
        every = np.arange(self.theta.size)
        damage, keep = [], []
        for i in self.places:
            if self._ways() == (2,):
                damage.append(self._plain_damage(i, sample))
                keep.append([])
                continue
            by_way = np.stack(
                [self._damage(i, self._hoop(i, w, every, self.tables[i], sample), sample) for w in (0, 1)], axis=1
            )
            worst = by_way.max(axis=(1, 2))
            own = []
            for way in (0, 1):
                # a point matters where it comes within a few percent of the worst
                near = np.flatnonzero((by_way[:, way] > 0.97 * worst[:, None]).any(axis=0))
                if near.size:
                    near = np.arange(max(near.min() - 1, 0), min(near.max() + 2, every.size))
                own.append(near)
            damage.append(worst)
            keep.append(own)
        return np.column_stack(damage), keep

    def _plain_damage(self, i: int, which: slice) -> Array:
        peak, _ = self._plain(i, which)
        if self.case.life.credit == "practice":
            hole = self.case.splice.rows[self.case.splice.locations[i][0]].hole.practice
            peak = peak * (hole.hole * hole.filling)
        return self._damage(i, peak[:, :, None], which)[:, 0]

    def lives(self, everything: bool = False) -> BatchLives:
        """Return the lives of all variants.

        Parameters
        ----------
        everything : bool
            Follow every location, however far from being first.
        """
        many = len(self.variants)
        spread = slice(0, many, max(1, many // PILOT))
        first, keep = self.pilot(spread)
        damage_sum = self.case.life.damage_sum
        pilot = life_in_flights(first, damage_sum)
        with np.errstate(invalid="ignore"):
            near = pilot / pilot.min(axis=1, keepdims=True)
        followed = np.ones(len(self.places), dtype=np.bool_) if everything else np.nanmin(near, axis=0) < FAR
        damage = np.full((many, len(self.places)), np.nan)
        for i in np.flatnonzero(followed).tolist():
            small = [self.tables[i].only(points) for points in keep[i]]
            for begin in range(0, many, BLOCK):
                which = slice(begin, min(begin + BLOCK, many))
                if not keep[i]:
                    damage[which, i] = self._plain_damage(i, which)
                    continue
                damage[which, i] = np.max(
                    [
                        self._damage(i, self._hoop(i, way, points, small[way], which), which).max(axis=1)
                        for way, points in enumerate(keep[i])
                        if points.size
                    ],
                    axis=0,
                )
        return BatchLives(
            life=life_in_flights(damage, damage_sum),
            followed=followed,
            pilot=pilot,
            cycles=len(self.cycles),
            cycles_of=self.cycles_of,
            damage_dropped=self.dropped,
            points=tuple(tuple(int(p.size) for p in own) for own in keep),
        )


def refuse(case: Case, variants: Variation) -> None:
    """Refuse a case that cannot be solved in a batch."""
    faults = []
    for r, row in enumerate(case.splice.rows):
        if row.slack > 0.0:
            faults.append(
                Fault(
                    f"row {row.name!r}.slack_mm", "with slack, loads are not in proportion", "Take it out for studies."
                )
            )
        if row.hole.fit_percent is None and np.any(variants.fit[:, r] != 0.0):
            faults.append(
                Fault(
                    f"hole.{row.hole.name}",
                    "its fit cannot be varied while it follows from the squeeze ratio or is left out.",
                    "Give fit_percent.",
                )
            )
    if case.life.curve == "local-strain":
        faults.append(
            Fault("life.curve", '"local-strain" has no batch.', 'Use curve = "notched" for sweeps and scatter.')
        )
    if faults:
        raise InputFaults(case.source, faults)


def largest_cycle(base: Estimate) -> tuple[float, float]:
    """Return the spectrum's largest cycle, its part in tension, which the severity is taken over [MPa]."""
    cycles = base.loads.cycles
    largest = int(np.argmax(cycles.range))
    low, high = float(cycles.low[largest]), float(cycles.high[largest])
    return (0.0, high) if high > 0.0 > low else (low, high)


def kept_cycles(base: Estimate, load: Array) -> tuple[Cycles, int, float]:
    """Return the cycles that do the damage, how many there were, and the largest share of damage left out."""
    estimates = [base]
    for factor in {float(load.min()), float(load.max())} - {1.0}:
        estimates.append(estimate(base.case, scaled_loads(base.loads, factor)))
    shares = []
    for one in estimates:
        first = one.route.life.min()
        near = np.isfinite(one.route.life) & (one.route.life < 1e4 * first)
        by_cycle = one.route.by_cycle[near]
        total = by_cycle.sum(axis=1, keepdims=True)
        shares.append(by_cycle / np.where(total > 0, total, 1.0))
    share = np.concatenate(shares)
    order = np.argsort(-share, axis=1)
    running = np.cumsum(np.take_along_axis(share, order, axis=1), axis=1)
    needed = np.zeros(share.shape[1], dtype=np.bool_)
    for line, own in zip(running, order, strict=True):
        needed[own[: int(np.searchsorted(line, DAMAGE_KEPT)) + 1]] = True
    dropped = float((share[:, ~needed]).sum(axis=1).max(initial=0.0))
    cycles = base.loads.cycles
    kept = Cycles(cycles.low[needed], cycles.high[needed], cycles.count[needed])
    if len(kept) > MOST_CYCLES:
        kept = merged_on_grid(kept, share[:, needed].max(axis=0))
    return kept, len(cycles), dropped


def merged_on_grid(cycles: Cycles, weight: Array, lines: int = 40) -> Cycles:
    """Merge cycles cell by cell of a grid; each cell's mean is weighted by damage."""
    bottom, top = cycles.low.min(), cycles.high.max()
    cell = [((end - bottom) / (top - bottom) * (lines - 1e-9)).astype(np.int64) for end in (cycles.low, cycles.high)]
    _, which = np.unique(cell[0] * lines + cell[1], return_inverse=True)
    heavy = np.maximum(weight, 1e-300)
    total = np.bincount(which, heavy)
    low, high = (np.bincount(which, end * heavy) / total for end in (cycles.low, cycles.high))
    return Cycles(low, high, np.asarray(np.bincount(which, cycles.count), dtype=np.float64))


def scaled_loads(loads: CountedLoads, factor: float) -> CountedLoads:
    """Return counted loads with every stress multiplied."""
    history = None if loads.history is None else loads.history.scaled(factor)
    return replace(loads, cycles=loads.cycles.scaled(factor), history=history)


def direct_life(base: Estimate, variants: Variation, index: int) -> Array:
    """Return the lives of one variant by `estimate`, shape (L,) [flights]."""
    case = replace(base.case, splice=varied_splice(base.case.splice, variants, index))
    loads = scaled_loads(base.loads, float(variants.load[index]))
    return estimate(case, loads).route.life

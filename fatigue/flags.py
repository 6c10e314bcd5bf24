"""What a reader must know of a location before trusting its life."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from fatigue.case.build import Case
from fatigue.filled import FilledHoles, Governing
from fatigue.hole.concentration import LARGEST_ROW_RATIO
from fatigue.hole.countersink import KNIFE_EDGE, SMALLEST_SHANK
from fatigue.joint import Joint
from fatigue.local import LocalStress
from fatigue.material.curves import LocationCurves
from fatigue.splice import Splice

if TYPE_CHECKING:
    from fatigue.life import RouteResult

Array = NDArray[np.float64]

USUAL_EDGE = 2.0
"""Edge distance over hole diameter below which a hole is flagged (common practice, no source)."""
TOO_MUCH = 1.1
"""Life by practice factors over the life of the solved fit from which it is said."""
WORTH_KEEPING = 0.9
"""Share of a residual stress below which its loss in the first block is said."""
LARGEST_RESIDUAL = 0.02
"""Boundary stress over load that the sheet around a hole may be solved to without a flag."""
WORTH_SAYING = 0.01
"""Share of the damage that makes a doubtful part of it worth a flag."""


def geometry_flags(splice: Splice, joint: Joint, local: LocalStress) -> list[list[str]]:
    """Return each location's flags on its geometry, by location."""
    flags: list[list[str]] = []
    for i, (r, s) in enumerate(splice.locations):
        row, sheet, own = splice.rows[r], splice.sheets[s], []
        if local.factors.width_ratio[i] > LARGEST_ROW_RATIO:
            own.append(f"d/pitch {local.factors.width_ratio[i]:.2f} is beyond the {LARGEST_ROW_RATIO:g} computed")
        if row.countersink is not None and row.countersink.sheet == s:
            shank = 1 - row.countersink.depth / joint.thickness[i]
            if shank < KNIFE_EDGE:
                own.append(f"knife edge: straight shank b/t {shank:.2f}")
            if shank < SMALLEST_SHANK:
                own.append(f"countersink factor extrapolated below b/t {SMALLEST_SHANK:g}")
        ends_here = (sheet.end == "free" and r == sheet.last_row) or (sheet.start == "free" and r == sheet.first_row)
        if splice.staggered and _nearest_row(splice, r) < row.pitch:
            own.append("staggered rows nearer than their pitch: holes on the diagonal not modelled")
        if row.friction_share > 0.0:
            own.append(f"{100 * row.friction_share:g} % of the row's load by friction, as stated in the case")
        if row.slack > 0.0:
            closed = [joint.closing_stress[k] for k, (at, *_) in enumerate(joint.interfaces) if at == r]
            own.append(f"slack {row.slack:g} mm: the row takes load from {min(closed):.0f} MPa remote stress on")
        if ends_here and sheet.edge < USUAL_EDGE * row.hole_diameter:
            own.append(f"edge distance {sheet.edge / row.hole_diameter:.1f} d is under {USUAL_EDGE:g} d")
        flags.append(own)
    return flags


def _nearest_row(splice: Splice, row: int) -> float:
    """Return the distance to the nearest other row, infinite where there is none [mm]."""
    here = splice.rows[row].position
    return min((abs(other.position - here) for k, other in enumerate(splice.rows) if k != row), default=float("inf"))


def stress_flags(splice: Splice, joint: Joint, local: LocalStress) -> list[list[str]]:
    """Return each location's flags on the stress it sees, by location."""
    flags: list[list[str]] = []
    bottom = local.levels[0]
    for i, (_, s) in enumerate(splice.locations):
        material, own = splice.sheets[s].material, []
        net = local.net[i].max()
        if material.flag:
            own.append(material.flag)
        if net > material.ultimate:
            own.append(f"net section {net:.0f} MPa above the sheet's strength {material.ultimate:.0f} MPa")
        elif net > material.yield_stress:
            own.append(f"net section {net:.0f} MPa above yield {material.yield_stress:.0f} MPa")
        if bottom < 0.0 and joint.face[i] and splice.bending != "none":
            own.append("bending in compression held at its light-load arm")
        flags.append(own)
    return flags


def fit_flags(case: Case, filled: FilledHoles, points: Governing, routes: dict[str, RouteResult]) -> list[list[str]]:
    """Return each location's flags on what its fit is worth, by location."""
    flags: list[list[str]] = []
    practice, contact = routes["practice"].life, routes["contact"].life
    for i, (r, s) in enumerate(case.splice.locations):
        row, material, own = case.splice.rows[r], case.splice.sheets[s].material, [*filled.making[i].flags]
        hole = row.hole
        if case.life.credit == "contact" and hole.fit_percent is None and hole.squeeze_ratio is None:
            own.append(f"no fit given for hole {hole.name}: taken as snug")
        if practice[i] > TOO_MUCH * contact[i] and case.life.credit != "none":
            own.append(f"practice factors promise {practice[i] / contact[i]:.1f} times the life of the solved fit")
        before = filled.making[i].residual_hoop
        left = filled.settled[points.way[i]].credit_left[i, points.point[i]]
        if before < 0.0 and left < WORTH_KEEPING:
            own.append(f"the largest loads leave {100 * left:.0f} % of the residual stress {before:.0f} MPa")
        if before < 0.0 and not material.strain_life:
            own.append("cyclic curve assumed from the yield stress")
        if filled.maps.residual[i] > LARGEST_RESIDUAL:
            own.append(f"hole's surroundings solved to {100 * filled.maps.residual[i]:.0f} % only")
        if hole.friction > 0.0:
            own.append("friction as a stated multiplier, not solved")
        flags.append(own)
    return flags


def curve_flags(
    curves: LocationCurves,
    low: Array,
    high: Array,
    by_cycle: Array,
    recounted: NDArray[np.bool_],
    folded: NDArray[np.bool_],
) -> list[list[str]]:
    """Return each location's flags on its S-N curve and its counting, by location."""
    total = by_cycle.sum(axis=1)
    with np.errstate(divide="ignore", invalid="ignore"):
        share = np.where(total[:, None] > 0, by_cycle / total[:, None], 0.0)
    life = curves.life(low, high)
    tail = (share * (life > curves.tested_cycles[:, 1:])).sum(axis=1)
    short = (share * (life < curves.tested_cycles[:, :1])).sum(axis=1)
    ratio = (share * curves.outside_ratio(low, high)).sum(axis=1)
    flags: list[list[str]] = []
    for i in range(total.size):
        own = []
        if total[i] == 0.0:
            own.append("no damage: no cycle reaches the curve")
        if curves.given[i] != curves.severity[i]:
            own.append(f"severity {curves.given[i]:.2f} outside the family's K_t, taken at {curves.severity[i]:g}")
        for part, words in (
            (tail[i], "of the damage beyond the last tested life"),
            (short[i], "of the damage at lives shorter than tested"),
            (ratio[i], "of the damage at stress ratios not tested"),
        ):
            if part >= WORTH_SAYING:
                own.append(f"{100 * part:.0f} % {words}")
        if recounted[i]:
            own.append("map not monotone: local history counted anew")
        if folded[i]:
            own.append("map not monotone, no history to count anew: each cycle by the local stresses it spans")
        flags.append(own)
    return flags

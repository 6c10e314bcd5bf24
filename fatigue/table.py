"""The ranked table: one line per location, worst first."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from fatigue.case.build import Case
from fatigue.damage import damage_per_cycle, life_in_flights
from fatigue.filled import FilledHoles, Governing
from fatigue.flags import curve_flags, fit_flags, geometry_flags, stress_flags
from fatigue.hole.edge import worth
from fatigue.inspection import ThresholdFactor, inspection_priority
from fatigue.joint import Joint
from fatigue.loads import CountedLoads
from fatigue.local import LocalStress
from fatigue.material.curves import LocationCurves, stacked
from fatigue.second import SecondOpinion

if TYPE_CHECKING:
    from fatigue.life import RouteResult

Array = NDArray[np.float64]


def ranked_table(
    case: Case,
    loads: CountedLoads,
    joint: Joint,
    local: LocalStress,
    filled: FilledHoles,
    points: Governing,
    curves: LocationCurves,
    routes: dict[str, RouteResult],
    opinion: SecondOpinion,
    factor: ThresholdFactor,
) -> tuple[pd.DataFrame, NDArray[np.int64]]:
    """Return the frame behind ``rows.csv`` and the location on each of its lines.

    Stresses are those at the spectrum's largest remote stress, the three parts without credit; `peak_max_MPa` and
    `peak_min_MPa` are the extremes over the spectrum by the case's route.
    """
    splice, settings = case.splice, case.inspection
    own = routes[case.life.credit]
    no_credit = np.minimum(routes["none"].life, routes["snug"].life)
    basis = own.life if settings.use_credit else no_credit
    threshold = basis * factor.total
    share_used = np.where(np.isfinite(threshold), case.loads.flown_flights / threshold, 0.0)
    top = local.levels.size - 1
    loads_at_top = joint.loads(local.levels[top:])
    shared = joint.transfer
    if joint.slack is not None and local.levels[top] > 0.0:
        # late rows share as they do at the largest load
        remote = local.levels[top] * float(joint.arrays.first_thickness(joint.layout))
        shared = loads_at_top.transfer[:, 0] * joint.thickness / remote
    lower, upper = neighbour_lives(case, curves, own, loads)
    every = np.arange(joint.row.size)
    fit_worth = worth(filled.credited[every, points.way], local.untreated)
    left = np.stack([part.left for part in filled.settled], axis=1)
    by_way = life_in_flights(points.damage, case.life.damage_sum)
    flags = [
        [*a, *b, *c, *d, *filter(None, [e])]
        for a, b, c, d, e in zip(
            geometry_flags(splice, joint, local),
            stress_flags(splice, joint, local),
            fit_flags(case, filled, points, routes),
            curve_flags(curves, own.low, own.high, own.by_cycle, own.recounted, own.folded),
            opinion.parted,
            strict=True,
        )
    ]
    frame = pd.DataFrame(
        {
            "rank": 0,
            "row": [splice.rows[r].name for r in joint.row],
            "sheet": [splice.sheets[s].name for s in joint.sheet],
            "face": joint.face,
            "hidden": joint.hidden,
            "transfer_fraction": shared,
            "bypass_MPa": loads_at_top.bypass[:, 0],
            "bearing_MPa": loads_at_top.bearing[:, 0],
            "bending_MPa": local.bending[:, top] + 0.0,
            "k_bypass": local.factors.k_bypass,
            "k_bearing": local.factors.k_bearing,
            "k_bend": local.factors.k_bend,
            "peak_max_MPa": own.peak.max(axis=1),
            "peak_min_MPa": own.peak.min(axis=1),
            "from_bypass_MPa": local.parts.bypass[:, top],
            "from_bearing_MPa": local.parts.bearing[:, top],
            "from_bending_MPa": local.parts.bending[:, top] + 0.0,
            "fit_percent": [100 * hole.fit for hole in filled.making],
            "residual_MPa": [hole.residual_hoop for hole in filled.making],
            "residual_left_MPa": left[every, points.way, points.point],
            "angle_deg": filled.theta[points.point],
            "range_factor": fit_worth.range_factor[every, points.point],
            "mean_shift_MPa": fit_worth.mean_shift[every, points.point],
            "contact_from_deg": filled.maps.contact_from[:, top],
            "contact_to_deg": filled.maps.contact_to[:, top],
            "severity": curves.given,
            "damage_per_flight": own.damage,
            "life_flights": own.life,
            "life_none_flights": routes["none"].life,
            "life_practice_flights": routes["practice"].life,
            "life_contact_flights": routes["contact"].life,
            "life_bending_resisted_flights": by_way[:, 0],
            "life_bending_outside_flights": by_way[:, 1],
            "life_snug_flights": routes["snug"].life,
            "life_local_strain_flights": opinion.life,
            "stress_left_share": opinion.relaxed,
            "life_no_credit_flights": no_credit,
            "life_lower_kt_flights": lower,
            "life_upper_kt_flights": upper,
            "threshold_flights": threshold,
            "share_used": share_used,
            "priority": inspection_priority(share_used, threshold, joint.hidden),
            "flags": ["; ".join(own) for own in flags],
        }
    )
    # equal lives keep the order along the load, so that a symmetric joint always reads the same
    order = np.argsort(np.round(np.log(np.maximum(own.life, 1e-300)), 9), kind="stable")
    frame = frame.iloc[order].reset_index(drop=True)
    frame["rank"] = np.arange(1, order.size + 1)
    return frame, order.astype(np.int64)


def neighbour_lives(case: Case, curves: LocationCurves, own: RouteResult, loads: CountedLoads) -> tuple[Array, Array]:
    """Return the lives at the family's members on either side of each severity: the model's own spread."""
    lives = []
    for kt in curves.neighbours:
        families = [case.families[case.splice.sheets[s].material.name] for _, s in case.splice.locations]
        member = stacked([family.at([k], case.life.tail) for family, k in zip(families, kt, strict=True)])
        damage = damage_per_cycle(member.life(own.low, own.high), loads.cycles.count).sum(axis=1)
        lives.append(life_in_flights(damage, case.life.damage_sum))
    return lives[0], lives[1]

"""The section through a splice as plain shapes in millimetres, for a page that draws them itself."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.colors import to_hex

from fatigue.life import Estimate
from reports.figures.section import SHADES, at_hole, reach, sheet_outline
from reports.figures.style import DAMAGE


def section_shapes(estimate: Estimate) -> dict[str, Any]:
    """Return sheets, holes, fasteners and bay loads with their places [mm], y upwards.

    Colours by damage and outlines are those of the written report's section.
    """
    splice, joint = estimate.case.splice, estimate.joint
    left, right = reach(splice)
    edges = [left, *(row.position for row in splice.rows), right]
    beam = joint.beam
    bays = [
        {"sheet": s, "from": edges[i], "to": edges[i + 1], "middle": beam.middle[i, s], "share": float(share)}
        for s in range(len(splice.sheets))
        for i in range(len(edges) - 1)
        if beam.thickness[i, s] > 0.0 and (share := joint.segment_load[i, s]) > 0.005
    ]
    return {
        "left": left,
        "right": right,
        "symmetric": splice.to_centre > 0.0,
        "sheets": [
            {
                "name": sheet.name,
                "thickness": sheet.thickness,
                "outline": sheet_outline(splice, joint, s, left, right).tolist(),
                "loaded": sheet.start == "loaded",
                "out": sheet.end == "out",
            }
            for s, sheet in enumerate(splice.sheets)
        ],
        "holes": _holes(estimate),
        "fasteners": [_fastener(estimate, r) for r in range(len(splice.rows))],
        "bays": bays,
    }


def _holes(estimate: Estimate) -> list[dict[str, Any]]:
    """Return a place per location, with the shade of its damage and where its crack starts."""
    splice, joint, damage = estimate.case.splice, estimate.joint, estimate.route.damage
    worst = damage.max(initial=0.0)
    rank = np.empty(len(splice.locations), dtype=int)
    rank[estimate.order] = np.arange(1, rank.size + 1)
    found = []
    for i, (r, s) in enumerate(splice.locations):
        middle, thickness = at_hole(joint, i)
        share = max(float(damage[i] / worst), SHADES) if worst > 0 else SHADES
        side = {"upper": 0.5, "lower": -0.5, "": 0.0}[joint.face[i]]
        found.append(
            {
                "rank": int(rank[i]),
                "row": splice.rows[r].name,
                "sheet": splice.sheets[s].name,
                "x": splice.rows[r].position,
                "diameter": splice.rows[r].hole_diameter,
                "middle": middle,
                "thickness": thickness,
                "start": middle + side * thickness,
                # on the figure's own scale: the log of the share from `SHADES` to 1
                "fill": to_hex(DAMAGE(1.0 - float(np.log(share) / np.log(SHADES)))),
                "dark": share > 0.03,
            }
        )
    return found


def _fastener(estimate: Estimate, r: int) -> dict[str, Any]:
    splice, joint = estimate.case.splice, estimate.joint
    row = splice.rows[r]
    here = [i for i, place in enumerate(splice.locations) if place[0] == r]
    ends = [at_hole(joint, i) for i in here]
    sink = row.countersink
    return {
        "row": row.name,
        "x": row.position,
        "diameter": row.hole_diameter,
        "top": max(m + t / 2 for m, t in ends),
        "bottom": min(m - t / 2 for m, t in ends),
        "riveted": row.fastener.riveted,
        "sunk": None if sink is None else ("top" if sink.sheet == int(joint.sheet[here[0]]) else "bottom"),
        "depth": 0.0 if sink is None else sink.depth,
    }

"""The section through the splice, to scale: sheets, fasteners, load path, damage, the critical hole edge."""

from __future__ import annotations

from itertools import pairwise
from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LogNorm
from matplotlib.patches import Polygon, Rectangle

from fatigue.joint import Joint
from fatigue.joint.beam import mid_planes
from fatigue.life import Estimate
from fatigue.splice import Splice
from reports.figures.style import DAMAGE, INK, MARK, METAL, PAPER, SOFT, life_text

GHOST = "#b9c0c8"
BESIDE = 1.15
"""How far to each side of a row's axis its damage is coloured, in hole diameters."""
BUTT = 0.4
"""Half of the gap drawn at the butt line [mm]."""
SHADES = 1e-4
"""Damage over the worst location's below which a location is drawn in the lightest shade."""


def draw_section(ax: Axes, estimate: Estimate) -> Axes:
    """Draw the splice's section to scale, rows coloured by damage, the critical hole edge marked.

    Parameters
    ----------
    ax : Axes
        Its aspect is set equal and its frame taken away.
    estimate : Estimate

    Returns
    -------
    Axes
    """
    splice, joint = estimate.case.splice, estimate.joint
    left, right = reach(splice)
    if splice.to_centre > 0.0:
        _other_half(ax, splice, joint, left, right)
    _sheets(ax, splice, joint, left, right)
    _damage(ax, estimate)
    _load_path(ax, splice, joint, left, right)
    for r in range(len(splice.rows)):
        _fastener(ax, splice, joint, r)
    _names(ax, splice, joint, left, right)
    _critical(ax, estimate, right)
    top, bottom = _top(joint), _bottom(joint)
    tall = 1.1 * max(row.hole_diameter for row in splice.rows)
    if splice.to_centre > 0.0:
        ax.plot([right, right], [bottom - tall, top + tall], color=SOFT, lw=0.9, ls=(0, (12, 3, 2, 3)))
        ax.text(right, bottom - 1.05 * tall, "line of symmetry", fontsize=7.5, color=SOFT, va="top", ha="center")
    arrow = _arrow_reach(splice, left)
    ax.set_xlim(left - arrow - 2.0, right + (arrow + 2.0 if splice.to_centre <= 0.0 else _ghost(splice)))
    ax.set_ylim(bottom - 2.3 * tall / 1.1, top + 4.1 * tall / 1.1)
    ax.set_aspect("equal")
    ax.set_axis_off()
    return ax


def reach(splice: Splice) -> tuple[float, float]:
    """Return how far left and right the section is drawn: the free lengths are cut short."""
    span = splice.rows[-1].position
    between = 0 < splice.first_loaded < len(splice.sheets) - 1  # its name needs room beside the sheets outside it
    stub = max((5.5 if between else 4.5) * max(row.hole_diameter for row in splice.rows), 0.28 * span)
    right = splice.to_centre if splice.to_centre > 0.0 else stub
    return -stub, span + right


def _ghost(splice: Splice) -> float:
    """Return how much of the other half is drawn beyond a line of symmetry."""
    span = splice.rows[-1].position + splice.to_centre
    return splice.to_centre + max(0.45 * span, 2.5 * splice.rows[-1].hole_diameter)


def _other_half(ax: Axes, splice: Splice, joint: Joint, left: float, right: float) -> None:
    """Draw the other half of a symmetric joint, faint: sheets and the rows within reach."""
    window = Rectangle((right, -1e3), _ghost(splice), 2e3, transform=ax.transData)
    style: dict[str, Any] = {"facecolor": PAPER, "edgecolor": GHOST, "lw": 0.8}
    for s in range(len(splice.sheets)):
        corners = sheet_outline(splice, joint, s, left, right)
        ghost = Polygon(np.column_stack([2 * right - corners[:, 0], corners[:, 1]]), zorder=0.5, **style)
        ax.add_patch(ghost)
        ghost.set_clip_path(window)
    for r, row in enumerate(splice.rows):
        x = 2 * right - row.position
        if x + row.hole_diameter < right + _ghost(splice):
            heights = [at_hole(joint, i) for i, place in enumerate(splice.locations) if place[0] == r]
            low, high = min(m - t / 2 for m, t in heights), max(m + t / 2 for m, t in heights)
            d = row.hole_diameter
            ax.add_patch(Rectangle((x - d / 2, low), d, high - low, zorder=0.6, **style))


def _top(joint: Joint) -> float:
    beam = joint.beam
    return float((beam.middle + beam.thickness / 2)[beam.thickness > 0].max())


def _bottom(joint: Joint) -> float:
    beam = joint.beam
    return float((beam.middle - beam.thickness / 2)[beam.thickness > 0].min())


def _segment_edges(splice: Splice, left: float, right: float) -> np.ndarray:
    return np.array([left, *(row.position for row in splice.rows), right])


def sheet_outline(splice: Splice, joint: Joint, sheet: int, left: float, right: float) -> np.ndarray:
    """Return the corners of a sheet's section, ends and steps included, shape (k, 2) [mm].

    At a step the thinner side takes in the hole and what is coloured round it.
    """
    own, edges = splice.sheets[sheet], _segment_edges(splice, left, right)
    middle, thickness = mid_planes(joint.layout, joint.arrays.thickness), joint.arrays.thickness
    first = own.first_row if own.start == "free" else 0
    last = own.last_row + 1 if own.end == "free" else len(splice.rows)
    begin = splice.rows[own.first_row].position - own.edge if own.start == "free" else left
    stop = right
    if own.end == "free":
        stop = splice.rows[own.last_row].position + own.edge
        stop = min(stop, right - BUTT) if splice.to_centre > 0 else stop
    pieces = []  # from x on: mid-plane and thickness
    for i in range(first, last + 1):
        if i > first:
            row = i - 1
            beside = BESIDE * splice.rows[row].hole_diameter
            pieces.append((edges[i] - beside, *_at_row(joint, row, sheet)))
            pieces.append((edges[i] + beside, middle[i, sheet], thickness[i, sheet]))
        else:
            pieces.append((begin, middle[i, sheet], thickness[i, sheet]))
    changes = [pieces[0], *(b for a, b in pairwise(pieces) if a[1:] != b[1:])]
    ends = [*(np.clip(x, begin, stop) for x, _, _ in changes[1:]), stop]
    upper, lower = [], []
    for (x, m, t), end in zip(changes, ends, strict=True):
        x0, x1 = float(np.clip(x, begin, stop)), float(end)
        upper += [(x0, m + t / 2), (x1, m + t / 2)]
        lower += [(x0, m - t / 2), (x1, m - t / 2)]
    return np.array([*upper, *reversed(lower)])


def _sheets(ax: Axes, splice: Splice, joint: Joint, left: float, right: float) -> None:
    for s in range(len(splice.sheets)):
        ax.add_patch(
            Polygon(sheet_outline(splice, joint, s, left, right), facecolor=METAL, edgecolor=INK, lw=0.8, zorder=1)
        )
    for s, sheet in enumerate(splice.sheets):  # the cut ends of the free lengths
        if sheet.start == "loaded":
            _cut(ax, left, joint.beam.middle[0, s], joint.beam.thickness[0, s])
        if sheet.end == "out":
            _cut(ax, right, joint.beam.middle[-1, s], joint.beam.thickness[-1, s])


def _cut(ax: Axes, x: float, middle: float, thickness: float) -> None:
    """Draw a break line over a sheet's cut end."""
    y = np.linspace(-0.75, 0.75, 7) * thickness + middle
    ax.plot(x + 0.22 * thickness * np.array([0, 1, -1, 1, -1, 1, 0]), y, color=PAPER, lw=3, zorder=3)
    ax.plot(x + 0.22 * thickness * np.array([0, 1, -1, 1, -1, 1, 0]), y, color=SOFT, lw=0.8, zorder=4)


def _damage(ax: Axes, estimate: Estimate) -> None:
    """Colour the sheet beside each hole by its damage."""
    splice, joint = estimate.case.splice, estimate.joint
    damage = estimate.route.damage
    worst = damage.max(initial=0.0)
    norm = LogNorm(SHADES, 1.0, clip=True)
    for i, (r, _) in enumerate(splice.locations):
        row = splice.rows[r]
        colour = DAMAGE(norm(max(damage[i] / worst, SHADES))) if worst > 0 else METAL
        middle, thickness = at_hole(joint, i)
        reach = BESIDE * row.hole_diameter
        ax.add_patch(
            Rectangle(
                (row.position - reach, middle - thickness / 2),
                2 * reach,
                thickness,
                facecolor=colour,
                edgecolor=INK,
                lw=0.5,
                zorder=2,
            )
        )


def at_hole(joint: Joint, location: int) -> tuple[float, float]:
    """Return mid-plane height and thickness of a sheet at one of its holes [mm]."""
    return _at_row(joint, int(joint.row[location]), int(joint.sheet[location]))


def _at_row(joint: Joint, row: int, sheet: int) -> tuple[float, float]:
    thickness = joint.arrays.at_holes[row]
    return float(mid_planes(joint.layout, thickness)[sheet]), float(thickness[sheet])


def _fastener(ax: Axes, splice: Splice, joint: Joint, r: int) -> None:
    row = splice.rows[r]
    d = row.hole_diameter
    here = [i for i, place in enumerate(splice.locations) if place[0] == r]
    tops = [sum((m, t / 2)) for m, t in (at_hole(joint, i) for i in here)]
    bottoms = [m - t / 2 for m, t in (at_hole(joint, i) for i in here)]
    top, bottom = max(tops), min(bottoms)
    style: dict[str, Any] = {"facecolor": PAPER, "edgecolor": INK, "lw": 0.9, "zorder": 5}
    sink = row.countersink
    sunk_top = sink is not None and sink.sheet == int(joint.sheet[here[0]])
    ax.add_patch(Rectangle((row.position - d / 2, bottom), d, top - bottom, **style))
    if sink is not None:
        spread = d / 2 + sink.depth * np.tan(np.radians(50))
        y = top if sunk_top else bottom
        inner = y - sink.depth if sunk_top else y + sink.depth
        corners = [(-spread, y), (spread, y), (d / 2, inner), (-d / 2, inner)]
        ax.add_patch(Polygon([(row.position + x, z) for x, z in corners], **style))
    if not sunk_top:
        _head(ax, row.position, top, 1.0, d, row.fastener.riveted, style)
    if sink is None or sunk_top:
        _head(ax, row.position, bottom, -1.0, d, row.fastener.riveted, style)
    ax.plot([row.position] * 2, [bottom - 0.75 * d, top + 0.75 * d], color=SOFT, lw=0.5, ls=(0, (8, 2, 2, 2)), zorder=6)


def _head(ax: Axes, x: float, y: float, up: float, d: float, riveted: bool, style: dict[str, Any]) -> None:
    """Draw a rivet's round head or a bolt's flat one on a face."""
    if riveted:
        angle = np.linspace(0, np.pi, 25)
        corners = np.column_stack([x + 0.75 * d * np.cos(angle), y + up * 0.45 * d * np.sin(angle)])
    else:
        corners = np.array([(-0.8, 0), (0.8, 0), (0.8, 0.45), (-0.8, 0.45)]) * d * [1, up] + [x, y]
    ax.add_patch(Polygon(corners, **style))


def _load_path(ax: Axes, splice: Splice, joint: Joint, left: float, right: float) -> None:
    """Draw each bay's share of the load as a line as thick as the share, and write it where there is room."""
    edges = _segment_edges(splice, left, right)
    after = joint.segment_load
    for s in range(len(splice.sheets)):
        for i in range(edges.size - 1):
            share = after[i, s]
            if joint.beam.thickness[i, s] <= 0.0 or share <= 0.005:
                continue
            d0 = splice.rows[i - 1].hole_diameter if i > 0 else 0.0
            d1 = splice.rows[i].hole_diameter if i < len(splice.rows) else 0.0
            x0, x1 = edges[i] + 1.3 * d0, edges[i + 1] - 1.3 * d1
            y, t = joint.beam.middle[i, s], joint.beam.thickness[i, s]
            if x1 <= x0:
                continue
            height = 0.62 * t * share
            ax.add_patch(
                Rectangle((x0, y - height / 2), x1 - x0, height, facecolor="#b7c3cd", edgecolor="none", zorder=2)
            )
            ax.text((x0 + x1) / 2, y, f"{100 * share:.0f} %", fontsize=7.5, ha="center", va="center", zorder=4)
    reach = _arrow_reach(splice, left)
    loaded = splice.first_loaded
    y = joint.beam.middle[0, loaded]
    _arrow(ax, left - 1.0, left - 1.0 - reach, y)
    for s, sheet in enumerate(splice.sheets):
        if sheet.end == "out":
            _arrow(ax, right + 1.0, right + 1.0 + reach, joint.beam.middle[-1, s])


def _arrow_reach(splice: Splice, left: float) -> float:
    return 0.14 * (splice.rows[-1].position - left)


def _arrow(ax: Axes, start: float, end: float, y: float) -> None:
    ax.annotate(
        "",
        xy=(end, y),
        xytext=(start, y),
        arrowprops={"arrowstyle": "-|>", "color": INK, "lw": 1.6, "shrinkA": 0, "shrinkB": 0},
        zorder=6,
    )
    if end < start:
        ax.text((start + end) / 2, y + 0.5, "S", fontsize=10, style="italic", ha="center", va="bottom")


def _names(ax: Axes, splice: Splice, joint: Joint, left: float, right: float) -> None:
    top, bottom = _top(joint), _bottom(joint)
    for row in splice.rows:
        ax.text(row.position, top + 1.05 * row.hole_diameter, f"row {row.name}", fontsize=9, weight="bold", ha="center")
    for s, sheet in enumerate(splice.sheets):
        thicknesses = dict.fromkeys([sheet.thickness, *(step.thickness for step in sheet.steps)])
        text = f"{sheet.name}, {' to '.join(f'{t:g}' for t in thicknesses)} mm"
        outline = sheet_outline(splice, joint, s, left, right)
        above = s < len(splice.sheets) / 2
        x = left if sheet.start == "loaded" else right
        side = "left" if sheet.start == "loaded" else "right"
        if splice.to_centre > 0.0 and sheet.start != "loaded":
            x, side = right + 1.0, "left"
        y = outline[:, 1].max() + 0.5 if above else outline[:, 1].min() - 0.5
        ax.text(x, y, text, fontsize=8, color=SOFT, ha=side, va="bottom" if above else "top")
    span = [splice.rows[0].position, splice.rows[-1].position]
    if span[1] > span[0]:
        y = bottom - 1.25 * max(row.hole_diameter for row in splice.rows)
        for a, b in zip(splice.rows, splice.rows[1:], strict=False):
            ax.annotate(
                "",
                xy=(a.position, y),
                xytext=(b.position, y),
                arrowprops={"arrowstyle": "<->", "color": SOFT, "lw": 0.7, "shrinkA": 0, "shrinkB": 0},
            )
            ax.text(
                (a.position + b.position) / 2,
                y - 0.3,
                f"{b.position - a.position:g}",
                fontsize=7.5,
                color=SOFT,
                ha="center",
                va="top",
            )


def _critical(ax: Axes, estimate: Estimate, right: float) -> None:
    """Mark the hole edge where the first crack is expected."""
    splice, joint = estimate.case.splice, estimate.joint
    i = estimate.governing
    r, s = splice.locations[i]
    row, sheet = splice.rows[r], splice.sheets[s]
    middle, thickness = at_hole(joint, i)
    face = joint.face[i]
    y = middle + {"upper": 0.5, "lower": -0.5, "": 0.0}[face] * thickness
    for side in (-0.5, 0.5):
        ax.plot(row.position + side * row.hole_diameter, y, "o", ms=9, mfc="none", mec=MARK, mew=1.8, zorder=8)
    words = f"{face} face ({'faying, hidden' if joint.hidden[i] else 'visible'})" if face else "either face"
    life = float(estimate.route.life[i])
    text = f"first: row {row.name}, {sheet.name}\n{words}: {life_text(life)} flights"
    top = _top(joint)
    towards = 1.0 if 2 * row.position <= splice.rows[-1].position or r == 0 else -1.0
    ax.annotate(
        text,
        xy=(row.position + towards * 0.55 * row.hole_diameter, y),
        xytext=(row.position + towards * 1.6 * row.hole_diameter, top + 1.9 * row.hole_diameter),
        fontsize=9,
        color=MARK,
        weight="bold",
        ha="left" if towards > 0 else "right",
        va="bottom",
        arrowprops={
            "arrowstyle": "-",
            "color": MARK,
            "lw": 1.1,
            "shrinkB": 4,
            "relpos": (0.03 if towards > 0 else 0.97, 0.0),
        },
        zorder=9,
    )

"""What the peak stress of every location is made of."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes

from fatigue.life import Estimate
from reports.figures.style import INK, MARK, PAPER, PARTS, SOFT, life_text

MOST_LINES = 14
"""Locations drawn; the worst ones where there are more."""


def draw_makeup(ax: Axes, estimate: Estimate) -> Axes:
    """Draw a bar per location, worst on top: what makes up the stress at the hole's edge, and what the route leaves.

    Bars are bypass, bearing and bending at the largest load without credit; the line under a bar spans the
    spectrum's stresses by the case's own route, its largest marked.
    """
    rows = estimate.rows.head(MOST_LINES)
    y = np.arange(len(rows))
    start = np.zeros(len(rows))
    for part, (colour, hatch) in PARTS.items():
        length = rows[f"from_{part}_MPa"].to_numpy()
        ax.barh(y, length, left=start, color=colour, hatch=hatch, edgecolor=INK, linewidth=0.5, label=part, height=0.5)
        start = start + length
    route = estimate.case.life.credit
    peak = rows["peak_max_MPa"].to_numpy()
    if route != "none":
        under = y + 0.36
        ax.hlines(under, rows["peak_min_MPa"], peak, color=MARK, lw=1.6)
        ax.plot(peak, under, ls="none", marker="D", ms=5, mfc=PAPER, mec=MARK, mew=1.5)
        ax.plot(
            rows["peak_min_MPa"], under, ls="none", marker="|", ms=7, mec=MARK, mew=1.6, label=f"span by route {route}"
        )
    edge = max(start.max(initial=1.0), peak.max(initial=1.0))
    for i, (reach, life) in enumerate(zip(np.maximum(start, peak), rows["life_flights"], strict=True)):
        ax.text(reach + 0.025 * edge, i, life_text(life), va="center", fontsize=8)
    names = [f"{row}, {sheet}" for row, sheet in zip(rows["row"], rows["sheet"], strict=True)]
    ax.set_yticks(y, names)
    ax.get_yticklabels()[0].set(weight="bold", color=MARK)
    ax.invert_yaxis()
    ax.set_xlim(0, 1.36 * edge)
    ax.tick_params(axis="y", length=0)
    ax.set_xlabel("stress at the hole's edge under the largest load [MPa]; beside it the life [flights]")
    ax.legend(loc="lower right", ncols=1, title="bars: without credit", title_fontsize=8, fontsize=8)
    left = len(estimate.rows) - len(rows)
    if left > 0:
        ax.text(
            1.0, 1.01, f"{left} more locations in the table", transform=ax.transAxes, ha="right", fontsize=8, color=SOFT
        )
    return ax

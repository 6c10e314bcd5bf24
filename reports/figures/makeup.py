"""What the peak stress of every location is made of."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes

from fatigue.life import Estimate
from reports.figures.style import INK, MARK, PARTS, SOFT, life_text

MOST_LINES = 14
"""Locations drawn; the worst ones where there are more."""


def draw_makeup(ax: Axes, estimate: Estimate) -> Axes:
    """Draw a bar per location, worst on top: bypass, bearing and bending parts of the peak at the largest load."""
    rows = estimate.rows.head(MOST_LINES)
    y = np.arange(len(rows))
    start = np.zeros(len(rows))
    for part, (colour, hatch) in PARTS.items():
        length = rows[f"from_{part}_MPa"].to_numpy()
        ax.barh(y, length, left=start, color=colour, hatch=hatch, edgecolor=INK, linewidth=0.5, label=part, height=0.62)
        start = start + length
    edge = start.max(initial=1.0)
    for i, (peak, life) in enumerate(zip(start, rows["life_flights"], strict=True)):
        ax.text(peak + 0.015 * edge, i, f"{peak:.0f} MPa  |  {life_text(life)}", va="center", fontsize=8)
    names = [f"{row}, {sheet}" for row, sheet in zip(rows["row"], rows["sheet"], strict=True)]
    ax.set_yticks(y, names)
    ax.get_yticklabels()[0].set(weight="bold", color=MARK)
    ax.invert_yaxis()
    ax.set_xlim(0, 1.36 * edge)
    ax.tick_params(axis="y", length=0)
    ax.set_xlabel("peak stress at the hole edge, largest load of the spectrum [MPa]  |  life [flights]")
    ax.legend(loc="lower right", ncols=1, title="part of the peak", title_fontsize=8, fontsize=8)
    left = len(estimate.rows) - len(rows)
    if left > 0:
        ax.text(
            1.0, 1.01, f"{left} more locations in the table", transform=ax.transAxes, ha="right", fontsize=8, color=SOFT
        )
    return ax

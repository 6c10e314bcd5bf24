"""The governing edge's stress-strain loops by the second opinion."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes

from fatigue.life import Estimate, residual_stress
from fatigue.material import library
from fatigue.material.hysteresis import follow
from reports.figures.style import INK, MARK, SOFT

MOST_LOOPS = 3
"""Counted cycles drawn besides the largest: those that do most of the damage."""


def draw_loops(ax: Axes, estimate: Estimate) -> Axes:
    """Draw stress against strain at the governing edge: first loading, the largest cycle, a few that do most damage."""
    i = estimate.governing
    material = estimate.case.splice.sheets[estimate.case.splice.locations[i][1]].material
    route, name = estimate.route, estimate.case.life.credit
    if not material.strain_life or not route.low.shape[1]:
        ax.text(0.5, 0.5, "no strain-life constants for this material", ha="center", color=SOFT, transform=ax.transAxes)
        ax.set_axis_off()
        return ax
    made, left = residual_stress(estimate.filled, estimate.points, name)[i]
    low, high = route.low[i] - left, route.high[i] - left
    largest = int(np.argmax(high - low))
    inner = [int(k) for k in np.argsort(-route.by_cycle[i]) if k != largest][:MOST_LOOPS]
    turns = [float(high[largest])]
    for k in inner:
        turns += [float(low[k]), float(high[k])]
    turns += [float(low[largest]), float(high[largest])]
    path = follow(turns, library.strain_life(material.strain_life), residual=float(made))
    ax.plot(100 * path.strain, path.stress, color=INK, lw=1.1)
    if made:
        start = path.turning[0]
        ax.plot(100 * start.strain, start.stress, ls="none", marker="o", ms=7, mfc="none", mec=MARK, mew=1.5)
        words = f"before service, {start.stress:.0f} MPa"
        ax.annotate(words, (100 * start.strain, start.stress), xytext=(8, -10), textcoords="offset points", fontsize=8)
    ax.axhline(0.0, color=SOFT, lw=0.6)
    ax.set_xlabel("strain at the hole's edge [%]")
    ax.set_ylabel("stress at the hole's edge [MPa]")
    ax.set_title("Local strain: first loading, main cycles")
    ax.grid(visible=True)
    return ax

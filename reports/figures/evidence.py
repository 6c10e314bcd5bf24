"""The model beside published points."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from fatigue.hole.concentration import isolated_strip, row_of_holes
from fatigue.hole.countersink import countersink_factor
from fatigue.hole.expansion import LARGEST_ZONE, nadai_1943
from fatigue.hole.sheet import sheet_edge
from reports.evidence import holes, joints
from reports.figures.style import INK, MARK, SOFT, new_figure, styled

POINT: dict[str, Any] = {"ls": "none", "marker": "o", "ms": 6, "mfc": "none", "mec": MARK, "mew": 1.5}
LINES: tuple[Any, ...] = ("-", (0, (6, 2)), (0, (2, 1.5)), (0, (6, 2, 1, 2)))


def draw_bending_points(ax: Axes) -> Axes:
    """Draw bending over tension of an equal lap against load."""
    ax.plot(*joints.bending_curve(), color=INK, label="neutral line, computed")
    ax.plot([10, 40, 100, 200], [1.9153, 1.4391, 1.1557, 0.9897], label="boundary-value solution", **POINT)
    ax.set_xscale("log")
    ax.set_xlabel("remote stress [MPa]")
    ax.set_ylabel("bending over tension, outer row")
    ax.legend(fontsize=8)
    return ax


def draw_strip_points(ax: Axes) -> Axes:
    """Draw the open hole's factor in a strip and in a row."""
    x = np.linspace(0.02, 0.5, 40)
    ax.plot(x, isolated_strip(x), color=INK, label="strip, Heywood's form")
    ax.plot(x, row_of_holes(x), color=INK, ls=LINES[1], label="row of holes")
    few = np.linspace(0.1, 0.5, 9)
    for edge in ("strip", "row"):
        own = [sheet_edge(edge, float(v), np.inf, 0.33).open_factor for v in few]
        ax.plot(few, own, color=SOFT, lw=0, marker="x", ms=5, label="by collocation" if edge == "strip" else None)
    for table in (holes.STRIP, holes.ROW):
        ax.plot(*zip(*((v, float(k)) for v, k in table), strict=True), **POINT)
    ax.plot([], [], label="printed", **POINT)
    ax.set_xlabel("d/W")
    ax.set_ylabel("factor on gross stress")
    ax.legend(fontsize=8)
    return ax


def draw_sink_points(ax: Axes) -> Axes:
    """Draw the countersunk hole over the plain one."""
    b_t = np.linspace(0.2, 1.0, 50)
    for line, (r_t, table) in zip(LINES, holes.SINK.items(), strict=True):
        ax.plot(b_t, countersink_factor(1 - b_t, 1.0, r_t), color=INK, ls=line, label=f"r/t {r_t:g}")
        ax.plot(*zip(*((v, float(k)) for v, k in table.items()), strict=True), **POINT)
    ax.set_xlabel("straight shank over thickness, b/t")
    ax.set_ylabel("countersunk over plain hole")
    ax.legend(fontsize=8)
    return ax


def draw_element_points(ax: Axes) -> Axes:
    """Draw the contact solution's peak against finite elements."""
    theirs, own = holes.solved_peaks()
    ax.plot(theirs, 100 * (own / theirs - 1), ls="none", marker=".", ms=3, color=INK)
    ax.axhline(0, color=SOFT, lw=0.8)
    ax.set_ylim(-2, 2)
    ax.set_xlabel("peak hoop stress by elements [MPa]")
    ax.set_ylabel("contact solution, difference [%]")
    return ax


def draw_expansion_points(ax: Axes) -> Axes:
    """Draw pressure and residual stress of an expanded hole."""
    zone = np.linspace(1.0, LARGEST_ZONE, 100)
    made = nadai_1943(zone)
    ax.plot(zone, made.pressure, color=INK, label="pressure")
    ax.plot(zone, made.residual_hoop, color=INK, ls=LINES[1], label="residual hoop")
    for at, pressure, residual in holes.EXPANSION:
        ax.plot([at, at], [float(pressure), float(residual)], **POINT)
    ax.set_xlabel("plastic zone over hole, c/a")
    ax.set_ylabel("stress over yield stress")
    ax.legend(fontsize=8)
    return ax


PLOTS: dict[str, tuple[str, Callable[[Axes], Axes]]] = {
    "Secondary bending of an equal lap": ("secondary bending", draw_bending_points),
    "Open holes in a strip and in a row": ("concentration", draw_strip_points),
    "Countersunk holes": ("concentration", draw_sink_points),
    "Pins in holes against plane-stress elements": ("pin contact", draw_element_points),
    "A hole expanded past yield": ("expansion", draw_expansion_points),
}


def evidence_figures() -> dict[str, tuple[str, Figure]]:
    """Return subject and figure by title."""
    found = {}
    for title, (subject, draw) in PLOTS.items():
        with styled():
            figure = new_figure(5.4, 3.4)
            ax = figure.subplots()
            draw(ax)
            ax.set_title(title)
        found[title] = (subject, figure)
    return found

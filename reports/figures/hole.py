"""One hole: stress around its edge, and its factor against load."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from matplotlib.axes import Axes
from numpy.typing import ArrayLike

from fatigue.hole.ring import Expanded
from fatigue.hole.summary import HoleSummary
from reports.figures.style import FAINT, INK, MARK, SOFT, note

LINES = ["-", (0, (6, 2)), (0, (2, 1.5)), (0, (6, 2, 1, 2)), (0, (1, 1))]


def draw_edge(ax: Axes, hole: HoleSummary) -> Axes:
    """Draw hoop stress and contact pressure around the half edge, unloaded and at full load."""
    ax.fill_between(hole.angle, 0, hole.pressure, color="#9cb9c9", lw=0, alpha=0.8, label="contact pressure, full load")
    ax.plot(hole.angle, hole.hoop_unloaded, color=SOFT, ls=(0, (4, 2)), lw=1.4, label="hoop stress, fit alone")
    ax.plot(hole.angle, hole.hoop, color=INK, lw=1.9, label="hoop stress, full load")
    ax.plot(hole.peak_angle, hole.peak, ls="none", marker="o", ms=9, mfc="none", mec=MARK, mew=1.8)
    ax.annotate(
        f"{hole.peak:.0f} MPa at {hole.peak_angle:.0f} deg",
        (hole.peak_angle, hole.peak),
        xytext=(10, 6),
        textcoords="offset points",
        color=MARK,
        fontsize=9,
    )
    ax.axhline(0.0, color=FAINT, lw=0.8, zorder=0)
    ax.axvline(90.0, color=FAINT, lw=0.8, zorder=0)
    ax.set_xlim(0, 180)
    ax.set_xticks(range(0, 181, 30))
    ax.margins(y=0.14)
    ax.set_xlabel("angle from the load axis on the pin-load side [deg]")
    ax.set_ylabel("stress [MPa]")
    ax.legend(loc="lower center", bbox_to_anchor=(0.5, 1.0), ncols=3, fontsize=8)
    return ax


def draw_factor(ax: Axes, shares: ArrayLike, fits: Sequence[float], factors: ArrayLike, own: float) -> Axes:
    """Draw the rise of hoop stress over gross stress against load, a line per fit.

    Parameters
    ----------
    ax : Axes
    shares : array_like, shape (n,)
        Of the full load.
    fits : sequence of float
        Interference over the diameter.
    factors : array_like, shape (f, n)
    own : float
        The hole's own fit, drawn bold.
    """
    share, values = np.asarray(shares), np.asarray(factors)
    for number, (fit, line) in enumerate(zip(fits, values, strict=True)):
        mine = fit == own
        ax.plot(100 * share, line, color=MARK if mine else INK, ls=LINES[number % len(LINES)], lw=2.0 if mine else 1.2)
    # names at the right end, kept apart
    order = np.argsort(values[:, -1])
    gap = 0.045 * (values.max() - values.min() or 1.0)
    at = -np.inf
    for k in order:
        at = max(values[k, -1], at + gap)
        name = "snug" if fits[k] == 0 else f"{100 * fits[k]:+.2g} %"
        ax.text(101.5, at, name, fontsize=8, va="center", color=MARK if fits[k] == own else INK)
    ax.set_xlim(0, 116)
    ax.margins(y=0.08)
    note(ax, "largest rise between 45 and 135 deg; bending left out")
    ax.set_xticks(range(0, 101, 20))
    ax.set_xlabel("load [% of the full load]")
    ax.set_ylabel("rise of hoop stress over gross stress")
    ax.grid(visible=True)
    return ax


def draw_residual(ax: Axes, states: Expanded) -> Axes:
    """Draw hoop stress from the edge outwards: with the pin in, and what stays when it is taken out."""
    shown = states.filled.radius <= 4.0
    for state, colour, line, words in (
        (states.filled, SOFT, (0, (4, 2)), "pin in place, no load"),
        (states.residual, INK, "-", "residual: the pin's pressure taken off"),
    ):
        ax.plot(state.radius[shown], state.hoop[shown], color=colour, ls=line, lw=1.8, label=words)
    ax.plot(1.0, states.residual.edge_hoop, ls="none", marker="o", ms=8, mfc="none", mec=MARK, mew=1.8)
    ax.annotate(
        f"{states.residual.edge_hoop:.0f} MPa at the edge",
        (1.0, states.residual.edge_hoop),
        xytext=(46, 0),
        textcoords="offset points",
        color=MARK,
        fontsize=9,
        va="center",
    )
    ax.axhline(0.0, color=FAINT, lw=0.8, zorder=0)
    ax.axvspan(1.0, states.filled.zone, color="#f1f3f5", zorder=0)
    ax.text(states.filled.zone, 0.5, "  yielded to here", transform=ax.get_xaxis_transform(), va="top", fontsize=8)
    ax.set_xlim(0.97, 4.0)
    ax.set_xlabel("distance from the hole's centre [radii]")
    ax.set_ylabel("hoop stress [MPa]")
    ax.legend(loc="lower right", fontsize=8)
    return ax

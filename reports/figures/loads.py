"""The counted loads: how often each stress is exceeded, and which cycles do the damage."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes
from matplotlib.ticker import NullFormatter

from fatigue.life import Estimate
from reports.figures.style import INK, PARTS, SOFT
from spectra import Cycles


def draw_exceedances(ax: Axes, cycles: Cycles, unit: str = "MPa") -> Axes:
    """Draw how often a flight crosses each remote stress upward.

    Parameters
    ----------
    ax : Axes
    cycles : Cycles
        Per flight.
    unit : str
        Of the cycles.
    """
    ax.set_xlabel("upward crossings per flight")
    ax.set_ylabel(f"remote gross stress [{unit}]")
    if not len(cycles):
        ax.text(0.5, 0.5, "no cycles", transform=ax.transAxes, ha="center", color=SOFT)
        return ax
    low, high = cycles.low.min(), cycles.high.max()
    levels = np.unique(np.concatenate([np.linspace(low, high, 400)[1:], cycles.high]))
    crossings = cycles.exceedances(levels)
    seen = crossings > 0
    ax.step(crossings[seen], levels[seen], where="post", color=INK, lw=1.4)
    ax.set_xscale("log")
    # a decade at least, so that one of its ends is a labelled tick
    ax.set_xlim(min(crossings[seen].min() / 1.5, 0.2), max(1.5 * crossings.max(), 2.0))
    ax.xaxis.set_minor_formatter(NullFormatter())
    ax.grid(visible=True)
    return ax


def draw_damage_by_range(ax: Axes, estimate: Estimate, bins: int = 24) -> Axes:
    """Draw the governing location's damage against the remote stress range of the cycles that do it."""
    cycles = estimate.loads.cycles
    damage = estimate.route.by_cycle[estimate.governing]
    ax.set_xlabel("range of remote gross stress [MPa]")
    ax.set_ylabel("share of the damage [%]")
    total = damage.sum()
    if total <= 0:
        ax.text(0.5, 0.5, "no damage", transform=ax.transAxes, ha="center", color=SOFT)
        return ax
    edges = np.linspace(0.0, float(cycles.range.max()), bins + 1)
    edges[-1] *= 1 + 1e-12  # the largest range belongs to the last bin
    share = 100 * np.histogram(cycles.range, edges, weights=damage)[0] / total
    ax.bar(edges[:-1], share, width=np.diff(edges), align="edge", color=PARTS["bypass"][0], edgecolor="white", lw=0.5)
    often = np.histogram(cycles.range, edges, weights=cycles.count)[0]
    twin = ax.twinx()
    twin.spines["top"].set_visible(False)
    centres = (edges[:-1] + edges[1:]) / 2
    seen = often > 0
    twin.plot(centres[seen], often[seen], "o", ms=4, mfc="white", mec=INK)
    twin.set_yscale("log")
    twin.set_ylabel("cycles per flight (circles)")
    ax.set_ylim(0, max(5.0, 1.12 * share.max()))
    return ax

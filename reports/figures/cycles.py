"""Views of counted cycles: map of range and mean, ranges exceeded before and after an edit, damage by phase."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LogNorm
from matplotlib.ticker import NullFormatter
from numpy.typing import NDArray

from reports.figures.style import DAMAGE, INK, MARK, PARTS, SOFT
from spectra import Cycles

Array = NDArray[np.float64]

BINS = 40


def draw_range_mean(ax: Axes, cycles: Cycles, unit: str = "MPa", bins: int = BINS) -> Axes:
    """Draw how many cycles there are of each range and mean, with lines of equal stress ratio.

    Parameters
    ----------
    ax : Axes
    cycles : Cycles
        Per flight.
    unit : str
        Of the cycles.
    bins : int
        Along each side.
    """
    ax.set_xlabel(f"mean [{unit}]")
    ax.set_ylabel(f"range [{unit}]")
    if not len(cycles) or cycles.range.max() == 0:
        return _empty(ax, "no cycles")
    low, high = float(cycles.low.min()), float(cycles.high.max())
    across = np.linspace(low, high, bins + 1)
    up = np.linspace(0.0, float(cycles.range.max()) * (1 + 1e-9), bins + 1)
    number, _, _ = np.histogram2d(cycles.mean, cycles.range, [across, up], weights=cycles.count)
    shown = np.ma.masked_less_equal(number.T, 0.0)
    norm = LogNorm(shown.min(), max(shown.max(), 1.001 * shown.min()))
    mesh = ax.pcolormesh(across, up, shown, norm=norm, cmap=DAMAGE)
    bar = ax.figure.colorbar(mesh, ax=ax, pad=0.02)
    bar.set_label("cycles per flight")
    bar.ax.yaxis.set_minor_formatter(NullFormatter())
    for ratio, name in ((0.0, "R = 0"), (-1.0, "R = -1"), (0.5, "R = 0.5")):
        _ratio_line(ax, ratio, name, across[-1], up[-1])
    ax.set_xlim(across[0], across[-1])
    ax.set_ylim(0.0, 1.06 * up[-1])
    return ax


def draw_ranges(ax: Axes, tables: Mapping[str, Cycles], unit: str = "MPa") -> Axes:
    """Draw how many cycles reach each range, for several tables: before and after an edit, say.

    Parameters
    ----------
    ax : Axes
    tables : mapping
        Name to cycles per flight; the first in front.
    unit : str
        Of the cycles.
    """
    ax.set_xlabel("cycles per flight\nof this range or more")
    ax.set_ylabel(f"range [{unit}]")
    if not any(len(cycles) for cycles in tables.values()):
        return _empty(ax, "no cycles")
    styles = ((INK, "-", 1.4), (MARK, "--", 1.6), (SOFT, ":", 1.6))
    for (name, cycles), (colour, dash, width) in zip(tables.items(), styles, strict=False):
        order = np.argsort(cycles.range)[::-1]
        number, size = np.cumsum(cycles.count[order]), cycles.range[order]
        ax.step(
            np.append(number, number[-1:]),
            np.append(size, 0.0),
            where="pre",
            color=colour,
            ls=dash,
            lw=width,
            label=name,
        )
    ax.set_xscale("log")
    ax.xaxis.set_minor_formatter(NullFormatter())
    ax.set_ylim(bottom=0.0)
    ax.grid(visible=True)
    if len(tables) > 1:
        ax.legend(loc="upper right")
    return ax


def draw_by_phase(ax: Axes, damage: Mapping[str, float], law: str) -> Axes:
    """Draw what share of the damage the cycles within each phase do, and those between phases.

    Parameters
    ----------
    ax : Axes
    damage : mapping
        Name of the phase to damage, in the order flown.
    law : str
        What the damage was reckoned by.
    """
    total = sum(damage.values())
    ax.set_xlabel(f"share of the damage [%]\n{law}")
    if total <= 0:
        return _empty(ax, "no damage")
    share = np.array([100 * value / total for value in damage.values()])
    place = np.arange(share.size)[::-1]
    ax.barh(place, share, color=PARTS["bypass"][0], height=0.62)
    for y, value in zip(place, share, strict=True):
        text = "0" if value == 0 else "< 0.1" if value < 0.1 else f"{value:.1f}"
        ax.text(value + 0.012 * share.max(), y, text, va="center", fontsize=8, color=INK)
    ax.set_yticks(place, [_folded(name) for name in damage])
    ax.set_xlim(0.0, 1.14 * share.max())
    return ax


def _folded(name: str, most: int = 18) -> str:
    """Break a long name at spaces."""
    lines = [""]
    for word in name.split():
        if lines[-1] and len(lines[-1]) + len(word) >= most:
            lines.append(word)
        else:
            lines[-1] = f"{lines[-1]} {word}".strip()
    return "\n".join(lines)


def _ratio_line(ax: Axes, ratio: float, name: str, right: float, top: float) -> None:
    """Draw where cycles have a stress ratio, and write it where the line leaves the map."""
    per_mean = 2 * (1 - ratio) / (1 + ratio) if ratio > -1 else np.inf
    x = min(right, top / per_mean) if np.isfinite(per_mean) else 0.0
    y = per_mean * x if np.isfinite(per_mean) else top
    ax.plot([0.0, x], [0.0, y], color=SOFT, lw=0.8, ls=(0, (4, 3)), zorder=3)
    ax.annotate(
        name,
        (x, y),
        xytext=(-2, 2),
        textcoords="offset points",
        ha="right" if x > 0 else "center",
        fontsize=7,
        color=SOFT,
    )


def _empty(ax: Axes, text: str) -> Axes:
    ax.text(0.5, 0.5, text, transform=ax.transAxes, ha="center", color=SOFT)
    return ax

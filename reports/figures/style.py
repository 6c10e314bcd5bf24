"""What all figures share: sizes, inks that stay apart in grey, and how numbers are written."""

from __future__ import annotations

import io
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import matplotlib as mpl
import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LinearSegmentedColormap
from matplotlib.figure import Figure

INK = "#1d2733"
SOFT = "#68737f"
FAINT = "#d5dae0"
PAPER = "#ffffff"
METAL = "#eef0f2"
MARK = "#a3122a"

DAMAGE = LinearSegmentedColormap.from_list("damage", ["#f3f1ea", "#f2cf96", "#d9803f", "#8f2f1e", "#3d0c11"])
"""Light to dark with rising damage, so that order survives print and grey."""

PARTS = {
    "bypass": ("#2f5d7c", ""),
    "bearing": ("#9cb9c9", "////"),
    "bending": ("#e3d3a8", "...."),
}
"""Ink and hatch of each part of the stress: dark, middle and light."""

RC: dict[str, Any] = {
    "font.family": "DejaVu Sans",
    "font.size": 9,
    "axes.edgecolor": SOFT,
    "axes.labelcolor": INK,
    "axes.titlesize": 10,
    "axes.titleweight": "bold",
    "axes.titlelocation": "left",
    "axes.spines.top": False,
    "axes.spines.right": False,
    "text.color": INK,
    "xtick.color": SOFT,
    "ytick.color": SOFT,
    "xtick.labelcolor": INK,
    "ytick.labelcolor": INK,
    "grid.color": FAINT,
    "grid.linewidth": 0.6,
    "hatch.linewidth": 0.6,
    "legend.frameon": False,
    "svg.hashsalt": "faying",
    "figure.dpi": 100,
    "savefig.facecolor": PAPER,
}


@contextmanager
def styled() -> Iterator[None]:
    """Draw in the project's style, leaving the caller's own settings alone."""
    with mpl.rc_context(RC):  # type: ignore[arg-type] # the stub lists each key as a literal
        yield


def new_figure(width: float, height: float) -> Figure:
    """Return an empty figure that belongs to no window, in inches."""
    return Figure(figsize=(width, height), layout="constrained")


def save(figure: Figure, path: Path, dpi: int = 160) -> None:
    """Save a figure so that the same estimate gives the same bytes."""
    if path.suffix == ".svg":
        path.write_text(svg_text(figure), encoding="utf-8")
    else:
        with styled():
            figure.savefig(path, dpi=dpi, metadata={"Software": None})


def svg_text(figure: Figure) -> str:
    """Return a figure as SVG, without date or program name."""
    buffer = io.StringIO()
    with styled():
        figure.savefig(buffer, format="svg", metadata={"Date": None, "Creator": None})
    figure.set_layout_engine("none")  # laid out once is enough
    return buffer.getvalue()


def life_text(flights: float) -> str:
    """Write a life with the digits it deserves: three figures, and no more than an order beyond 10^8.

    >>> life_text(346335.9), life_text(8.1e9), life_text(float("inf"))
    ('346,000', 'over 10^8', 'no damage')
    """
    if np.isinf(flights):
        return "no damage"
    if np.isnan(flights):
        return "-"
    if flights > 1e8:
        return "over 10^8"
    if flights < 1:
        return "< 1"
    digits = max(0, int(np.floor(np.log10(flights))) - 2)
    return f"{round(flights / 10**digits) * 10**digits:,.0f}"


def note(ax: Axes, text: str) -> None:
    """Write a quiet line under the axes' title."""
    ax.text(0.0, 1.01, text, transform=ax.transAxes, fontsize=8, color=SOFT, va="bottom")

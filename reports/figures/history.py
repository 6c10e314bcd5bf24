"""A history in time: its outline, its flights, and what was found wrong with it."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise
from typing import Any

import numpy as np
from matplotlib.axes import Axes
from numpy.typing import NDArray

from reports.figures.style import FAINT, INK, MARK, SOFT
from spectra.defects import Defects
from spectra.flights import Flights

Array = NDArray[np.float64]

COLUMNS = 1500
"""Slices a long history is drawn in, each from its least to its greatest value."""

MOST_NAMED = 8
"""Values beyond the axes that are written out."""


def draw_history(
    ax: Axes,
    values: NDArray[Any],
    time: Array | None = None,
    flights: Flights | None = None,
    defects: Sequence[Defects] = (),
    unit: str = "MPa",
    limits: tuple[float, float] | None = None,
) -> Axes:
    """Draw a history of any length by the outline of its slices.

    Parameters
    ----------
    ax : Axes
    values : ndarray, shape (n,)
        What is not finite is left out.
    time : ndarray, optional
        [s]; the number of each value if left out.
    flights : Flights, optional
        Shaded.
    defects : sequence of Defects
        Spikes and drop-outs marked with crosses, missing values with ticks below.
    unit : str
        Of the values.
    limits : tuple of float, optional
        Least and greatest value that are to be seen; what goes beyond is marked at the edge, its value beside it.
    """

    def at(place: NDArray[np.intp]) -> NDArray[Any]:
        return place if time is None else np.asarray((time[place] - time[0]) / 3600.0)

    ax.set_xlabel("value" if time is None else "time [h]")
    ax.set_ylabel(f"remote gross stress [{unit}]")
    if flights is not None and time is not None:
        for begin, end in zip(flights.begin, flights.end, strict=True):
            ax.axvspan((begin - time[0]) / 3600.0, (end - time[0]) / 3600.0, color=FAINT, alpha=0.45, lw=0)
    if values.size <= 2 * COLUMNS:
        ax.plot(at(np.arange(values.size)), values, color=INK, lw=0.7)
    else:
        edges = np.linspace(0, values.size, COLUMNS + 1).astype(np.intp)
        pieces = [np.asarray(values[a:b], dtype=float) for a, b in pairwise(edges)]
        pieces = [piece[np.isfinite(piece)] for piece in pieces]
        seen = np.array([piece.size > 0 for piece in pieces])
        low, high = ([extreme(piece) for piece in pieces if piece.size] for extreme in (np.min, np.max))
        ax.fill_between(at(edges[:-1])[seen], low, high, color=INK, lw=0.5)
    if limits is not None:
        room = 0.12 * (limits[1] - limits[0])
        ax.set_ylim(limits[0] - room, limits[1] + room)
    low_edge, high_edge = ax.get_ylim()
    for found in defects:
        if found.kind == "missing":
            ax.plot(at(found.start), np.zeros(len(found)), "|", color=MARK, ms=8, transform=ax.get_xaxis_transform())
            continue
        shown = np.clip(found.values, low_edge, high_edge)
        ax.plot(at(found.start), shown, "x", color=MARK, ms=6, mew=1.4, clip_on=False)
        for x, y, value in list(zip(at(found.start), shown, found.values, strict=True))[:MOST_NAMED]:
            if y != value:
                ax.annotate(f"{value:.5g}", (x, y), xytext=(6, -3), textcoords="offset points", fontsize=8, color=MARK)
    if any(len(found) for found in defects):
        text = "x suspect value, | missing"
        ax.text(1.0, 1.02, text, transform=ax.transAxes, ha="right", va="bottom", fontsize=8, color=MARK)
    ax.margins(x=0.01)
    return ax


def draw_flown(ax: Axes, values: Array, phase: NDArray[np.intp], names: Sequence[str], unit: str = "MPa") -> Axes:
    """Draw one flight of a spectrum, its phases named.

    Parameters
    ----------
    ax : Axes
    values : ndarray, shape (n,)
        Of one flight.
    phase : ndarray, shape (n,)
        Which phase each value belongs to.
    names : sequence of str
        Of the phases.
    unit : str
        Of the values.
    """
    at = np.arange(values.size)
    ax.plot(at, values, color=INK, lw=0.8, marker="." if values.size < 60 else "", ms=3)
    begins = np.concatenate([[0], np.flatnonzero(np.diff(phase)) + 1, [values.size]])
    for i, (begin, end) in enumerate(pairwise(begins)):
        if i % 2 == 0:
            ax.axvspan(begin - 0.5, end - 0.5, color=FAINT, alpha=0.45, lw=0)
        if end - begin > 0.04 * values.size:
            ax.text(
                (begin + end - 1) / 2, 1.01, names[phase[begin]], transform=ax.get_xaxis_transform(), ha="center",
                va="bottom", fontsize=7, color=SOFT,
            )  # fmt: skip
    ax.set_xlim(-0.5, values.size - 0.5)
    ax.set_xlabel("turning point of the flight")
    ax.set_ylabel(f"remote gross stress [{unit}]")
    return ax

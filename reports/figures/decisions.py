"""Figures of the decisions: swings, distribution of the first crack, sweeps, inspection against chance."""

from __future__ import annotations

import numpy as np
import pandas as pd
from matplotlib.axes import Axes

from fatigue.chance import cracked_chance, order_chance, splice_chance
from fatigue.life import Estimate
from fatigue.study import Scattered
from fatigue.sweeps import INPUTS, Swept
from reports.figures.style import FAINT, INK, MARK, PAPER, SOFT, life_text, note

STYLES = ("-", (0, (6, 2)), (0, (2, 1.5)), (0, (6, 2, 1, 2)), (0, (1, 1)))
CAP = 1e8


def draw_swings(ax: Axes, frame: pd.DataFrame, life: float) -> Axes:
    """Draw a bar per input, worst first: the life with it two standard deviations down (light) and up (dark)."""
    y = np.arange(len(frame))
    down, up = (np.minimum(frame[f"life_{side}_flights"].to_numpy(dtype=np.float64), CAP) for side in ("down", "up"))
    ax.barh(
        y, down - life, left=life, height=0.55, color=FAINT, edgecolor=INK, lw=0.7, label="input two deviations down"
    )
    ax.barh(y, up - life, left=life, height=0.55, color=INK, edgecolor=INK, lw=0.7, label="up")
    ax.axvline(life, color=MARK, lw=1.2)
    for at, a, b in zip(y, down, up, strict=True):
        ax.annotate(life_text(min(a, b)), (min(a, b), at), xytext=(-4, 0), textcoords="offset points", ha="right",
                    va="center", fontsize=8)  # fmt: skip
        ax.annotate(life_text(max(a, b)), (max(a, b), at), xytext=(4, 0), textcoords="offset points", va="center",
                    fontsize=8)  # fmt: skip
    labels = [f"{n.replace('_', ' ')}  ({s})" for n, s in zip(frame["input"], frame["spread"], strict=True)]
    ax.set_yticks(y, labels)
    ax.invert_yaxis()
    ax.set_xscale("log")
    ax.set_xlim(min(down.min(), up.min()) / 1.7, max(down.max(), up.max()) * 1.7)
    ax.set_xlabel("life of the splice's first hole to go, typical hole [flights]")
    ax.tick_params(axis="y", length=0)
    ax.legend(loc="lower right", fontsize=8)
    note(ax, f"red line: the case as it is, {life_text(life)} flights")
    return ax


def draw_distribution(ax: Axes, study: Scattered) -> Axes:
    """Draw the chance of a first crack against flights: each row's, and the splice's in bold."""
    share = np.arange(1, study.count + 1) / study.count
    for r, name in enumerate(study.rows):
        own = np.sort(study.first[:, r])
        if not np.isfinite(own).mean() > 0.5:
            continue
        chance = study.table["chance_first"][r]
        ax.plot(
            own, share, color=SOFT, ls=STYLES[(r + 1) % 5], lw=1.4, label=f"row {name}: first in {100 * chance:.0f} %"
        )
    ax.plot(np.sort(study.splice), share, color=INK, lw=2.4, label="the splice")
    flown = study.base.case.loads.flown_flights
    if flown > 0:
        ax.axvline(flown, color=MARK, lw=1.2)
        ax.text(flown, 1.0, " flown", transform=ax.get_xaxis_transform(), color=MARK, fontsize=8, va="top")
    finite = study.splice[np.isfinite(study.splice)]
    if finite.size:
        low, high = np.quantile(finite, [0.0005, 0.999])
        ax.set_xlim(low / 1.5, high * 3)
    ax.set_xscale("log")
    ax.set_ylim(0, 1)
    ax.set_xlabel("flights")
    ax.set_ylabel("chance that a first crack has started")
    ax.grid(visible=True, which="major")
    ax.legend(loc="lower right", fontsize=8)
    note(ax, f"{study.count:,} joints drawn, seed {study.seed}; {study.holes} holes a row")
    return ax


def draw_sweep(ax: Axes, swept: Swept) -> Axes:
    """Draw life over one input, or lines of equal life over two, with changes of the governing location marked."""
    splice = swept.base.case.splice
    names = [f"row {splice.rows[r].name}, {splice.sheets[s].name}" for r, s in splice.locations]
    first = swept.inputs[0]
    life, governing = np.minimum(swept.splice, CAP), swept.governing
    if len(swept.inputs) == 1:
        for number, i in enumerate(np.unique(governing).tolist()):
            ax.plot(first.values, np.minimum(swept.life[:, i], CAP), color=SOFT, ls=STYLES[1 + number % 4], lw=1.2,
                    label=names[i])  # fmt: skip
        ax.plot(first.values, life, color=INK, lw=2.0, label="the splice")
        for k in np.flatnonzero(np.diff(governing)).tolist():
            ax.axvline((first.values[k] + first.values[k + 1]) / 2, color=MARK, lw=1.0, ls=":")
        ax.set_yscale("log")
        ax.set_ylabel("life [flights]")
        ax.grid(visible=True, which="both")
        ax.legend(fontsize=8)
        if np.diff(governing).any():
            note(ax, "dotted red: another location takes over")
    else:
        second = swept.inputs[1]
        x, y = first.values, second.values
        shown = np.log10(np.maximum(life.T, 1.0))
        ax.pcolormesh(x, y, governing.T % 4, cmap="Greys", vmin=-1, vmax=9, shading="nearest", rasterized=True)
        if np.ptp(shown) > 1e-9:
            steps = np.log10([1, 1.5, 2, 3, 5, 7])
            levels = [k + step for k in range(10) for step in steps if shown.min() < k + step < shown.max()]
            lines = ax.contour(x, y, shown, levels=levels or 4, colors=INK, linewidths=1.1)
            ax.clabel(lines, fmt=lambda v: life_text(10**v), fontsize=8)
        for i in np.unique(governing).tolist():
            at = np.argwhere(governing == i).mean(axis=0)
            across, up = np.interp(at[0], np.arange(x.size), x), np.interp(at[1], np.arange(y.size), y)
            ax.text(across, up, names[i], fontsize=8,
                    ha="center", color=MARK, bbox={"fc": PAPER, "ec": "none", "alpha": 0.8, "pad": 1})  # fmt: skip
        ax.set_ylabel(f"{second.key}: {INPUTS[second.key]}", fontsize=8)
        note(ax, "lines of equal life [flights]; shade: the location that governs, named in red")
    ax.set_xlabel(f"{first.key}: {INPUTS[first.key]}", fontsize=8)
    return ax


def draw_inspection(ax: Axes, estimate: Estimate) -> Axes:
    """Draw the chance of a first crack of each row against flights, with flown flights and the first threshold."""
    case = estimate.case
    settings, splice = case.inspection, case.splice
    basis = estimate.rows["life_flights" if settings.use_credit else "life_no_credit_flights"].to_numpy(
        dtype=np.float64
    )
    row_of = estimate.rows["row"].to_numpy()
    by_row = {row.name: float(basis[row_of == row.name].min()) for row in splice.rows}
    shortest = min(by_row.values())
    if not np.isfinite(shortest):
        ax.text(0.5, 0.5, "no damage: nothing to inspect for", transform=ax.transAxes, ha="center")
        return ax
    due = float(estimate.rows["threshold_flights"].min())
    left = min(due, case.loads.flown_flights or due) / 3
    flights = np.geomspace(left, 4 * shortest, 400)
    chances = []
    for number, (name, life) in enumerate(by_row.items()):
        hole = cracked_chance(flights, life, settings.scatter_log10)
        chances.append(order_chance(hole, settings.holes_per_row))
        if life < 30 * shortest:
            ax.plot(flights, chances[-1], color=SOFT, ls=STYLES[(number + 1) % 5], lw=1.5, label=f"row {name}")
    ax.plot(flights, splice_chance(np.array(chances)), color=INK, lw=2.4, label="the splice")
    for place, words, height in ((due, " inspect from", 0.93), (case.loads.flown_flights, " flown", 1.0)):
        if place > 0:
            ax.axvline(place, color=MARK, lw=1.2, ls="-" if "flown" in words else "--")
            ax.text(place, height, words, transform=ax.get_xaxis_transform(), color=MARK, fontsize=8, va="top")
    ax.set_xscale("log")
    ax.set_xlim(flights[0], flights[-1])
    ax.set_ylim(0, 1)
    ax.set_xlabel("flights")
    ax.set_ylabel("chance that a first crack has started")
    ax.grid(visible=True, which="major")
    ax.legend(loc="center left", fontsize=8)
    credit = "with" if settings.use_credit else "without"
    note(ax, f"from the life {credit} fit credit; median taken as known; scatter {settings.scatter_log10:g}")
    return ax

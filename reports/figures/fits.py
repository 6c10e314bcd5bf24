"""What fits are worth: life against fit, and hole conditions side by side."""

from __future__ import annotations

import numpy as np
import pandas as pd
from matplotlib.axes import Axes

from fatigue.damage import shortest
from fatigue.fits import FitCurves
from fatigue.life import Estimate
from reports.figures.style import FAINT, INK, MARK, PAPER, SOFT, life_text, note

CAP = 1e8
"""Lives are drawn up to here."""


def draw_life_against_fit(ax: Axes, estimate: Estimate, curves: FitCurves) -> Axes:
    """Draw the life of each row's worse sheet against the fit of all holes.

    A ring marks, and the legend gives, the fit from which the solved life reaches that of the practice factors; a
    square marks the case's own fit where all holes share one.
    """
    splice = estimate.case.splice
    styles = ["-", (0, (6, 2)), (0, (2, 1.5)), (0, (6, 2, 1, 2)), (0, (1, 1))]
    for number, (i, names) in enumerate(_worse_sheets(estimate, curves).items()):
        life, reached = curves.life[:, i], curves.practice_fit[i]
        colour = MARK if i == estimate.governing else INK
        sheet = splice.sheets[splice.locations[i][1]].name
        label = f"row {names[0]} ({sheet})" if len(names) == 1 else f"rows {' and '.join(names)}"
        if np.isfinite(reached) and curves.practice[i] < CAP:
            label += f"; practice factors as {reached:.2f} %"
            ax.plot(reached, curves.practice[i], ls="none", marker="o", ms=9, mfc=PAPER, mec=colour, mew=1.6, zorder=4)
        # the line goes out of the picture where the life does
        shown = np.where(life > 1.5 * CAP, np.nan, life)
        ax.plot(curves.fit_percent, shown, color=colour, ls=styles[number % len(styles)], lw=1.8, label=label)
    own = {row.hole.fit_percent for row in splice.rows}
    if len(own) == 1 and (given := own.pop()) is not None and estimate.case.life.credit == "contact":
        life_now = min(float(estimate.rows.iloc[0]["life_flights"]), CAP)
        ax.plot(given, life_now, ls="none", marker="s", ms=7, color=MARK)
        ax.annotate(
            f"this case: {life_text(life_now)}",
            (given, life_now),
            xytext=(-8, 6),
            textcoords="offset points",
            ha="right",
            fontsize=8,
            color=MARK,
        )
    ax.axvline(0.0, color=FAINT, lw=1.0, zorder=0)
    ax.text(0.0, 0.99, " snug", transform=ax.get_xaxis_transform(), va="top", fontsize=8, color=SOFT)
    ax.set_yscale("log")
    # lives without damage are infinite, and lie above the picture
    ax.set_ylim(min(CAP, curves.life.min()) / 2, min(CAP, curves.life.max()) * 1.5)
    ax.set_xlim(curves.fit_percent[0], curves.fit_percent[-1])
    ax.set_xlabel("fit: diametral interference [% of the hole]; clearance is negative")
    ax.set_ylabel("life [flights]")
    ax.grid(visible=True, which="major")
    ax.legend(loc="lower right", fontsize=8)
    if curves.life.max() > CAP:
        note(ax, "drawn up to 10^8 flights")
    return ax


def _worse_sheets(estimate: Estimate, curves: FitCurves) -> dict[int, list[str]]:
    """Return the worse location of every row with the rows that share its curve."""
    splice = estimate.case.splice
    found: dict[int, list[str]] = {}
    for r, row in enumerate(splice.rows):
        places = [i for i, (own, _) in enumerate(splice.locations) if own == r]
        i = places[shortest(curves.life[:, places].min(axis=0))]
        alike = [k for k in found if np.allclose(curves.life[:, k], curves.life[:, i], rtol=1e-6)]
        found.setdefault(alike[0] if alike else i, []).append(row.name)
    return found


def draw_conditions(ax: Axes, frame: pd.DataFrame) -> Axes:
    """Draw a line per hole condition: the splice's life, and the life of every location."""
    columns = [name for name in frame.columns if name.startswith("life_") and name != "life_flights"]
    y = np.arange(len(frame))
    for column in columns:
        ax.plot(np.minimum(frame[column], CAP), y, ls="none", marker="|", ms=9, color=SOFT, mew=1.0)
    life = np.minimum(frame["life_flights"].to_numpy(dtype=np.float64), CAP)
    bottom = life.min() / 3
    ax.hlines(y, bottom, life, color=INK, lw=1.2)
    ax.plot(life, y, ls="none", marker="o", ms=7, color=INK)
    ax.plot(life[:1], y[:1], ls="none", marker="o", ms=8, color=MARK)
    for at, own, ratio in zip(y, life, frame["ratio_to_open"], strict=True):
        ax.text(own, at - 0.28, f"{life_text(own)}  ({ratio:.2g} x open)", fontsize=8, ha="center", va="bottom")
    ax.set_yticks(y, frame["condition"].tolist())
    ax.get_yticklabels()[0].set(weight="bold", color=MARK)
    ax.invert_yaxis()
    ax.set_ylim(len(frame) - 0.5, -0.9)
    ax.set_xscale("log")
    ax.set_xlim(bottom, max(4 * life.max(), 10 * bottom))
    ax.set_xlabel("life [flights]: dot the splice, ticks the other locations (up to 10^8)")
    ax.grid(visible=True, axis="x", which="major")
    ax.tick_params(axis="y", length=0)
    return ax

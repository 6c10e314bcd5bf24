"""A fitted family: tests, median curves with bands, residuals, models compared."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.ticker import NullFormatter

from fatigue.material.fit import FittedTests
from reports.figures.style import FAINT, INK, MARK, PAPER, SOFT, new_figure, note, styled

LINES: tuple[Any, ...] = ("-", (0, (6, 2)), (0, (2, 1.5)), (0, (6, 2, 1, 2)), (0, (1, 1)))
MARKERS = "osD^v"


def draw_fit(ax: Axes, found: FittedTests) -> Axes:
    """Draw equivalent stress against life: tests, median curves, the band of the median and of single lives."""
    fit, coupons = found.fit, found.coupons
    top = 10 ** (np.log10(coupons.cycles.max()) + 0.6)
    for number, member in enumerate(fit.members):
        marker, line = MARKERS[number % len(MARKERS)], LINES[number % len(LINES)]
        own = coupons.kt == member.kt
        stress = coupons.top * (1 - coupons.ratio) ** member.a3
        span = np.geomspace(0.97 * stress[own].min(), 1.03 * stress[own].max(), 300)
        median, error = fit.median_band(member.kt, span)
        shown = np.isfinite(median) & (median < np.log10(top)) & np.isfinite(error)
        life, s = median[shown], member.scatter_log10 or 0.0
        wide = np.sqrt(error[shown] ** 2 + s**2)
        ax.fill_betweenx(span[shown], 10 ** (life - 2 * wide), 10 ** (life + 2 * wide), color="#eef0f2", lw=0, zorder=0)
        ax.fill_betweenx(
            span[shown], 10 ** (life - 1.96 * error[shown]), 10 ** (life + 1.96 * error[shown]),
            color="#cfd6dc", lw=0, zorder=1,
        )  # fmt: skip
        ax.plot(10**life, span[shown], color=INK, ls=line, lw=1.6, label=f"median, $K_t$ {member.kt:g}", zorder=3)
        failed, stopped = own & coupons.failed, own & ~coupons.failed
        ax.plot(coupons.cycles[failed], stress[failed], ls="none", marker=marker, ms=5, mfc=MARK, mec=MARK, zorder=4)
        if stopped.any():
            ax.plot(
                coupons.cycles[stopped],
                stress[stopped],
                ls="none",
                marker=marker,
                ms=5.5,
                mfc=PAPER,
                mec=MARK,
                zorder=4,
            )
            for x, y in zip(coupons.cycles[stopped], stress[stopped], strict=True):
                ax.annotate(
                    "",
                    xy=(1.45 * x, y),
                    xytext=(1.08 * x, y),
                    arrowprops={"arrowstyle": "->", "color": MARK, "lw": 1.0},
                )
    ax.plot([], [], ls="none", marker="o", mfc=MARK, mec=MARK, label="failed")
    if not coupons.failed.all():
        ax.plot([], [], ls="none", marker="o", mfc=PAPER, mec=MARK, label="run-out")
    ax.set_xscale("log")
    ax.set_yscale("log")
    ax.yaxis.set_major_formatter("{x:.0f}")
    ax.yaxis.set_minor_formatter("{x:.0f}" if np.ptp(np.log10(ax.get_ylim())) < 0.8 else NullFormatter())
    ax.set_xlim(coupons.cycles.min() / 2.5, top)
    exponent = fit.members[0].a3
    ax.set_xlabel("cycles to failure")
    ax.set_ylabel(
        f"$S_{{max}} (1-R)^{{{exponent:.2f}}}$, net [MPa]" if len(fit.members) == 1 else "equivalent stress [MPa]"
    )
    ax.legend(loc="upper right", fontsize=8)
    ax.grid(visible=True)
    note(ax, f"dark: {95:g} % band of the median; light: two scatters either side, for single lives")
    return ax


def draw_residuals(ax: Axes, found: FittedTests) -> Axes:
    """Draw standardised residuals against the fitted life; a run-out's is a lower bound, drawn as an arrow."""
    fit, coupons = found.fit, found.coupons
    location, residual = fit.location(), fit.residuals()
    seen = np.isfinite(location)
    for failed, face in ((True, MARK), (False, PAPER)):
        own = seen & (coupons.failed == failed)
        ax.plot(location[own], residual[own], ls="none", marker="o", ms=4.5, mfc=face, mec=MARK)
        if not failed:
            for x, y in zip(location[own], residual[own], strict=True):
                ax.annotate("", xy=(x, y + 0.7), xytext=(x, y), arrowprops={"arrowstyle": "->", "color": MARK})
    for level in (-2, 0, 2):
        ax.axhline(level, color=FAINT if level else SOFT, lw=0.9, zorder=0)
    ax.set_xlabel("fitted log10 N")
    ax.set_ylabel("residual / scatter")
    left = int((~seen).sum())
    note(ax, f"{left} run-outs under the asymptote not drawn" if left else "two scatters hold 95 of 100")
    return ax


def draw_candidates(ax: Axes, found: FittedTests) -> Axes:
    """Draw how much worse every model tried is than the best, by the information criterion."""
    ranked = [one for one in found.choice.candidates if np.isfinite(one.aicc)]
    if not ranked:
        ax.text(0.5, 0.5, "too few tests to tell models apart", ha="center", color=SOFT, transform=ax.transAxes)
        ax.set_axis_off()
        return ax
    worse = np.array([one.aicc - ranked[0].aicc for one in ranked])
    y = np.arange(len(ranked))
    colours = [MARK if one is found.choice.taken else SOFT for one in ranked]
    ax.barh(y, worse, color=colours, height=0.5)
    ax.plot(worse, y, ls="none", marker="o", ms=5, color=INK)
    ax.set_yticks(y, [one.words for one in ranked], fontsize=8)
    for tick, one in zip(ax.get_yticklabels(), ranked, strict=True):
        if one is found.choice.taken:
            tick.set(weight="bold", color=MARK)
    ax.invert_yaxis()
    ax.set_xlim(-0.05 * max(worse.max(), 4.0), 1.1 * max(worse.max(), 4.0))
    ax.set_xlabel("AICc above the least (under 2: not told apart)")
    return ax


def fit_figure(found: FittedTests) -> Figure:
    """Return the whole figure of a fit."""
    with styled():
        figure = new_figure(9.4, 7.0)
        grid = figure.add_gridspec(2, 2, height_ratios=[2.1, 1.0])
        draw_fit(figure.add_subplot(grid[0, :]), found)
        draw_residuals(figure.add_subplot(grid[1, 0]), found)
        draw_candidates(figure.add_subplot(grid[1, 1]), found)
        figure.suptitle(str(found.raw["name"]), x=0.01, ha="left", fontsize=11, weight="bold")
    return figure

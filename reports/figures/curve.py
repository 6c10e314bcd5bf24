"""The S-N family with the governing location's own curve and cycles on it."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes
from matplotlib.ticker import LogLocator, NullFormatter

from fatigue.life import Estimate
from fatigue.material.curves import LOG_LIVES
from reports.figures.style import INK, MARK, SOFT


def draw_curve(ax: Axes, estimate: Estimate) -> Axes:
    """Draw nominal equivalent stress against life: members, the location's curve between them, its cycles."""
    i = estimate.governing
    case, curves = estimate.case, estimate.curves.only(i)
    _, s = case.splice.locations[i]
    family = case.families[case.splice.sheets[s].material.name]
    shown = (LOG_LIVES >= 3) & (LOG_LIVES <= 9)
    lives = 10.0 ** LOG_LIVES[shown]
    first, last = family.tested_cycles
    for member in family.members:
        stress = member.equivalent(LOG_LIVES[shown])
        inside = (lives >= first) & (lives <= last)
        ax.plot(lives[inside], stress[inside], color=SOFT, lw=0.9)
        ax.text(
            first * 0.93,
            float(member.equivalent(np.log10(first))),
            f"$K_t$ {member.kt:g}",
            fontsize=8,
            color=SOFT,
            ha="right",
            va="center",
        )
    own = 10.0 ** curves.log_stress[0][shown]
    tested = lives >= first
    ax.plot(lives[tested], own[tested], color=INK, lw=1.8, label=f"this location, severity {curves.severity[0]:.2f}")
    low, high = estimate.route.low[[i]], estimate.route.high[[i]]
    life, stress = curves.life(low, high)[0], curves.equivalent_stress(low, high)[0]
    damage = estimate.route.by_cycle[i]
    seen = np.isfinite(life) & (life < 1e9) & (damage > 0)
    if seen.any():
        size = 8 + 140 * damage[seen] / damage.sum()
        ax.scatter(
            life[seen],
            stress[seen],
            s=size,
            facecolor="none",
            edgecolor=MARK,
            lw=1.1,
            zorder=3,
            label="its cycles, area by damage",
        )
    ax.axvspan(last, 1e9, color="#f1f3f5", zorder=0)
    ax.text(
        last * 1.15,
        0.03,
        f"beyond the tests:\ntail {curves.tail}",
        transform=ax.get_xaxis_transform(),
        fontsize=8,
        color=SOFT,
    )
    ax.set_xscale("log")
    ax.set_yscale("log")
    ax.set_xlim(2e3, 1e9)
    ax.yaxis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0)))
    ax.yaxis.set_major_formatter("{x:.0f}")
    ax.yaxis.set_minor_formatter(NullFormatter())
    ax.set_ylim(0.7 * own.min(), 1.3 * max(float(m.equivalent(np.log10(first))) for m in family.members))
    ax.set_xlabel("cycles to failure")
    ax.set_ylabel("net equivalent stress [MPa]")
    ax.set_title(f"{family.name}")
    ax.legend(loc="upper right", fontsize=8)
    ax.grid(visible=True)
    return ax

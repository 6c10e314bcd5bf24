"""The shipped curves, drawn."""

from __future__ import annotations

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.ticker import LogLocator, NullFormatter

from fatigue.material import library
from fatigue.material.curves import CurveFamily
from fatigue.material.strain import StrainLife, cyclic_strain, life_strain
from reports.figures.style import INK, SOFT, new_figure, styled


def draw_family(ax: Axes, family: CurveFamily) -> Axes:
    """Draw the members of an S-N family over their tested lives, R 0."""
    first, last = family.tested_cycles
    log_life = np.linspace(np.log10(first), np.log10(last), 120)
    for member in family.members:
        stress = member.equivalent(log_life)
        ax.plot(10**log_life, stress, color=INK, lw=1.4)
        ax.text(first * 0.93, float(stress[0]), f"$K_t$ {member.kt:g}", ha="right", va="center", fontsize=8)
    ax.set_xscale("log")
    ax.set_yscale("log")
    ax.set_xlim(first / 4, last * 1.2)
    ax.yaxis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0)))
    ax.yaxis.set_major_formatter("{x:.0f}")
    ax.yaxis.set_minor_formatter(NullFormatter())
    ax.set_xlabel("cycles to failure")
    ax.set_ylabel("largest net stress at R 0 [MPa]")
    ax.set_title(family.name)
    ax.grid(visible=True)
    return ax


def draw_strain_life(ax: Axes, name: str, k: StrainLife) -> Axes:
    """Draw total, elastic and plastic strain amplitude against reversals."""
    cycles = np.logspace(0, 7, 150)
    reversals = 2 * cycles
    elastic = k.strength_coefficient / k.modulus * reversals**k.strength_exponent
    plastic = k.ductility_coefficient * reversals**k.ductility_exponent
    ax.plot(cycles, 100 * life_strain(cycles, k), color=INK, lw=1.8, label="total")
    ax.plot(cycles, 100 * elastic, color=SOFT, lw=1.0, ls=(0, (6, 2)), label="elastic")
    ax.plot(cycles, 100 * plastic, color=SOFT, lw=1.0, ls=(0, (2, 1.5)), label="plastic")
    ax.set_xscale("log")
    ax.set_yscale("log")
    ax.set_ylim(0.05, 20)
    ax.yaxis.set_major_formatter("{x:g}")
    ax.set_xlabel("cycles to a crack, fully reversed")
    ax.set_ylabel("strain amplitude [%]")
    ax.set_title(f"{name}: strain life")
    ax.legend(fontsize=8)
    ax.grid(visible=True)
    return ax


def draw_cyclic_curve(ax: Axes, name: str, k: StrainLife) -> Axes:
    """Draw the cyclic stress-strain curve."""
    stress = np.linspace(0, 1.1 * k.cyclic_strength * 0.02**k.cyclic_exponent, 120)
    ax.plot(100 * cyclic_strain(stress, k), stress, color=INK, lw=1.8)
    ax.set_xlim(0, 3)
    ax.set_xlabel("strain [%]")
    ax.set_ylabel("stress [MPa]")
    ax.set_title(f"{name}: cyclic curve")
    ax.grid(visible=True)
    return ax


def library_figures() -> dict[str, Figure]:
    """Return a figure per S-N family and per set of strain-life constants, by the name of its file."""
    found = {}
    with styled():
        for name in library.families():
            figure = new_figure(6.6, 4.2)
            draw_family(figure.subplots(), library.family(name))
            found[f"S-N {name}"] = figure
        for name in library.strain_lives():
            figure = new_figure(9.4, 3.8)
            left, right = figure.subplots(1, 2)
            draw_strain_life(left, name, library.strain_life(name))
            draw_cyclic_curve(right, name, library.strain_life(name))
            found[f"strain life {name}"] = figure
    return found

"""Whole figures: the drawings put together as they are written to files."""

from __future__ import annotations

from matplotlib.figure import Figure

from fatigue.fits import FitCurves
from fatigue.life import Estimate
from reports.figures.curve import draw_curve
from reports.figures.fits import draw_life_against_fit
from reports.figures.loads import draw_damage_by_range, draw_exceedances
from reports.figures.loops import draw_loops
from reports.figures.makeup import MOST_LINES, draw_makeup
from reports.figures.section import draw_section
from reports.figures.style import new_figure, styled


def critical_row_figure(estimate: Estimate) -> Figure:
    """Return the section with the stress make-up of every location under it."""
    with styled():
        lines = min(len(estimate.rows), MOST_LINES)
        figure = new_figure(9.4, 3.0 + 0.8 + 0.32 * lines)
        upper, lower = figure.subplots(2, 1, height_ratios=[2.6, 0.8 + 0.32 * lines])
        draw_section(upper, estimate)
        figure.suptitle(estimate.case.title, x=0.01, ha="left", fontsize=11, weight="bold")
        draw_makeup(lower, estimate)
    return figure


def loads_figure(estimate: Estimate) -> Figure:
    """Return the exceedances and the damage by range side by side."""
    with styled():
        figure = new_figure(9.4, 3.4)
        left, right = figure.subplots(1, 2)
        draw_exceedances(left, estimate.loads.cycles)
        left.set_title("Remote stress")
        draw_damage_by_range(right, estimate)
        first = estimate.rows.iloc[0]
        right.set_title(f"Damage at row {first['row']}, {first['sheet']}")
    return figure


def curve_figure(estimate: Estimate) -> Figure:
    """Return the S-N family with the governing location's cycles, and its loops by the second opinion."""
    with styled():
        figure = new_figure(9.4, 4.0)
        left, right = figure.subplots(1, 2, width_ratios=[1.5, 1.0])
        draw_curve(left, estimate)
        draw_loops(right, estimate)
    return figure


def fit_figure(estimate: Estimate, curves: FitCurves) -> Figure:
    """Return life against fit for every row."""
    with styled():
        figure = new_figure(8.4, 4.4)
        draw_life_against_fit(figure.subplots(), estimate, curves)
    return figure


def case_figures(estimate: Estimate, curves: FitCurves) -> dict[str, Figure]:
    """Return every figure of a case's report by the name of its file."""
    return {
        "critical_row": critical_row_figure(estimate),
        "loads": loads_figure(estimate),
        "curve": curve_figure(estimate),
        "life_against_fit": fit_figure(estimate, curves),
    }

"""One hole as text and figures."""

from __future__ import annotations

import json
import math
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import pandas as pd

from fatigue.hole.installed import Installed, installed
from fatigue.hole.ring import Expanded, Metal, expand
from fatigue.hole.summary import HoleSummary, OneHole, factor_against_load
from reports.figures.hole import draw_edge, draw_factor, draw_residual
from reports.figures.style import new_figure, save, styled
from reports.tables import csv_text
from reports.writing import write_files

FITS = (-0.01, -0.003, 0.0, 0.003, 0.006, 0.01)
"""Fits drawn beside the hole's own."""
SHARES = np.linspace(0.05, 1.0, 39)


@dataclass(frozen=True)
class Making:
    """How a hole came to its fit and its residual stress.

    Parameters
    ----------
    installed : Installed
    states : Expanded
        Of the sheet around it: expanded, let go, filled, and emptied again.
    """

    installed: Installed
    states: Expanded


def make_hole(one: OneHole, yield_stress: float, cold_expansion: float) -> Making:
    """Follow the making of a hole in a sheet that may yield."""
    metal = Metal(one.modulus, one.poisson, yield_stress)
    made = installed(metal, one.pin_modulus, one.pin_poisson, fit=one.fit, cold_expansion=cold_expansion)
    shrink = (1 - one.pin_poisson) / one.pin_modulus
    return Making(made, expand(metal, cold_expansion, max(one.fit, 0.0), shrink))


def edge_frame(hole: HoleSummary) -> pd.DataFrame:
    """Return hoop stress and pressure around the half edge."""
    return pd.DataFrame({"angle_deg": hole.angle, "hoop_MPa": hole.hoop, "pressure_MPa": hole.pressure})


def as_csv(one: OneHole, hole: HoleSummary, making: Making | None = None) -> str:
    """Return the stresses around the edge as CSV."""
    return csv_text(edge_frame(hole))


def as_json(one: OneHole, hole: HoleSummary, making: Making | None = None) -> str:
    """Return the summary and the stresses around the edge as JSON; null where nothing touches."""
    return json.dumps(
        {
            "peak_MPa": hole.peak,
            "peak_angle_deg": hole.peak_angle,
            "range_factor_90deg": hole.range_factor_90,
            "range_factor_peak": hole.range_factor_peak,
            "contact_from_deg": _number(hole.contact_from),
            "contact_to_deg": _number(hole.contact_to),
            "open_factor": hole.open_factor,
            "bending": hole.bending if one.bend else None,
            "residual_MPa": making.installed.residual_hoop if making else None,
            "fit_percent": 100 * one.fit,
            "flags": [*hole.flags, *(making.installed.flags if making else ())],
            "edge": edge_frame(hole).to_dict(orient="records"),
        },
        indent=2,
        allow_nan=False,
    )


def _number(value: float) -> float | None:
    return None if math.isnan(value) else round(value, 6)


def as_table(one: OneHole, hole: HoleSummary, making: Making | None = None) -> str:
    """Return the summary and every fifteenth degree of the edge as a table."""
    around = {"row": "in a row of holes", "strip": "in a strip of its own", "wide": "in a wide sheet"}[one.edge]
    size = f"{one.diameter:g} mm hole {around}" + ("" if one.edge == "wide" else f", {one.width:g} mm wide")
    touching = (
        "nothing touches"
        if math.isnan(hole.contact_from)
        else "contact all round"
        if hole.contact_from == 0 and hole.contact_to == 180
        else f"contact from {hole.contact_from:.0f} to {hole.contact_to:.0f} deg"
    )
    fit = "snug pin" if one.fit == 0 else f"fit {100 * one.fit:+g} %"
    lines = [
        f"{size}; {fit}, pin {one.pin_modulus:g} MPa in sheet {one.modulus:g} MPa",
        f"  bypass {one.bypass:g} MPa, bearing {one.bearing:g} MPa, bending {one.bend:g} MPa",
        "",
        f"  peak              {hole.peak:8.1f} MPa at {hole.peak_angle:.0f} deg from the load axis, pin-load side",
        f"  range factor      {hole.range_factor_peak:8.3f} at its largest, {hole.range_factor_90:.3f} at 90 deg "
        f"(rise from no load over gross stress {one.gross_stress:.4g} MPa)",
        f"  left open         {hole.open_factor:8.3f} on bypass alone",
        f"  pin               {touching}",
    ]
    if one.bend:
        way = "the pin resists the ovalling" if hole.bending == "resisted" else "added outside the contact"
        lines.append(f"  bending           {way}: the higher peak of the two ways")
    if making is not None:
        made = making.installed
        lines.append(
            f"  making            fit {100 * made.nominal_fit:+g} % presses like {100 * made.fit:+.3g} %; yielded to "
            f"{made.plastic_zone:.2f} radii; residual hoop stress at the edge {made.residual_hoop + 0.0:.0f} MPa, "
            "to be added"
        )
    flags = [*hole.flags, *(making.installed.flags if making else ())]
    lines += [f"  flag: {flag}" for flag in flags]
    lines += ["", "  deg   hoop MPa   pressure MPa"]
    for k in range(0, hole.angle.size, 15):
        lines.append(f"  {hole.angle[k]:3.0f}   {hole.hoop[k]:8.1f}   {hole.pressure[k]:12.1f}")
    return "\n".join(lines)


def write_figures(one: OneHole, hole: HoleSummary, folder: Path, making: Making | None = None) -> list[Path]:
    """Draw the stresses around the edge, the factor against load for several fits, and what the making left."""
    with styled():
        edge = new_figure(6.6, 4.0)
        draw_edge(edge.subplots(), hole)
        figures = {"hole_edge": edge}
        if one.bypass or one.bearing:
            fits = sorted({*FITS, one.fit})
            factor = new_figure(6.6, 4.0)
            draw_factor(factor.subplots(), SHARES, fits, factor_against_load(one, fits, SHARES), one.fit)
            figures["hole_factor"] = factor
        if making is not None:
            residual = new_figure(6.6, 4.0)
            draw_residual(residual.subplots(), making.states)
            figures["hole_residual"] = residual

    def fill(place: Path) -> None:
        for name, figure in figures.items():
            for suffix in (".svg", ".png"):
                save(figure, place / f"{name}{suffix}")

    return write_files(folder, fill)

"""What studies say, in words, tables and files."""

from __future__ import annotations

from pathlib import Path
from textwrap import wrap
from typing import Any

import numpy as np
import pandas as pd

from fatigue.study import Scattered
from fatigue.sweeps import Swept, own_value
from reports.comparison import CAUTION, aligned
from reports.figures.decisions import draw_distribution, draw_inspection, draw_sweep, draw_swings
from reports.figures.style import life_text, new_figure, save, styled
from reports.tables import csv_text
from reports.writing import write_files
from spectra.faults import listed

WORDS = {
    "thickness": "the sheets' thickness",
    "pitch": "the pitch",
    "row_spacing": "the row spacing",
    "hole": "the hole diameter",
    "flexibility": "the fasteners' flexibility",
    "load": "the load",
    "fit": "the fit",
    "curve": "the material's scatter",
    "damage_sum": "the damage sum at failure",
}


def records(frame: pd.DataFrame) -> list[dict[str, Any]]:
    """Return a frame's lines by column name."""
    return [{str(name): value for name, value in line.items()} for line in frame.to_dict("records")]


LITTLE = 0.9
"""An input that leaves more than this share of the life at its bad end matters little."""


def drivers_text(study: Scattered, frame: pd.DataFrame) -> str:
    """Return one paragraph, made from the numbers: what drives the answer."""
    life = float(study.base.route.life.min())
    lines = records(frame)
    worst, little = lines[0], [WORDS[str(line["input"])] for line in lines if line["worst_ratio"] > LITTLE]
    text = (
        f"At the values of the case a typical hole lives {life_text(life)} flights. What can hurt most is "
        f"{WORDS[str(worst['input'])]}: two standard deviations ({worst['spread']}) the bad way leave "
        f"{100 * worst['worst_ratio']:.0f} % of it"
    )
    others = [
        f"{WORDS[str(line['input'])]} {100 * line['worst_ratio']:.0f} %"
        for line in lines[1:]
        if line["worst_ratio"] <= LITTLE
    ]
    text += f", then {listed(others, 'and')}. " if others else ". "
    if little:
        text += f"{listed(little, 'and').capitalize()} cost less than {100 * (1 - LITTLE):.0f} % each. "
    table = {line["row"]: line for line in records(study.table)[:-1]}
    splice = records(study.table)[-1]
    shares = [
        f"row {name} in {100 * table[name]['chance_first']:.0f} %"
        for name in study.rows
        if table[name]["chance_first"] > 0.005
    ]
    text += (
        f"With everything scattering at once and {study.holes} holes a row, half the joints have their first crack by "
        f"{life_text(splice['q50_flights'])} flights and one in twenty by {life_text(splice['q05_flights'])} "
        f"(standard error {life_text(splice['q05_error_flights'])}); the first crack comes in {listed(shares, 'and')} "
        "of them. "
    )
    top = records(study.rank)[0]
    text += (
        f"Over the joints drawn, life goes most with {top['input']} (rank correlation {top['rank_correlation']:+.2f})."
    )
    return text


def check_text(study: Scattered) -> str:
    """Return what the tables cost against direct solutions."""
    error = study.check["error_percent"].abs()
    if not len(error):
        return "The table was not checked against direct solutions."
    return (
        f"Checked against direct solutions of {len(error)} of the joints drawn: the shortest life by table is off by "
        f"{error.median():.2g} % at the median and {error.max():.2g} % at worst."
    )


def scatter_text(study: Scattered, frame: pd.DataFrame) -> str:
    """Return the swings, the distribution, the ranks and what stands behind them."""
    heads = ("input", "spread", "life, input down", "life, input up", "worst left", "governing down, up")
    cells = [
        (
            str(line["input"]).replace("_", " "),
            str(line["spread"]),
            life_text(line["life_down_flights"]),
            life_text(line["life_up_flights"]),
            f"{100 * line['worst_ratio']:.0f} %",
            f"{line['row_down']}, {line['row_up']}",
        )
        for line in records(frame)
    ]
    out = [study.base.case.title, "", "One at a time, two standard deviations each way", *aligned(heads, cells, (0, 1))]
    columns = ("first crack of", "1 in 100", "+-", "1 in 20", "+-", "half", "+-", "chance first", "+-")
    found: list[tuple[str, ...]] = []
    for line in records(study.table):
        name = str(line["row"])
        own = [name if name == "splice" else f"row {name}"]
        if np.isnan(line["q50_flights"]):
            own += ["far later", *[""] * 5]
        else:
            for q in ("q01", "q05", "q50"):
                own += [life_text(line[f"{q}_flights"]), life_text(line[f"{q}_error_flights"])]
        own += [f"{100 * line['chance_first']:.1f} %", f"{100 * line['chance_first_error']:.1f}"]
        found.append(tuple(own))
    out += ["", f"{study.count:,} joints, seed {study.seed}, {study.holes} holes a row; +- is one standard error"]
    out += aligned(columns, found, (0,))
    out += ["", "Rank correlation with the first crack of the splice"]
    out += [
        f"  {line['input']:<24}{line['rank_correlation']:+.3f} +- {line['error']:.3f}"
        for line in records(study.rank.head(8))
    ]
    out += ["", "Convergence of the 1 in 20 life"]
    out += [
        f"  {int(line['samples']):>8,} joints  {life_text(line['q05_flights'])} +- "
        f"{life_text(line['q05_error_flights'])}"
        for line in records(study.convergence)
    ]
    for text in (
        drivers_text(study, frame),
        check_text(study),
        ". ".join(text[:1].upper() + text[1:] for text in study.notes) + ".",
        CAUTION,
    ):
        out += ["", *wrap(text, 110)]
    return "\n".join(out)


def write_scatter(study: Scattered, frame: pd.DataFrame, folder: Path) -> list[Path]:
    """Write swings, distribution, ranks, convergence and check as tables, and the figures."""
    with styled():
        figures = {"swings": new_figure(8.4, 1.4 + 0.42 * len(frame))}
        draw_swings(figures["swings"].subplots(), frame, float(study.base.route.life.min()))
        figures["distribution"], figures["inspection"] = new_figure(8.4, 4.4), new_figure(8.4, 4.4)
        draw_distribution(figures["distribution"].subplots(), study)
        draw_inspection(figures["inspection"].subplots(), study.base)
    tables = {
        "swings": frame,
        "first_crack": study.table,
        "ranks": study.rank,
        "convergence": study.convergence,
        "table_check": study.check,
    }

    def fill(place: Path) -> None:
        for name, table in tables.items():
            (place / f"{name}.csv").write_text(csv_text(table), encoding="utf-8")
        for name, figure in figures.items():
            for suffix in (".svg", ".png"):
                save(figure, place / f"{name}{suffix}")

    return write_files(folder, fill)


def sweep_text(swept: Swept) -> str:
    """Return a line per value of one input, or the corners and extremes of two."""
    frame = swept.frame()
    keys = [v.key for v in swept.inputs]
    life = frame["life_flights"].to_numpy()
    ends = sorted({0, int(np.argmin(life)), int(np.argmax(life)), len(frame) - 1})
    shown = frame if len(keys) == 1 else frame.loc[ends]
    here = float(swept.base.route.life.min())
    cells = [
        (
            *(f"{line[key]:.4g}" for key in keys),
            life_text(float(line["life_flights"])),
            f"{line['life_flights'] / here:.3g}",
            f"row {line['row']}, {line['sheet']}",
        )
        for line in records(shown)
    ]
    out = [swept.base.case.title, f"As it is: {', '.join(f'{k} {own_value(swept.base, k):g}' for k in keys)}, "
           f"{life_text(here)} flights", ""]  # fmt: skip
    out += aligned((*keys, "life", "x as it is", "governing"), cells, (len(keys) + 2,))
    if len(keys) == 2:
        out += ["", f"First, last, shortest and longest of {len(frame):,} variants; all are in sweep.csv."]
    if swept.check.size:
        worst = 100 * np.abs(swept.check).max()
        out += ["", f"By table; off by at most {worst:.2g} % on {swept.check.size} variants solved directly as well."]
    return "\n".join(out)


def reach_text(key: str, flights: float, found: list[float]) -> str:
    """Say which values give a life."""
    if len(found) == 1:
        return f"{flights:,.0f} flights are reached at {key} = {found[0]:.4g}."
    values = listed([f"{v:.4g}" for v in found], "and")
    return (
        f"{flights:,.0f} flights are reached at {len(found)} values of {key}: {values}. Life does not rise or fall all "
        "the way: look at the figure before choosing."
    )


def write_sweep(swept: Swept, folder: Path) -> list[Path]:
    """Write the table and figure of a sweep."""
    with styled():
        figure = new_figure(8.4, 4.6)
        draw_sweep(figure.subplots(), swept)
    text = csv_text(swept.frame())

    def fill(place: Path) -> None:
        (place / "sweep.csv").write_text(text, encoding="utf-8")
        for suffix in (".svg", ".png"):
            save(figure, place / f"sweep{suffix}")

    return write_files(folder, fill)

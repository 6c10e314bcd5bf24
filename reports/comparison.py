"""Hole conditions and designs beside each other, as text and files."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from textwrap import wrap

import numpy as np
import pandas as pd

from fatigue.fits import FitCurves
from fatigue.life import Estimate
from reports.figures.fits import draw_conditions, draw_life_against_fit
from reports.figures.style import life_text, new_figure, save, styled
from reports.fit_words import fit_story
from reports.tables import csv_text
from reports.writing import write_files

CAUTION = "No credit for fit or cold work stands in damage-tolerance guidance: see the cautions in the case's report."


def conditions_text(estimate: Estimate, frame: pd.DataFrame, curves: FitCurves | None = None) -> str:
    """Return the table of hole conditions and the story of life against fit."""
    lines = [estimate.case.title, ""]
    heads = ("condition", "fit %", "expanded %", "life", "x open", "governing", "at deg", "residual left MPa")
    cells = [
        (
            str(line["condition"]),
            "-" if np.isnan(line["fit_percent"]) else f"{line['fit_percent']:+.2g}",
            "-" if np.isnan(line["cold_expansion_percent"]) else f"{line['cold_expansion_percent']:.2g}",
            life_text(float(line["life_flights"])),
            f"{line['ratio_to_open']:.2g}",
            f"row {line['row']}, {line['sheet']}",
            f"{line['angle_deg']:.0f}",
            f"{line['residual_left_MPa'] + 0.0:.0f}",
        )
        for _, line in frame.iterrows()
    ]
    lines += aligned(heads, cells, left=(0, 5))
    if curves is not None:
        lines += ["", "Life against fit"]
        for sentence in fit_story(estimate, curves):
            lines += wrap(sentence, 108, initial_indent="  ", subsequent_indent="  ")
    return "\n".join([*lines, "", *wrap(CAUTION, 110)])


def designs_text(estimates: Sequence[Estimate]) -> str:
    """Return several cases beside each other."""
    frame = designs_frame(estimates)
    heads = (
        "case",
        "row",
        "sheet",
        "face",
        "life",
        "no credit",
        "by practice",
        "by contact",
        "inspect from",
        "x first",
    )
    lives = ("life_flights", "life_no_credit_flights", "life_practice_flights", "life_contact_flights")
    cells = [
        (
            str(line["case"]),
            str(line["row"]),
            str(line["sheet"]),
            f"{line['face'] or '-'}{' (hidden)' if line['hidden'] else ''}",
            *(life_text(float(line[name])) for name in lives),
            life_text(float(line["threshold_flights"])),
            f"{line['ratio_to_first']:.2g}",
        )
        for _, line in frame.iterrows()
    ]
    return "\n".join([*aligned(heads, cells, left=(0, 1, 2, 3)), "", *wrap(CAUTION, 110)])


def designs_frame(estimates: Sequence[Estimate]) -> pd.DataFrame:
    """Return the governing location of each case, one line per case."""
    frame = pd.concat([one.rows.head(1) for one in estimates], ignore_index=True)
    frame.insert(0, "case", [one.case.title for one in estimates])
    frame["ratio_to_first"] = frame["life_flights"] / frame["life_flights"].iloc[0]
    return frame.drop(columns=["rank", "priority"])


def aligned(heads: Sequence[str], cells: Sequence[Sequence[str]], left: Sequence[int] = ()) -> list[str]:
    """Return lines of a table with a rule under its head."""
    widths = [max(len(text) for text in column) for column in zip(heads, *cells, strict=True)]

    def line(parts: Sequence[str]) -> str:
        return "  ".join(
            part.ljust(width) if i in left else part.rjust(width)
            for i, (part, width) in enumerate(zip(parts, widths, strict=True))
        ).rstrip()

    return [line(heads), line(["-" * width for width in widths]), *(line(own) for own in cells)]


def write_conditions(estimate: Estimate, frame: pd.DataFrame, curves: FitCurves, folder: Path) -> list[Path]:
    """Write the conditions and life against fit as tables and figures."""
    with styled():
        conditions = new_figure(8.4, 1.2 + 0.5 * len(frame))
        draw_conditions(conditions.subplots(), frame)
        against = new_figure(8.4, 4.6)
        draw_life_against_fit(against.subplots(), estimate, curves)
    splice = estimate.case.splice
    names = [f"{splice.rows[r].name}_{splice.sheets[s].name}" for r, s in splice.locations]
    table = pd.DataFrame({"fit_percent": curves.fit_percent})
    for name, life in zip(names, curves.life.T, strict=True):
        table[f"life_{name}_flights"] = life

    def fill(place: Path) -> None:
        (place / "conditions.csv").write_text(csv_text(frame), encoding="utf-8")
        (place / "life_against_fit.csv").write_text(csv_text(table), encoding="utf-8")
        for name, figure in {"conditions": conditions, "life_against_fit": against}.items():
            for suffix in (".svg", ".png"):
                save(figure, place / f"{name}{suffix}")

    return write_files(folder, fill)


def write_designs(estimates: Sequence[Estimate], folder: Path) -> list[Path]:
    """Write the table of several cases."""
    text = csv_text(designs_frame(estimates))

    def fill(place: Path) -> None:
        (place / "designs.csv").write_text(text, encoding="utf-8")

    return write_files(folder, fill)

"""Tables: the ranked one for the terminal, and the files `rows.csv`, `cycles.csv` and `result.json`."""

from __future__ import annotations

import json
import math
import platform
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd

from fatigue.cautions import CAUTIONS
from fatigue.life import Estimate
from fatigue.references import methods, references
from reports.figures.style import life_text
from spectra.units import pair_of, split_unit


def in_unit(frame: pd.DataFrame, inch: bool) -> pd.DataFrame:
    """Return a frame with every dimensional column in the wanted system, its name saying so."""
    if not inch:
        return frame
    out = {}
    for name in frame.columns:
        stem, unit = split_unit(str(name))
        if unit is None:
            out[str(name)] = frame[name]
        else:
            pair = pair_of(unit)
            out[f"{stem}_{pair.inch}"] = frame[name] / pair.factor
    return pd.DataFrame(out)


def csv_text(frame: pd.DataFrame) -> str:
    """Return a frame as CSV with six figures; a text that a spreadsheet would run as a formula is quoted with '."""
    safe = frame.copy()
    for name in safe.columns:
        if not pd.api.types.is_numeric_dtype(safe[name].dtype):
            safe[name] = [f"'{v}" if isinstance(v, str) and v[:1] in tuple("=+-@\t\r") else v for v in safe[name]]
    return safe.to_csv(index=False, float_format="%.6g", lineterminator="\n")


def cycles_frame(estimate: Estimate) -> pd.DataFrame:
    """Return the counted cycles of a flight."""
    cycles = estimate.loads.cycles
    return pd.DataFrame({"min_MPa": cycles.low, "max_MPa": cycles.high, "count": cycles.count})


def result_json(estimate: Estimate, inch: bool = False) -> str:
    """Return inputs, results, methods with sources, versions and cautions as JSON; no number is NaN or infinite."""
    case = estimate.case
    content = {
        "title": case.title,
        "case_file": Path(case.source).name,
        "case_sha256": case.digest,
        "versions": versions(),
        "inputs": case.echo,
        "loads": {
            "name": estimate.loads.name,
            "notes": list(estimate.loads.notes),
            "cycles_per_flight": estimate.loads.cycles.total,
        },
        "rows": in_unit(estimate.rows, inch).to_dict(orient="records"),
        "sheets": [
            {"sheet": sheet.name, "remote_stress_per_S": stress}
            for sheet, stress in zip(case.splice.sheets, estimate.joint.remote_per_stress, strict=True)
        ],
        "equilibrium_residual": estimate.joint.equilibrium_residual,
        "threshold_factor": {
            "first_of_many": estimate.threshold.first_of_many,
            "confidence": estimate.threshold.confidence,
        },
        "methods": [
            {
                "name": m.name,
                "stage": m.stage,
                "formula": m.formula,
                "range": m.range,
                "sources": [str(references()[key]) for key in m.keys],
            }
            for m in methods()
        ],
        "cautions": list(CAUTIONS),
    }
    return json.dumps(plain_values(content), indent=2, ensure_ascii=False, allow_nan=False) + "\n"


def versions() -> dict[str, str]:
    """Return the versions an answer depends on."""
    found = {"python": platform.python_version()}
    for name in ("faying", "numpy", "scipy", "pandas", "rainflow"):
        try:
            found[name] = version(name)
        except PackageNotFoundError:
            found[name] = "not installed"
    return found


def plain_values(value: Any) -> Any:
    """Return a value in JSON's own types, NaN and infinity as null."""
    if isinstance(value, dict):
        return {str(key): plain_values(item) for key, item in value.items()}
    if isinstance(value, list | tuple):
        return [plain_values(item) for item in value]
    if isinstance(value, np.generic):
        return plain_values(value.item())
    if isinstance(value, float) and not math.isfinite(value):
        return None
    return value


COLUMNS = (
    ("rank", "#", "{:d}"),
    ("row", "row", "{}"),
    ("sheet", "sheet", "{}"),
    ("face", "face", "{}"),
    ("transfer_fraction", "load\ntaken %", "percent"),
    ("bypass_MPa", "bypass\n{stress}", "{:.0f}"),
    ("bearing_MPa", "bearing\n{stress}", "{:.0f}"),
    ("bending_MPa", "bending\n{stress}", "{:.0f}"),
    ("peak_max_MPa", "peak\n{stress}", "{:.0f}"),
    ("life_no_credit_flights", "life, no\ncredit", "life"),
    ("life_practice_flights", "by\npractice", "life"),
    ("life_contact_flights", "by\ncontact", "life"),
    ("threshold_flights", "inspect\nfrom", "life"),
    ("share_used", "used\n%", "share"),
    ("priority", "inspect\norder", "{:d}"),
)
"""Column of the frame, heading, format."""


def ranked_text(estimate: Estimate, inch: bool = False) -> str:
    """Return the ranked table and what a reader needs beside it, for a terminal."""
    case, rows = estimate.case, estimate.rows
    shown = in_unit(rows, inch)
    names = dict(zip(rows.columns, shown.columns, strict=True))
    stress = "ksi" if inch else "MPa"
    cells = []
    for _, line in shown.iterrows():
        cells.append([_cell(line, names[column], style, inch) for column, _, style in COLUMNS])
    for i, hidden in enumerate(rows["hidden"]):
        cells[i][3] = (str(cells[i][3]) or "-") + (" (hidden)" if hidden else "")
    heads = [head.format(stress=stress).split("\n") for _, head, _ in COLUMNS]
    heads = [head + [""] * (2 - len(head)) for head in heads]
    table = _aligned(heads, cells)
    return "\n".join([case.title, "", *answer(estimate), "", *table, "", *_notes(estimate), *order_text(estimate)])


def answer(estimate: Estimate) -> list[str]:
    """Return the answer in two sentences, and what the credit is worth in a third."""
    first = estimate.rows.iloc[0]
    parts = {part: float(first[f"from_{part}_MPa"]) for part in ("bypass", "bearing", "bending")}
    total = sum(parts.values()) or 1.0
    ranked = sorted(parts.items(), key=lambda item: -item[1])
    shares = ", ".join(f"{name} {100 * value / total:.0f} %" for name, value in ranked)
    life, bare = float(first["life_flights"]), float(first["life_no_credit_flights"])
    route = estimate.case.life.credit
    sentences = [
        f"Row {first['row']}, {first['sheet']}, goes first, on {face_text(first)}, after {life_text(life)} flights at "
        f"the median (route {route}).",
        f"What the hole's edge sees without credit is {shares}.",
    ]
    if math.isfinite(life) and 0 < bare < life:
        sentences.append(
            f"Without credit for what fills the hole the life is {life_text(bare)} flights: the credit is worth "
            f"{life / bare:.1f} times, and is the first thing to doubt."
        )
    return sentences


def face_text(line: pd.Series[Any]) -> str:
    """Write a location's face and whether it can be seen."""
    return f"{line['face'] or 'either'} face ({'hidden' if line['hidden'] else 'visible'})"


def threshold_text(estimate: Estimate) -> str:
    """Write how the threshold follows from the median life."""
    settings, factor = estimate.case.inspection, estimate.threshold
    parts = [
        f"first of {settings.holes_per_row} holes at {settings.reliability:g} reliability x {factor.first_of_many:.3f}"
    ]
    if settings.tests:
        parts.append(f"{settings.tests} test life at {settings.confidence:g} confidence x {factor.confidence:.3f}")
    return (
        f"Threshold = median life {'with' if settings.use_credit else 'without'} credit x {factor.total:.3f} "
        f"({', '.join(parts)}; scatter of log10 life {settings.scatter_log10:g})."
    )


def order_text(estimate: Estimate) -> list[str]:
    """Return the first inspection order in words, with its caution."""
    flown = estimate.case.loads.flown_flights
    lines = [
        "Inspection order: share of the threshold used, then hidden before visible.",
        f"  {threshold_text(estimate)}",
    ]
    for _, line in estimate.rows.sort_values("priority").head(5).iterrows():
        lines.append(
            f"  {line['priority']}. row {line['row']}, {line['sheet']}, {face_text(line)}: from "
            f"{life_text(line['threshold_flights'])} flights, {share_text(line['share_used'])} used at {flown:,.0f}"
        )
    return [
        *lines,
        "",
        "Initiation only: not crack growth, not a damage-tolerance threshold (14 CFR 25.571(a)(3)).",
        "See the cautions in report.html.",
    ]


def share_text(share: float) -> str:
    """Write a share as a percentage that does not pretend.

    >>> share_text(1.2169), share_text(0.004), share_text(0.0)
    ('122 %', '< 1 %', '0 %')
    """
    return "0 %" if share == 0 else "< 1 %" if share < 0.01 else f"{100 * share:.0f} %"


def _cell(line: pd.Series[Any], name: str, style: str, inch: bool) -> str:
    value = line[name]
    if style == "percent":
        return f"{100 * value:.0f}"
    if style == "share":
        return share_text(float(value)).removesuffix(" %")
    if style == "life":
        return life_text(float(value))
    if style == "{:.0f}" and inch:
        return f"{value:.1f}"
    return style.format(value)


def _aligned(heads: list[list[str]], cells: list[list[str]]) -> list[str]:
    columns = list(zip(*cells, strict=True))
    widths = [max(len(x) for x in (*head, *column)) for head, column in zip(heads, columns, strict=True)]
    left = {1, 2, 3}

    def line(parts: list[str]) -> str:
        return "  ".join(
            part.ljust(width) if i in left else part.rjust(width)
            for i, (part, width) in enumerate(zip(parts, widths, strict=True))
        ).rstrip()

    head = [line([h[k] for h in heads]) for k in (0, 1)]
    return [*head, line(["-" * width for width in widths]), *(line(row) for row in cells)]


def _notes(estimate: Estimate) -> list[str]:
    """Return each flag once, with the locations it belongs to."""
    places: dict[str, list[str]] = {}
    for _, line in estimate.rows.iterrows():
        for flag in filter(None, str(line["flags"]).split("; ")):
            places.setdefault(flag, []).append(f"{line['row']} {line['sheet']}")
    if not places and not estimate.loads.notes:
        return []
    lines = ["Flags"]
    lines += [f"  loads: {note}" for note in estimate.loads.notes]
    lines += [f"  {flag} ({', '.join(where)})" for flag, where in places.items()]
    return [*lines, ""]

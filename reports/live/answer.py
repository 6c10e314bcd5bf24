"""From the page's tables to what it shows: the same reading and the same estimate as `faying life`."""

from __future__ import annotations

import hashlib
import json
from collections import OrderedDict
from pathlib import Path
from typing import Any

import fatigue
from fatigue.case.build import Case, parse_case
from fatigue.fits import fit_curves
from fatigue.life import Estimate
from fatigue.loads import CountedLoads, count_loads
from reports.figures.style import life_text
from reports.live.places import path_faults
from reports.live.shapes import section_shapes
from reports.live.toml_text import toml_text
from reports.tables import answer as sentences
from reports.tables import face_text, plain_values, share_text
from reports.why import why_first
from reports.writing import write, write_text
from spectra.faults import Fault, InputFaults

LIVE_FITS = 15
"""Fits of the live curve of life against fit; the report has more."""
MOST_LOCATIONS = 40
"""Rows times sheets the page takes; more belong to `faying life`, which has no time limit."""
KEPT_COUNTS = 8
_counts: OrderedDict[str, CountedLoads] = OrderedDict()


def read_tables(document: dict[str, Any], folder: Path) -> tuple[str, Case]:
    """Write the page's tables as a case file's text and read it strictly.

    Raises
    ------
    InputFaults
        As a case file's, and for a path that leads out of the folder or a splice too large for the page.
    """
    text = toml_text(document)
    faults = list(path_faults(document, folder))
    sizes = [len(part) if isinstance(part := document.get(key), list) else 0 for key in ("row", "sheet")]
    if sizes[0] * sizes[1] > MOST_LOCATIONS:
        problem = f"{sizes[0]} rows in {sizes[1]} sheets are more than {MOST_LOCATIONS} places."
        faults.append(Fault("row", problem, "Use `faying life` for a joint of that size."))
    if faults:
        raise InputFaults("the page", faults)
    return text, parse_case(text, "case.toml", folder)


def shared_count(case: Case) -> CountedLoads:
    """Return the case's counted loads, counted once for each content of its `[loads]` and of the file they name."""
    table = case.loads.model_dump(exclude={"flown_flights"})
    named = [case.loads.spectrum or "", case.loads.history.file if case.loads.history else ""]
    files = [hashlib.sha256(path.read_bytes()).hexdigest() for name in named if (path := case.folder / name).is_file()]
    key = json.dumps([table, files], sort_keys=True)
    if key not in _counts:
        _counts[key] = count_loads(case)
        while len(_counts) > KEPT_COUNTS:
            _counts.popitem(last=False)
    _counts.move_to_end(key)
    return _counts[key]


def _estimate(case: Case) -> Estimate:
    return fatigue.estimate(case, shared_count(case))


def answer(document: dict[str, Any], folder: Path) -> dict[str, Any]:
    """Return the text a case file would have, and either its answer or its faults.

    Parameters
    ----------
    document : dict
        The tables of a case.
    folder : Path
        Paths in the case are taken from here.

    Returns
    -------
    dict
        `toml`, and either `faults` or `rows`, `sentences`, `why`, `section` and `fit`; JSON's own types, numbers as
        the estimate has them.
    """
    try:
        text, case = read_tables(document, folder)
        estimate = _estimate(case)
    except InputFaults as error:
        return {"toml": toml_text(document), "faults": [vars(fault) for fault in error.faults]}
    lives = [name for name in estimate.rows.columns if name.endswith("_flights")]
    rows = [
        {
            **line.to_dict(),
            "shown": {
                **{name: life_text(float(line[name])) for name in lives},
                "share_used": share_text(float(line["share_used"])),
                "face": face_text(line),
            },
        }
        for _, line in estimate.rows.iterrows()
    ]
    own_fits = {row.hole.fit_percent for row in case.splice.rows}
    found: dict[str, Any] = plain_values(
        {
            "toml": text,
            "title": case.title,
            "route": case.life.credit,
            "rows": rows,
            "sentences": sentences(estimate),
            "why": why_first(estimate),
            "section": section_shapes(estimate),
            "fit": {"given": next(iter(own_fits)) if len(own_fits) == 1 else None},
            "loads": {
                "name": estimate.loads.name,
                "cycles": estimate.loads.cycles.total,
                "notes": estimate.loads.notes,
                "largest": float(estimate.local.levels[-1]),
            },
        }
    )
    return found


def fits(document: dict[str, Any], folder: Path) -> dict[str, Any]:
    """Return life against fit for every location, or no curve where the case has faults."""
    try:
        _, case = read_tables(document, folder)
        estimate = _estimate(case)
    except InputFaults:
        return {"lines": []}
    curves = fit_curves(estimate, steps=LIVE_FITS)
    splice = case.splice
    lines = [
        {"row": splice.rows[r].name, "sheet": splice.sheets[s].name, "life": curves.life[:, i].tolist()}
        for i, (r, s) in enumerate(splice.locations)
    ]
    found: dict[str, Any] = plain_values({"fit_percent": curves.fit_percent.tolist(), "lines": lines})
    return found


def save(document: dict[str, Any], folder: Path, name: str, replace: bool) -> dict[str, Any]:
    """Write a case that reads without fault into the folder."""
    path = folder / f"{name}.toml"
    try:
        text, _ = read_tables(document, folder)
        if path.is_symlink() or (path.exists() and not (replace and path.is_file())):
            return {"exists": path.name}
        write_text(path, text)
    except InputFaults as error:
        return {"faults": [vars(fault) for fault in error.faults]}
    return {"saved": path.name}


def report(document: dict[str, Any], folder: Path, name: str) -> dict[str, Any]:
    """Write the files of `faying life` into a folder of the report's name, the case beside them."""
    out = folder / f"{name} report"
    try:
        if out.is_symlink() or (out.exists() and not out.is_dir()):
            raise InputFaults(str(out.name), [Fault("", "something else of that name is in the way.")])
        text, case = read_tables(document, folder)
        written = write(_estimate(case), out)
        write_text(out / "case.toml", text)
    except InputFaults as error:
        return {"faults": [vars(fault) for fault in error.faults]}
    return {"folder": out.name, "files": [*(path.name for path in written), "case.toml"]}

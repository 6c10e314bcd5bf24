"""Paths the page may name: files below the folder the server was started in, and no other."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import spectra
from fatigue.material import library
from spectra.faults import Fault

NAME = re.compile(r"[A-Za-z0-9][A-Za-z0-9 _-]{0,59}")
"""Of a case saved from the page: no dot and no separator, so it stays where it is put."""
BAD_NAME = "A name has letters, digits, spaces, - and _, begins with a letter or digit, and is at most 60 long."
RESERVED = re.compile(r"(?i)(con|prn|aux|nul|com\d|lpt\d)")
MOST_CASES = 200


def is_name(name: object) -> bool:
    """Tell whether a name can be given to a file made from the page."""
    return isinstance(name, str) and bool(NAME.fullmatch(name)) and not RESERVED.fullmatch(name)


def inside(folder: Path, path: str) -> bool:
    """Tell whether a path, links followed, stays below a folder."""
    if "\0" in path:
        return False
    try:
        return (folder / path).resolve().is_relative_to(folder.resolve())
    except (OSError, RuntimeError, ValueError):
        return False


def case_names(folder: Path) -> list[str]:
    """Return the case files that stand in a folder itself."""
    found = sorted(path.name for path in folder.glob("*.toml") if path.is_file() and inside(folder, path.name))
    return found[:MOST_CASES]


def path_faults(document: dict[str, Any], folder: Path) -> Iterator[Fault]:
    """Yield a fault for every path of a case that leads out of the folder."""
    for where, path in _paths(document):
        if not inside(folder, path):
            yield Fault(
                where,
                "leads out of the folder the page works in.",
                "Name a file below that folder, or start `faying try` with a case above it.",
            )


def _paths(document: dict[str, Any]) -> Iterator[tuple[str, str]]:
    """Yield each value that the case reader would take for a path, with its key."""
    loads = document.get("loads")
    if isinstance(loads, dict):
        spectrum, history = loads.get("spectrum"), loads.get("history")
        if isinstance(spectrum, str) and spectrum not in spectra.shipped():
            yield "loads.spectrum", spectrum
        if isinstance(history, dict) and isinstance(history.get("file"), str):
            yield "loads.history.file", history["file"]
    materials = document.get("material")
    if isinstance(materials, dict):
        for name, table in materials.items():
            curve = table.get("curve") if isinstance(table, dict) else None
            if isinstance(curve, str) and curve not in library.families():
                yield f"material.{name}.curve", curve

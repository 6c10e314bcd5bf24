"""The keys of a phase whose repeated loads are given by exceedances: read and checked."""

from __future__ import annotations

import math
from collections.abc import Iterator
from pathlib import Path
from typing import Any, TypeGuard

import numpy as np

from spectra.csv_file import numbers, open_csv
from spectra.exceedance import Curve, ExceedanceTable, GustForm
from spectra.faults import Fault, InputFaults, did_you_mean, listed, show
from spectra.spectrum import Exceeded

KEYS = ("exceedances", "exceedances_down", "gust", "smallest", "largest", "levels")
TABLE_KEYS = ("at", "per_block", "file")
GUST_KEYS = ("N0", "P1", "b1", "P2", "b2", "A", "hours")
MOST_LEVELS = 100
LEVELS = 10


def exceeded_of(entry: dict[str, Any], folder: Path, flights: int) -> Exceeded:
    """Return what a checked phase says of its exceedances; a gust form's hours are a flight's."""
    up: Curve
    if "gust" in entry:
        given = {key: float(value) for key, value in entry["gust"].items()}
        up = GustForm(**(given | {"hours": given["hours"] * flights}))
    else:
        up = _table(entry["exceedances"], folder)
    down = _table(entry["exceedances_down"], folder) if "exceedances_down" in entry else None
    return Exceeded(
        up, down, float(entry["smallest"]), entry.get("levels", LEVELS), float(entry.get("largest", np.inf))
    )


def exceedance_faults(entry: dict[str, Any], where: str, folder: Path, flights: int) -> Iterator[Fault]:
    """Find what is wrong with a phase's exceedances."""
    if "amplitude" in entry or "cycles" in entry:
        yield Fault(where, "has cycles of given levels and exceedances.", "Keep one of the two.")
    forms = [key for key in ("exceedances", "gust") if key in entry]
    if len(forms) != 1:
        said = "both exceedances and gust" if forms else "neither exceedances nor gust"
        yield Fault(where, f"has {said}.", "Give one of the two.")
        return
    levels = entry.get("levels", LEVELS)
    if not isinstance(levels, int) or isinstance(levels, bool) or not 2 <= levels <= MOST_LEVELS:
        yield Fault(f"{where}.levels", f"{show(levels)} must be a whole number from 2 to {MOST_LEVELS}.")
    for key in ("smallest", "largest"):
        if (key in entry or key == "smallest") and not (_number(entry.get(key)) and entry[key] > 0):
            yield Fault(f"{where}.{key}", f"{show(entry.get(key))} must be a level greater than 0.")
    own = list(_gust_faults(entry["gust"], f"{where}.gust") if forms == ["gust"] else ())
    for key in ("exceedances", "exceedances_down"):
        if key in entry:
            own += _table_faults(entry[key], f"{where}.{key}", folder)
    yield from own
    if own or not (_number(entry.get("smallest")) and entry["smallest"] > 0):
        return
    exceeded = exceeded_of({"levels": LEVELS} | entry, folder, flights)
    for key, curve in ((forms[0], exceeded.up), ("exceedances_down", exceeded.down)):
        if curve is not None and float(curve.number(exceeded.smallest)) < 2:
            yield Fault(
                f"{where}.smallest",
                f"a block has {float(curve.number(exceeded.smallest)):.3g} loads beyond {exceeded.smallest:g} by "
                f"{key}; at least 2 are needed.",
                "Lower it, or put more flights in the block.",
            )
        elif isinstance(curve, ExceedanceTable) and exceeded.smallest < curve.at[0]:
            problem = f"{exceeded.smallest:g} is below the {key} table, which begins at {curve.at[0]:g}."
            yield Fault(f"{where}.smallest", problem, "Raise it, or begin the table lower.")


def _table(given: dict[str, Any], folder: Path) -> ExceedanceTable:
    if "file" in given:
        at, per_block = _columns(folder / given["file"])
        return ExceedanceTable(at, per_block)
    return ExceedanceTable(np.array(given["at"], dtype=float), np.array(given["per_block"], dtype=float))


def _columns(path: Path) -> tuple[Any, Any]:
    file = open_csv(path, ["at", "per_block"])
    missing = [name for name in ("at", "per_block") if name not in file.names]
    if missing:
        remedy = did_you_mean(missing[0], file.names)
        raise InputFaults(str(path), [Fault(listed(missing, "and"), "there is no such column.", remedy)])
    parts = [[numbers(block[name]) for name in ("at", "per_block")] for block in file.blocks(["at", "per_block"])]
    return tuple(np.concatenate(column) for column in zip(*parts, strict=True))  # type: ignore[return-value]


def _table_faults(given: Any, where: str, folder: Path) -> Iterator[Fault]:
    if not isinstance(given, dict) or not (set(given) == {"file"} or set(given) == {"at", "per_block"}):
        yield Fault(where, f"{show(given)} is no table.", "Write { at = [...], per_block = [...] } or { file = ... }.")
        return
    if "file" in given:
        try:
            at, per_block = _columns(folder / str(given["file"]))
        except InputFaults as faults:
            yield from (Fault(f"{where}.file {given['file']}", str(fault)) for fault in faults.faults)
            return
    else:
        at, per_block = given["at"], given["per_block"]
        lists = all(isinstance(column, list) and all(map(_number, column)) for column in (at, per_block))
        if not lists or len(at) != len(per_block):
            yield Fault(where, "at and per_block must be lists of numbers, equally long.")
            return
    level, number = np.asarray(at, dtype=float), np.asarray(per_block, dtype=float)
    if level.size < 2 or not (np.isfinite(level).all() and np.isfinite(number).all()):
        yield Fault(where, "needs at least two points, all finite numbers.")
    elif (np.diff(level) <= 0).any():
        row = int(np.flatnonzero(np.diff(level) <= 0)[0])
        yield Fault(f"{where}.at", f"{level[row + 1]:g} follows {level[row]:g}: levels must rise.")
    elif (number <= 0).any():
        yield Fault(f"{where}.per_block", f"{number[number <= 0][0]:g} must be greater than 0.")
    elif (np.diff(number) >= 0).any():
        row = int(np.flatnonzero(np.diff(number) >= 0)[0])
        problem = f"rises or stays from {number[row]:g} at {level[row]:g} to {number[row + 1]:g} at {level[row + 1]:g}"
        yield Fault(f"{where}.per_block", f"{problem}: a higher level is exceeded less often.")
    elif number[-1] > 1:
        problem = f"ends at {number[-1]:g} exceedances a block; the largest load comes once."
        yield Fault(where, problem, "Carry the table on to 1 or less.")


def _gust_faults(given: Any, where: str) -> Iterator[Fault]:
    if not isinstance(given, dict):
        yield Fault(where, f"{show(given)} must be a table.", f"Its keys are {listed(GUST_KEYS, 'and')}.")
        return
    for key in given:
        if key not in GUST_KEYS:
            yield Fault(f"{where}.{key}", "is not a key of the gust form.", did_you_mean(key, GUST_KEYS))
    for key in GUST_KEYS:
        value = given.get(key)
        if key in ("P1", "P2"):
            if not _number(value) or not 0 <= value <= 1:
                yield Fault(f"{where}.{key}", f"{show(value)} must be a share of the time, from 0 to 1.")
        elif not _number(value) or not value > 0:
            yield Fault(f"{where}.{key}", f"{show(value)} must be greater than 0.")
    if all(_number(given.get(key)) for key in ("P1", "P2")) and not 0 < given["P1"] + given["P2"] <= 1:
        yield Fault(where, f"P1 + P2 is {given['P1'] + given['P2']:g}; shares of the time add up to at most 1.")


def _number(value: Any) -> TypeGuard[float]:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)

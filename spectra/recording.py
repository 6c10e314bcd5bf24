"""A recorded history: values of one column, or a linear combination of several, with their times and defects."""

from __future__ import annotations

from collections.abc import Callable, Collection, Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from spectra.csv_file import CsvFile, numbers, open_csv
from spectra.defects import KINDS, Defects, find_defects, repaired, without
from spectra.faults import Fault, InputFaults, did_you_mean, listed, show
from spectra.flights import Flights, GroundRule, find_flights
from spectra.other_files import NumpyFile, ParquetFile, open_numpy, open_parquet
from spectra.store import Store, blocks
from spectra.units import PAIRS, pair_of, split_unit

Array = NDArray[np.float64]
File = CsvFile | NumpyFile | ParquetFile

MOST_SEEN = 5
"""Cells without a number that are shown as they are written."""
GAP = 10.0
"""A step of time so many times the usual one is told as a gap."""


@dataclass(frozen=True, eq=False)
class Recording:
    """A recorded history.

    Parameters
    ----------
    file : CsvFile, NumpyFile or ParquetFile
    column : str
        What the values are, their unit last.
    values : ndarray, shape (n,)
        In the column's unit; a memory map where there are many. NaN where a value is missing.
    time : ndarray or None
        Never falling [s].
    seen : dict
        Text of the first cells that hold no number, by row.
    notes : tuple of str
    """

    file: File
    column: str
    values: NDArray[Any]
    time: Array | None = None
    seen: dict[int, str] = field(default_factory=dict)
    notes: tuple[str, ...] = ()

    @property
    def unit(self) -> str:
        """Unit of the values: MPa or ksi."""
        return split_unit(self.column)[1] or ""

    def defects(self, threshold: float | None = None) -> tuple[Defects, ...]:
        """Return missing values, spikes and drop-outs; see `defects.find_defects`."""
        return find_defects(self.values, threshold)

    def told(self, defects: Defects) -> str:
        """Return defects in words, with where they are and what stands there."""
        return defects.told(
            lambda row: self.file.place(row) + (f" ({self.seen[row]})" if row in self.seen else ""), MOST_SEEN
        )

    def repaired(self, kinds: Collection[str], threshold: float | None = None) -> Recording:
        """Return the recording without its defects of some kinds, each listed in the notes.

        Raises
        ------
        InputFaults
            If a kind is unknown, or values are missing and are not among the kinds.
        """
        unknown = [kind for kind in kinds if kind not in KINDS]
        if unknown:
            faults = [Fault("repair", f'"{kind}" cannot be left out.', did_you_mean(kind, KINDS)) for kind in unknown]
            raise InputFaults(str(self.file.path), faults)
        found = self.defects(threshold)
        missing = [d for d in found if d.kind == "missing" and "missing" not in kinds]
        if missing:
            problem = f"{self.told(missing[0])}: not finite numbers."
            remedy = "Mend the file, or leave them out and have them listed with --repair missing."
            raise InputFaults(str(self.file.path), [Fault(self.column, problem, remedy)])
        said = tuple(("left out " if d.kind in kinds else "kept ") + self.told(d) for d in found)
        kept = replace(self, notes=self.notes + said)
        if not any(d.kind in kinds for d in found):
            return kept
        values, out = repaired(self.values, found, kinds)
        if not values.size:
            problem = f"nothing is left without {self.told(found[0])}."
            raise InputFaults(str(self.file.path), [Fault(self.column, problem, "Look at the file.")])
        return replace(kept, values=values, time=None if self.time is None else without(self.time, out))

    def flights(self, rule: GroundRule) -> Flights:
        """Return the flights of a recording that has times and no value missing.

        Raises
        ------
        InputFaults
            If there are no times, or the rule finds no flight.
        """
        where = str(self.file.path)
        if self.time is None:
            raise InputFaults(where, [Fault("time", "a ground level needs times.", "Name the column of times.")])
        found = find_flights(self.values, self.time, rule)
        if not len(found):
            low, high = _limits(self.values)
            problem = (
                f"no stretch of {rule.least_flight:g} s stays above {rule.below:g} {self.unit}: no flight found. "
                f"The values go from {low:.5g} to {high:.5g} over {self.time[-1] - self.time[0]:.6g} s."
            )
            remedy = "Give another ground level, or a shorter flight."
            raise InputFaults(where, [Fault("ground level", problem, remedy)])
        return found


def read_recording(
    path: str | Path,
    column: str,
    channels: Mapping[str, float] | None = None,
    time: str | None = None,
    on_progress: Callable[[int, int], None] | None = None,
) -> Recording:
    """Read a recorded history from a CSV, Parquet or NumPy file.

    Parameters
    ----------
    path : str or Path
        ``.parquet``, ``.npy``, or else text in columns with a header line, ``.gz``, ``.bz2`` and ``.xz`` too.
    column : str
        Name of the column, its unit last, ``_MPa`` or ``_ksi``. With channels: what their sum is called.
    channels : mapping, optional
        Columns whose sum the history is, each with its factor: stress per unit of the column.
    time : str, optional
        Column of times: seconds, or dates with times of day.
    on_progress : callable, optional
        Called with what is read and what there is, in bytes or rows.

    Returns
    -------
    Recording

    Raises
    ------
    InputFaults
        If the file cannot be read, a column is not there, the units do not fit, there are no values, or time is missing
        or runs backwards.
    """
    path = Path(path)
    faults = []
    unit = split_unit(column)[1]
    if unit is None or pair_of(unit).quantity != "stress":
        faults.append(Fault(column, "the column's name has no stress unit.", "End it in _MPa or _ksi."))
    for name, factor in (channels or {}).items():
        if not np.isfinite(factor) or factor == 0:
            faults.append(Fault(f"channel {name}", f"{show(factor)} must be a finite factor other than 0."))
    wanted = [*(channels or [column]), *([time] if time else [])]
    file = _open(path, wanted)
    there = [name for name in file.names if not name.startswith("column ")]
    for name in wanted:
        if name not in file.names:
            near = did_you_mean(name, there)
            all_ = f" The columns are {listed(there, 'and')}." if near.startswith("Did") else ""
            faults.append(Fault(name, "there is no such column.", near.replace("Known:", "The columns are") + all_))
    faults += _mixed_units(file, [column] if not channels else [*channels])
    if faults:
        raise InputFaults(str(path), faults)
    recording = _read(file, column, channels, time, on_progress)
    if not recording.values.size:
        raise InputFaults(str(path), [Fault(column, "the column has no values.", "Give at least two.")])
    return recording


def _open(path: Path, wanted: Sequence[str]) -> File:
    if path.is_dir():
        raise InputFaults(str(path), [Fault("", "this is a folder, not a file of values.")])
    if path.suffix.lower() == ".npy":
        return open_numpy(path, wanted)
    if path.suffix.lower() in (".parquet", ".pq"):
        return open_parquet(path)
    return open_csv(path, wanted)


def _mixed_units(file: File, columns: Sequence[str]) -> list[Fault]:
    """Find columns whose name says one unit and the row of units below it another."""
    known = {unit for pair in PAIRS for unit in (pair.si, pair.inch)}
    faults = []
    for name in columns:
        unit, said = split_unit(name)[1], (file.units if isinstance(file, CsvFile) else {}).get(name, "").strip("[]()")
        if unit and said in known and said != unit:
            problem = f"the name says {unit}, the row of units under it says {said}."
            faults.append(Fault(name, problem, "Make them agree."))
    return faults


def _read(
    file: File,
    column: str,
    channels: Mapping[str, float] | None,
    time: str | None,
    on_progress: Callable[[int, int], None] | None,
) -> Recording:
    if isinstance(file, NumpyFile) and not channels and not time:
        return Recording(file, column, file.column(column))
    factors = dict(channels or {column: 1.0})
    values, times = Store(), Store()
    seen: dict[int, str] = {}
    decimal = file.decimal if isinstance(file, CsvFile) else "."
    for block in file.blocks([*factors, *([time] if time else [])], on_progress):
        total: Array | float = 0.0
        for name, factor in factors.items():
            x = numbers(block[name], decimal)
            _look(seen, block[name], x, values.size)
            total = total + (x if factor == 1.0 else factor * x)
        values.append(np.asarray(total))
        if time:
            times.append(_seconds(block[time], decimal))
    recording = Recording(file, column, values.values(), times.values() if time else None, seen)
    return _timed(recording, time) if time else recording


def _look(seen: dict[int, str], given: NDArray[Any], x: Array, before: int) -> None:
    """Keep the text of the first cells that hold no number."""
    if len(seen) >= MOST_SEEN or given.dtype != object:
        return
    bad = np.flatnonzero(~np.isfinite(x))
    for row in [row for row in bad[:1000] if isinstance(given[row], str)][: MOST_SEEN - len(seen)]:
        seen[before + int(row)] = show(given[row], 20)


def _seconds(given: NDArray[Any], decimal: str) -> Array:
    """Return times as seconds: numbers as they are, dates since 1970."""
    if np.issubdtype(given.dtype, np.datetime64) or given.dtype == object:
        x = numbers(given, decimal) if given.dtype == object else np.full(given.size, np.nan)
        if np.isnan(x).all():
            dates = pd.to_datetime(pd.Series(given), errors="coerce", utc=True)
            x = (dates - pd.Timestamp(0, tz="UTC")).dt.total_seconds().to_numpy()
        return x
    return numbers(given)


def _timed(recording: Recording, column: str) -> Recording:
    """Check that time is there and never falls, and note its gaps."""
    time, file = recording.time, recording.file
    assert time is not None
    steps: list[Array] = []
    for start, t in blocks(time, overlap=1):
        step = np.diff(t)
        wrong = np.flatnonzero(~np.isfinite(t))
        if wrong.size:
            problem = f"{file.place(start + int(wrong[0]))} has no time."
            raise InputFaults(str(file.path), [Fault(column, problem, "Every value needs one.")])
        back = np.flatnonzero(step < 0)
        if back.size:
            row = start + int(back[0]) + 1
            problem = (
                f"time runs backwards at {file.place(row)}: from {t[back[0]]:.10g} to {t[back[0] + 1]:.10g} s"
                f"{f', and {back.size - 1} times more' if back.size > 1 else ''}."
            )
            raise InputFaults(str(file.path), [Fault(column, problem, "Put the rows in order, or split the file.")])
        steps.append(step)
    every = np.concatenate(steps)
    usual = float(np.median(every)) if every.size else 0.0
    gaps = np.flatnonzero(every > GAP * usual)
    if not gaps.size or usual == 0.0:
        return recording
    shown = [f"{every[row]:.5g} s after {file.place(int(row))}" for row in gaps[:MOST_SEEN]]
    more = f" and {gaps.size - MOST_SEEN} more" if gaps.size > MOST_SEEN else ""
    plural = "" if gaps.size == 1 else "s"
    return replace(
        recording, notes=(f"{gaps.size} gap{plural} in time: {', '.join(shown)}{more}; usual step {usual:.3g} s",)
    )


def _limits(values: NDArray[Any]) -> tuple[float, float]:
    return (
        min(float(np.min(x)) for _, x in blocks(values)),
        max(float(np.max(x)) for _, x in blocks(values)),
    )

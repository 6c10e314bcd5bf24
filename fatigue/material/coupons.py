"""Fatigue test results from a CSV file, read strictly: every fault at once, with its line."""

from __future__ import annotations

import csv
import hashlib
import io
import math
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from spectra.faults import Fault, InputFaults, did_you_mean, listed, show
from spectra.units import to_si

Array = NDArray[np.float64]

KNOWN = ("cycles", "max_MPa", "max_ksi", "min_MPa", "min_ksi", "ratio", "kt", "run_out", "specimen", "note")
YES, NO = ("yes", "true", "1"), ("no", "false", "0", "")
FORM = "cycles, max_MPa or max_ksi, ratio or min_MPa or min_ksi, and if need be kt, run_out, specimen, note"


@dataclass(frozen=True, eq=False)
class Coupons:
    """Results of fatigue tests.

    Parameters
    ----------
    source : str
        Name of the file.
    digest : str
        SHA-256 of its text.
    top : ndarray, shape (n,)
        Largest net stress [MPa].
    ratio : ndarray, shape (n,)
        R = S_min/S_max, below 1.
    cycles : ndarray, shape (n,)
        To failure, or to the stop of a run-out.
    failed : ndarray of bool, shape (n,)
        False for run-outs.
    kt : ndarray, shape (n,)
        Stress concentration factor of the coupon on net stress.
    """

    source: str
    digest: str
    top: Array
    ratio: Array
    cycles: Array
    failed: NDArray[np.bool_]
    kt: Array

    def __post_init__(self) -> None:
        for name in ("top", "ratio", "cycles", "failed", "kt"):
            values = np.array(getattr(self, name))
            values.setflags(write=False)
            object.__setattr__(self, name, values)

    def __len__(self) -> int:
        return self.top.size

    @property
    def log_life(self) -> Array:
        """Base-10 logarithm of the cycles."""
        return np.log10(self.cycles)

    def only(self, keep: NDArray[np.bool_]) -> Coupons:
        """Return some of the tests."""
        return Coupons(
            self.source,
            self.digest,
            self.top[keep],
            self.ratio[keep],
            self.cycles[keep],
            self.failed[keep],
            self.kt[keep],
        )


def read_coupons(path: str | Path, kt: float | None = None) -> Coupons:
    """Read test results from a CSV file.

    Parameters
    ----------
    path : str or Path
        One line a test; columns ``cycles``, ``max_MPa`` or ``max_ksi``, ``ratio`` or ``min_MPa`` or ``min_ksi``, and
        if need be ``kt`` and ``run_out`` (yes or no). ``specimen`` and ``note`` are not read.
    kt : float, optional
        Of all coupons, where there is no such column; 1 if neither is given.

    Raises
    ------
    InputFaults
        With every fault found.
    """
    path = Path(path)
    try:
        text = path.read_bytes().decode("utf-8-sig")
    except OSError as error:
        raise InputFaults(str(path), [Fault("", f"the file cannot be read ({error.strerror}).")]) from None
    except UnicodeDecodeError:
        raise InputFaults(str(path), [Fault("", "is not UTF-8 text.", "Save it as CSV in UTF-8.")]) from None
    return parse_coupons(text, str(path), kt)


def parse_coupons(text: str, source: str, kt: float | None = None) -> Coupons:
    """Read test results from the text of a CSV file."""
    lines = [line for line in csv.reader(io.StringIO(text)) if any(cell.strip() for cell in line)]
    if not lines:
        raise InputFaults(source, [Fault("", "is empty.", f"Columns: {FORM}.")])
    header = [cell.strip() for cell in lines[0]]
    faults = list(_header_faults(header, kt))
    if faults:
        raise InputFaults(source, faults)
    if len(lines) == 1:
        raise InputFaults(source, [Fault("", "has a header but no tests.", "Give one line a test.")])
    tests: list[tuple[float, float, float, bool, float]] = []
    for number, line in enumerate(lines[1:], start=2):
        found = _test(dict(zip(header, (cell.strip() for cell in line), strict=False)), f"line {number}", kt)
        if len(line) > len(header):
            found = [Fault(f"line {number}", f"has {len(line)} cells, the header {len(header)}.", "Remove the rest.")]
        if isinstance(found, tuple):
            tests.append(found)
        else:
            faults += found
    if faults:
        raise InputFaults(source, faults)
    columns = list(zip(*tests, strict=True))
    top, ratio, cycles, own_kt = (np.array(columns[i], dtype=np.float64) for i in (0, 1, 2, 4))
    return Coupons(
        source=source,
        digest=hashlib.sha256(text.encode("utf-8")).hexdigest(),
        top=top,
        ratio=ratio,
        cycles=cycles,
        failed=np.array(columns[3], dtype=np.bool_),
        kt=own_kt,
    )


def _header_faults(header: list[str], kt: float | None) -> Iterator[Fault]:
    for name in header:
        if name not in KNOWN:
            bare = name in ("max", "min", "stress", "max_stress", "min_stress", "S", "smax")
            hint = "Name the unit: max_MPa or max_ksi." if bare else did_you_mean(name, KNOWN)
            yield Fault("header", f"{show(name)} is not a column of a test file.", hint)
    for name in sorted({name for name in header if header.count(name) > 1}):
        yield Fault("header", f"{show(name)} stands twice.", "Keep one.")
    if "cycles" not in header:
        yield Fault("header", f"there is no column cycles; there are {listed(header, 'and')}.", f"Columns: {FORM}.")
    tops = [name for name in ("max_MPa", "max_ksi") if name in header]
    if len(tops) != 1:
        given = f"{listed(tops, 'and')} are both given." if tops else "there is no largest stress."
        yield Fault("header", given, "Give max_MPa or max_ksi.")
    lows = [name for name in ("ratio", "min_MPa", "min_ksi") if name in header]
    if len(lows) != 1:
        given = f"{listed(lows, 'and')} are given together." if lows else "there is no stress ratio."
        yield Fault("header", given, "Give one of ratio (S_min/S_max), min_MPa and min_ksi.")
    if kt is not None and "kt" in header:
        yield Fault("kt", "is given as an option and as a column.", "Give one of them.")
    if kt is not None and not (math.isfinite(kt) and kt >= 1.0):
        yield Fault("kt", f"{show(kt)} must be at least 1.")


def _test(cells: dict[str, str], where: str, kt: float | None) -> tuple[float, float, float, bool, float] | list[Fault]:
    faults: list[Fault] = []

    def number(column: str) -> float | None:
        text = cells.get(column, "")
        try:
            value = float(text)
        except ValueError:
            if column == "cycles" and text.lstrip(">").rstrip("+>") != text:
                hint = "Write the cycles at which it was stopped, and run_out = yes."
            else:
                hint = "Give a number." if text else "Fill it in or take the line out."
            faults.append(Fault(f"{where}, {column}", f"{show(text)} is not a number.", hint))
            return None
        if not math.isfinite(value):
            faults.append(Fault(f"{where}, {column}", f"{text} is not a finite number."))
            return None
        return value

    cycles = number("cycles")
    if cycles is not None and cycles <= 0:
        faults.append(Fault(f"{where}, cycles", f"{cycles:g} is not a life.", "Lives are above 0."))
    top_column = "max_MPa" if "max_MPa" in cells else "max_ksi"
    top = number(top_column)
    if top is not None and top <= 0:
        faults.append(
            Fault(f"{where}, {top_column}", f"{top:g} is no tension.", "The curves are for a largest stress above 0.")
        )
    low_column = next(name for name in ("ratio", "min_MPa", "min_ksi") if name in cells)
    low = number(low_column)
    ratio = low
    if low is not None and top is not None and top > 0 and low_column != "ratio":
        unit = low_column[-3:]
        ratio = to_si(low, unit) / to_si(top, top_column[-3:])
    if ratio is not None and not -100.0 <= ratio < 1.0:
        what = "S_min is not below S_max" if ratio >= 1.0 else "is beyond any test"
        faults.append(Fault(f"{where}, {low_column}", f"{low:g}: {what}.", "The stress ratio is below 1."))
    factor = kt if kt is not None else (number("kt") if "kt" in cells else 1.0)
    if factor is not None and factor < 1.0:
        faults.append(Fault(f"{where}, kt", f"{factor:g} must be at least 1."))
    said = cells.get("run_out", "").lower()
    if said not in (*YES, *NO):
        faults.append(Fault(f"{where}, run_out", f"{show(said)} must be yes or no."))
    if faults or cycles is None or top is None or ratio is None or factor is None:
        return faults
    return to_si(top, top_column[-3:]), ratio, cycles, said not in YES, factor

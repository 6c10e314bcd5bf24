"""CSV files of recorders: delimiter, decimal comma, rows before the header and a row of units found by looking."""

from __future__ import annotations

import bz2
import csv
import gzip
import lzma
import re
import warnings
import zlib
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any, TextIO

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from spectra.faults import Fault, InputFaults, listed, show

DELIMITERS = (",", ";", "\t", "|")
LINES_SEEN = 60
"""Lines looked at to find out how a file is written."""
ROWS = 1 << 18
"""Rows read at a time."""
OPENERS: dict[str, Any] = {".gz": gzip.open, ".bz2": bz2.open, ".xz": lzma.open}
DECIMAL_COMMA = re.compile(r"[+-]?\d*,\d+(e[+-]?\d+)?", re.IGNORECASE)


@dataclass(frozen=True)
class CsvFile:
    """How a CSV file is written.

    Parameters
    ----------
    path : Path
    names : tuple of str
        The columns.
    delimiter, decimal : str
    header : int
        Lines before the header line.
    units : dict
        What a row of units says of each column; empty where there is no such row.
    """

    path: Path
    names: tuple[str, ...]
    delimiter: str
    decimal: str
    header: int
    units: dict[str, str]

    @property
    def first_line(self) -> int:
        """Number of the line with the first values, counted from 1."""
        return self.header + 2 + bool(self.units)

    def place(self, row: int) -> str:
        """Name the place of a row of values, counted from 0."""
        return f"line {self.first_line + row}"

    def blocks(
        self, columns: Sequence[str], on_progress: Callable[[int, int], None] | None = None
    ) -> Iterator[dict[str, NDArray[Any]]]:
        """Yield the columns block by block: numbers, or text where there is some; report bytes read and in all.

        Raises
        ------
        InputFaults
            If the file cannot be read on.
        """
        size = self.path.stat().st_size
        with _taught(self.path), self.path.open("rb") as raw, warnings.catch_warnings():
            warnings.simplefilter("error", pd.errors.ParserWarning)
            reader = pd.read_csv(
                OPENERS[self.path.suffix.lower()](raw) if self.path.suffix.lower() in OPENERS else raw,
                encoding="utf-8-sig",
                sep=self.delimiter,
                decimal=self.decimal,
                skiprows=self.first_line - 1,
                header=None,
                names=list(self.names),
                index_col=False,  # every column is read, so that a row with too many is seen
                skip_blank_lines=False,
                skipinitialspace=True,
                low_memory=False,
                chunksize=ROWS,
            )
            for frame in reader:
                yield {name: frame[name].to_numpy() for name in columns}
                if on_progress:
                    on_progress(raw.tell(), size)


def open_csv(path: Path, wanted: Sequence[str]) -> CsvFile:
    """Find out how a CSV file is written.

    The header is the first line that holds a wanted column's name; the first line where none does.

    Parameters
    ----------
    path : Path
        May be compressed: .gz, .bz2, .xz.
    wanted : sequence of str
        Names of columns.

    Raises
    ------
    InputFaults
        If the file cannot be read or is empty, or a name comes twice.
    """
    with _taught(path), _open(path) as file:
        lines = [line.rstrip("\r\n") for _, line in zip(range(LINES_SEEN), file, strict=False)]
    filled = [i for i, line in enumerate(lines) if line.strip()]
    if not filled:
        raise InputFaults(str(path), [Fault("", "the file is empty.")])
    found = [
        (i, delimiter)
        for i in filled
        for delimiter in DELIMITERS
        if set(wanted) & {name.strip() for name in _fields(lines[i], delimiter)}
    ]
    header, delimiter = found[0] if found else (filled[0], max(DELIMITERS, key=lines[filled[0]].count))
    names = tuple(name.strip() for name in _fields(lines[header], delimiter))
    twice = sorted({name for name in names if names.count(name) > 1 and name in wanted})
    if twice:
        raise InputFaults(
            str(path), [Fault(listed(twice, "and"), "names more than one column.", "Rename all but one.")]
        )
    names = tuple(name if names.count(name) == 1 and name else f"column {i + 1}" for i, name in enumerate(names))
    body = [_fields(line, delimiter) for line in lines[header + 1 :]]
    commas = delimiter != "," and any(DECIMAL_COMMA.fullmatch(cell.strip()) for row in body for cell in row)
    decimal = "," if commas else "."
    units = {}
    if len(body) > 1 and not _numbers(body[0], decimal) and _numbers(body[1], decimal):
        units = {name: cell.strip() for name, cell in zip(names, body[0], strict=False)}
    return CsvFile(path, names, delimiter, decimal, header, units)


def numbers(values: NDArray[Any], decimal: str = ".") -> NDArray[np.float64]:
    """Return values as numbers, NaN where they are none.

    >>> numbers(np.array(["2,5", "ERR", "3"], dtype=object), ",")
    array([2.5, nan, 3. ])
    """
    if np.issubdtype(values.dtype, np.number):
        return values.astype(np.float64, copy=False)
    given = pd.Series(values)
    if decimal != ".":
        given = given.astype("string").str.replace(decimal, ".", regex=False)
    return np.asarray(pd.to_numeric(given, errors="coerce"), dtype=np.float64)


def _fields(line: str, delimiter: str) -> list[str]:
    return next(csv.reader([line.lstrip("\ufeff")], delimiter=delimiter, skipinitialspace=True), [])


def _numbers(cells: Sequence[str], decimal: str) -> bool:
    """Tell whether a row has a number in it."""
    return any(re.fullmatch(r"\s*[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?\s*", c.replace(decimal, "."), re.I) for c in cells)


def _open(path: Path) -> TextIO:
    file: TextIO = OPENERS.get(path.suffix.lower(), open)(path, "rt", encoding="utf-8-sig", newline="")
    return file


@contextmanager
def _taught(path: Path) -> Iterator[None]:
    """Turn what goes wrong while reading into a fault."""
    try:
        yield
    except InputFaults:
        raise
    except (OSError, ValueError, EOFError, csv.Error, lzma.LZMAError, zlib.error, pd.errors.ParserWarning) as error:
        raise InputFaults(str(path), [_fault(error)]) from None


def _fault(error: Exception) -> Fault:
    if isinstance(error, FileNotFoundError):
        return Fault("", "there is no such file.")
    if isinstance(error, IsADirectoryError):
        return Fault("", "this is a folder, not a CSV file.")
    if isinstance(error, PermissionError):
        return Fault("", "the file may not be read.")
    if isinstance(error, UnicodeDecodeError):
        return Fault("", f"byte {error.start} is not UTF-8 text: save the file as UTF-8.")
    if isinstance(error, EOFError | gzip.BadGzipFile | lzma.LZMAError | zlib.error):
        return Fault("", f"the compressed file is damaged or cut short ({show(str(error))}).", "Copy it again.")
    if isinstance(error, pd.errors.ParserWarning):
        remedy = "A decimal comma in a file that commas separate? Separate it by semicolons."
        return Fault("", "the first row of values has more fields than the header.", remedy)
    wide = re.search(r"Expected (\d+) fields in line (\d+), saw (\d+)", str(error))
    if wide:
        expected, line, seen = wide.groups()
        return Fault(
            f"line {line}",
            f"has {seen} fields where the header has {expected}.",
            "Columns must not change: split the file there, or mend the line.",
        )
    return Fault("", f"not a readable CSV file ({' '.join(str(error).split())}).")

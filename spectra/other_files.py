"""Recorded values in NumPy files, mapped, not read, and in Parquet files."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from spectra.faults import Fault, InputFaults, show
from spectra.store import blocks

Progress = Callable[[int, int], None]

ROWS = 1 << 18


@dataclass(frozen=True, eq=False)
class NumpyFile:
    """A mapped .npy file: a row of numbers, named as the caller likes, or a structured array."""

    path: Path
    names: tuple[str, ...]
    data: NDArray[Any]

    def place(self, row: int) -> str:
        """Name the place of a value, counted from 0."""
        return f"value {row + 1:,}"

    def column(self, name: str) -> NDArray[Any]:
        """Return a column, mapped."""
        return self.data[name] if self.data.dtype.names else self.data

    def blocks(self, columns: Sequence[str], on_progress: Progress | None = None) -> Iterator[dict[str, NDArray[Any]]]:
        """Yield the columns block by block; report rows read and in all."""
        for start, part in blocks(self.data):
            yield {name: part[name] if part.dtype.names else part for name in columns}
            if on_progress:
                on_progress(start + part.size, self.data.size)


def open_numpy(path: Path, wanted: Sequence[str]) -> NumpyFile:
    """Map a .npy file.

    Raises
    ------
    InputFaults
        If it is not one, or holds anything but one row of real numbers or of records of them.
    """
    try:
        data = np.load(path, mmap_mode="r", allow_pickle=False)
    except FileNotFoundError:
        raise InputFaults(str(path), [Fault("", "there is no such file.")]) from None
    except (ValueError, OSError, EOFError) as error:
        problem = f"not a readable NumPy file ({' '.join(str(error).split())})."
        raise InputFaults(str(path), [Fault("", problem, "Write it with numpy.save, numbers only.")]) from None
    kinds = [data.dtype[name] for name in data.dtype.names] if data.dtype.names else [data.dtype]
    if data.ndim != 1:
        problem = f"the array has the shape {show(data.shape)}; one row of values is needed."
        raise InputFaults(str(path), [Fault("", problem, "Save one column, or a structured array with named columns.")])
    if not all(np.issubdtype(kind, np.integer) or np.issubdtype(kind, np.floating) for kind in kinds):
        problem = f"the array holds {show(str(data.dtype))}; real numbers are needed."
        raise InputFaults(str(path), [Fault("", problem)])
    if data.dtype.names is None and len(wanted) > 1:
        problem = "the array is one row of values and has no named columns."
        remedy = "Name one column, or save a structured array."
        raise InputFaults(str(path), [Fault("", problem, remedy)])
    return NumpyFile(path, tuple(data.dtype.names or wanted), data)


@dataclass(frozen=True, eq=False)
class ParquetFile:
    """A Parquet file."""

    path: Path
    names: tuple[str, ...]
    file: Any

    def place(self, row: int) -> str:
        """Name the place of a row, counted from 0."""
        return f"row {row + 1:,}"

    def blocks(self, columns: Sequence[str], on_progress: Progress | None = None) -> Iterator[dict[str, NDArray[Any]]]:
        """Yield the columns block by block; report rows read and in all.

        Raises
        ------
        InputFaults
            If the file cannot be read on.
        """
        done = 0
        try:
            for batch in self.file.iter_batches(batch_size=ROWS, columns=list(columns)):
                yield {name: batch.column(name).to_numpy(zero_copy_only=False) for name in columns}
                done += batch.num_rows
                if on_progress:
                    on_progress(done, self.file.metadata.num_rows)
        except (OSError, ValueError) as error:
            raise _no_parquet(self.path, error) from None


def open_parquet(path: Path) -> ParquetFile:
    """Open a Parquet file.

    Raises
    ------
    InputFaults
        If it is not one, or the package that reads them is not installed.
    """
    try:
        from pyarrow import parquet
    except ImportError:
        remedy = "Install it: pip install 'faying[parquet]'."
        raise InputFaults(str(path), [Fault("", "reading Parquet needs the package pyarrow.", remedy)]) from None
    try:
        file = parquet.ParquetFile(path)
    except FileNotFoundError:
        raise InputFaults(str(path), [Fault("", "there is no such file.")]) from None
    except (OSError, ValueError) as error:
        raise _no_parquet(path, error) from None
    return ParquetFile(path, tuple(file.schema_arrow.names), file)


def _no_parquet(path: Path, error: Exception) -> InputFaults:
    return InputFaults(str(path), [Fault("", f"not a readable Parquet file ({' '.join(str(error).split())}).")])

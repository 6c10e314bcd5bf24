"""Numbers gathered piece by piece: in memory while they are few, in a temporary file from then on."""

from __future__ import annotations

import tempfile
import weakref
from collections.abc import Iterator
from typing import IO, Any

import numpy as np
from numpy.typing import NDArray

from spectra.cycles import stacked

Array = NDArray[np.float64]

MOST_IN_MEMORY = 1 << 24
"""Values kept in memory: 128 MB."""
BLOCK = 1 << 20


class Store:
    """A row of numbers that grows."""

    def __init__(self) -> None:
        self._pieces: list[Array] = []
        self._file: IO[bytes] | None = None
        self.size = 0

    def append(self, values: NDArray[Any]) -> None:
        """Add values at the end."""
        piece = np.ascontiguousarray(values, dtype=np.float64)
        self.size += piece.size
        self._pieces.append(piece)
        if self._file is None and self.size > MOST_IN_MEMORY:
            self._file = tempfile.TemporaryFile()  # noqa: SIM115 # it lives as long as the store
            weakref.finalize(self, self._file.close)
        if self._file is not None:
            for each in self._pieces:
                each.tofile(self._file)
            self._pieces.clear()

    def values(self) -> Array:
        """Return all of them, read-only: an array, or a map of the temporary file, which goes when the map does."""
        if self._file is None:
            whole = stacked(self._pieces)
        else:
            self._file.flush()
            whole = np.memmap(self._file, dtype=np.float64, mode="r", shape=(self.size,))
        whole.setflags(write=False)
        return whole


def blocks(values: NDArray[Any], size: int = BLOCK, overlap: int = 0) -> Iterator[tuple[int, NDArray[Any]]]:
    """Yield a row in blocks, each with the place of its first value and so many values of the next block."""
    for start in range(0, values.size, size):
        yield start, values[start : start + size + overlap]

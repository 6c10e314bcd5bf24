"""What is wrong with recorded values: missing ones, spikes, drop-outs. Found always, repaired only when asked."""

from __future__ import annotations

from collections.abc import Callable, Collection
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from spectra.cycles import stacked
from spectra.store import Store, blocks

Array = NDArray[np.float64]
Index = NDArray[np.intp]

KINDS = ("missing", "spikes", "drop-outs")
TIMES_USUAL = 4.0
"""A spike stands off its neighbours so many times as far as one turning point in a thousand (own rule, no source)."""
USUAL = 0.999
LONGEST = 1000
"""Most equal values in a row that can be a drop-out; more are a steady state."""
LOOKED_AT = 64
"""Stretches of the history that the usual size of a turning point is learnt from."""
STRETCH = 1 << 14


@dataclass(frozen=True, eq=False)
class Defects:
    """Stretches of values that look wrong, from `start` to before `stop`.

    Parameters
    ----------
    kind : str
        ``missing``: not a finite number; ``spikes``: one value that stands far off both neighbours; ``drop-outs``:
        several equal values that do.
    start, stop : ndarray
    values : ndarray
        What stands there.
    """

    kind: str
    start: Index
    stop: Index
    values: Array

    def __len__(self) -> int:
        return self.start.size

    @property
    def number(self) -> int:
        """Values in all stretches."""
        return int((self.stop - self.start).sum())

    def told(self, place: Callable[[int], str], most: int = 5) -> str:
        """Return the defects in words: how many and where the first are.

        Examples
        --------
        >>> one = Defects("spikes", np.array([41]), np.array([42]), np.array([950.0]))
        >>> one.told(lambda row: f"line {row + 2}")
        '1 spike: line 43 (950)'
        """
        singular, plural = {
            "missing": ("missing value", "missing values"),
            "spikes": ("spike", "spikes"),
            "drop-outs": ("value in drop-outs", "values in drop-outs"),
        }[self.kind]
        shown = []
        for start, stop, value in zip(self.start[:most], self.stop[:most], self.values[:most], strict=True):
            text = place(int(start)) + (f" and {stop - start - 1} after it" if stop - start > 1 else "")
            shown.append(text if self.kind == "missing" else f"{text} ({value:.5g})")
        more = f" and {len(self) - most} more places" if len(self) > most else ""
        return f"{self.number:,} {singular if self.number == 1 else plural}: {', '.join(shown)}{more}"


def find_defects(values: NDArray[Any], threshold: float | None = None) -> tuple[Defects, ...]:
    """Find missing values, spikes and drop-outs.

    Parameters
    ----------
    values : ndarray, shape (n,)
        May be a memory map.
    threshold : float, optional
        How far a spike or drop-out stands off both neighbours, on the same side; learnt from the values if left out.

    Returns
    -------
    tuple of Defects
        One of each kind that there is.
    """
    bad = _joined([start + np.flatnonzero(~np.isfinite(x)) for start, x in blocks(values)])
    breaks = np.flatnonzero(np.diff(bad) > 1) + 1
    runs = [run for run in np.split(bad, breaks) if run.size]
    missing = Defects(
        "missing",
        np.array([run[0] for run in runs], dtype=np.intp),
        np.array([run[-1] + 1 for run in runs], dtype=np.intp),
        np.full(len(runs), np.nan),
    )
    limit = usual_prominence(values) if threshold is None else threshold
    start, stop = _far_off(values, limit)
    found = [missing]
    for kind, those in (("spikes", stop - start == 1), ("drop-outs", stop - start > 1)):
        found.append(Defects(kind, start[those], stop[those], np.asarray(values[start[those]], dtype=np.float64)))
    return tuple(defects for defects in found if len(defects))


def usual_prominence(values: NDArray[Any]) -> float:
    """Return how far a value must stand off its neighbours to be called a spike.

    `TIMES_USUAL` times the prominence that one turning point in a thousand exceeds, in stretches spread over the
    history.
    """
    starts = np.unique(np.linspace(0, max(values.size - STRETCH, 0), LOOKED_AT).astype(np.intp))
    sizes = stacked([_prominence(_plateaus(values[s : s + STRETCH])[1]) for s in starts])
    sizes = sizes[sizes > 0]
    return TIMES_USUAL * float(np.quantile(sizes, USUAL)) if sizes.size else np.inf


def repaired(values: NDArray[Any], defects: Collection[Defects], kinds: Collection[str]) -> tuple[Array, Index]:
    """Leave out the defects of some kinds: to a count the same as straight lines across them.

    Returns
    -------
    values : ndarray
    left_out : ndarray
        Where each stretch that is left out starts and stops, shape (k, 2), in order.
    """
    pieces = [np.column_stack([d.start, d.stop]) for d in defects if d.kind in kinds]
    out = np.concatenate([np.empty((0, 2), dtype=np.intp), *pieces])
    out = out[np.argsort(out[:, 0], kind="stable")]
    return without(values, out), out


def without(values: NDArray[Any], stretches: Index) -> Array:
    """Return values without some stretches, shape (k, 2), in order."""
    store, position = Store(), 0
    for start, stop in stretches:
        _copy(store, values, position, int(start))
        position = max(position, int(stop))
    _copy(store, values, position, values.size)
    return store.values()


def _copy(store: Store, values: NDArray[Any], start: int, stop: int) -> None:
    for _, x in blocks(values[start:stop]):
        store.append(x)


def _far_off(values: NDArray[Any], threshold: float) -> tuple[Index, Index]:
    """Return where values, or runs of equal ones, stand off both neighbours by more than a threshold."""
    starts: list[Index] = []
    stops: list[Index] = []
    # a run that a block's edge cuts is whole in the next one, which begins as far back as a run is long
    for start, x in blocks(values, overlap=LONGEST + 2):
        first, level = _plateaus(x)
        far = np.flatnonzero(_prominence(level) > threshold) + 1
        begin, end = first[far], first[far + 1]
        short = end - begin <= LONGEST
        starts.append(start + begin[short])
        stops.append(start + end[short])
    place, which = np.unique(_joined(starts), return_index=True)
    return place, _joined(stops)[which]


def _joined(places: list[Index]) -> Index:
    return np.concatenate([np.empty(0, dtype=np.intp), *places])


def _plateaus(x: NDArray[Any]) -> tuple[Index, Array]:
    """Return where runs of equal values begin, and their values; what is not finite is left out."""
    place = np.flatnonzero(np.isfinite(x))
    finite = np.asarray(x[place], dtype=np.float64)
    new = np.concatenate([[True], finite[1:] != finite[:-1]]) if finite.size else np.empty(0, dtype=bool)
    return place[new], finite[new]


def _prominence(level: Array) -> Array:
    """Return how far each inner value stands off both neighbours on the same side, 0 where it stands between them."""
    before, after = level[1:-1] - level[:-2], level[1:-1] - level[2:]
    return np.where(before * after > 0, np.minimum(np.abs(before), np.abs(after)), 0.0)

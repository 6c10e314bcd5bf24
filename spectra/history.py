"""A history of remote gross stress: from an array or a recording."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from spectra.counting import count
from spectra.cycles import Cycles, locked
from spectra.faults import Fault, InputFaults, show
from spectra.flights import GroundRule
from spectra.recording import read_recording
from spectra.units import to_si

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class History:
    """A sequence of remote gross stress and the flights it stands for.

    Parameters
    ----------
    values : ndarray, shape (n,)
        In the order flown [MPa].
    flights : float
        Flights in the sequence.
    name : str
        In words, for reports.
    notes : tuple of str
        What a reader should know of it.
    """

    values: Array
    flights: float
    name: str = ""
    notes: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        object.__setattr__(self, "values", locked(self.values))

    def scaled(self, factor: float) -> History:
        """Return the history times a factor."""
        return self if factor == 1.0 else History(self.values * factor, self.flights, self.name, self.notes)

    def cycles(self, close: bool = True) -> Cycles:
        """Return the counted cycles of one flight, identical pairs joined.

        Parameters
        ----------
        close : bool
            Count as a repeating block; otherwise open, with half cycles.
        """
        return count(self.values, close).per_flight(self.flights).merged()


def read_history(
    path: str | Path,
    column: str,
    flights: float | None = None,
    channels: Mapping[str, float] | None = None,
    time: str | None = None,
    ground: GroundRule | None = None,
    repair: Collection[str] = (),
    threshold: float | None = None,
) -> History:
    """Read a recorded history of remote gross stress.

    Parameters
    ----------
    path : str or Path
        CSV (compressed too), Parquet or .npy; see `recording.read_recording`.
    column : str
        Name of the column, its unit last, ``_MPa`` or ``_ksi``. With channels: what their sum is called.
    flights : float, optional
        Flights the recording covers; found by the ground rule if left out.
    channels : mapping, optional
        Columns whose sum the history is, each with its factor: stress per unit of the column.
    time : str, optional
        Column of times, for the ground rule and to find gaps.
    ground : GroundRule, optional
        When the aircraft is on the ground.
    repair : collection of str
        Which defects to leave out: ``missing``, ``spikes``, ``drop-outs``.
    threshold : float, optional
        How far a spike stands off its neighbours, in the column's unit; learnt from the values if left out.

    Returns
    -------
    History
        [MPa], with what was found and left out in its notes.

    Raises
    ------
    InputFaults
        If the file cannot be read or does not hold what is asked for; the lines are named.
    """
    faults = []
    if flights is not None and not (flights > 0 and np.isfinite(flights)):
        faults.append(Fault("flights", f"{show(flights)} must be greater than 0."))
    if flights is None and ground is None:
        faults.append(Fault("flights", "are not given.", "Give their number, or a ground level to find them by."))
    if faults:
        raise InputFaults(str(path), faults)
    recording = read_recording(path, column, channels, time).repaired(repair, threshold)
    notes = recording.notes
    if ground is not None:
        found = recording.flights(ground)
        notes += (f"{len(found)} flights found above {ground.below:g} {recording.unit}",)
        flights = float(len(found)) if flights is None else flights
    assert flights is not None
    values = np.asarray(recording.values, dtype=np.float64) * to_si(1.0, recording.unit)
    if np.ptp(values) == 0.0:
        notes += ("the history is constant: it has no cycles",)
    return History(values, float(flights), f"{Path(path).name}, {column}", notes)

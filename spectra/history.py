"""A history of remote gross stress: from an array or a CSV file."""

from __future__ import annotations

import warnings
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from spectra.counting import count
from spectra.cycles import Cycles
from spectra.faults import Fault, InputFaults, did_you_mean, listed, show
from spectra.units import pair_of, split_unit, to_si

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
        values = np.array(self.values, dtype=np.float64).reshape(-1)
        values.setflags(write=False)
        object.__setattr__(self, "values", values)

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


def read_history(path: str | Path, column: str, flights: float) -> History:
    """Read a recorded history from one column of a CSV file.

    Parameters
    ----------
    path : str or Path
        Comma-separated, with a header line.
    column : str
        Name of the column; its unit is its last part, ``_MPa`` or ``_ksi``.
    flights : float
        Flights the recording covers.

    Returns
    -------
    History
        [MPa]

    Raises
    ------
    InputFaults
        If the file cannot be read, the column is not there or has no stress unit, or a value is not a finite number:
        the lines are named.
    """
    path = Path(path)
    faults = []
    if not flights > 0:
        faults.append(Fault("flights", f"{show(flights)} must be greater than 0."))
    unit = split_unit(column)[1]
    if unit is None or pair_of(unit).quantity != "stress":
        faults.append(Fault(column, "the column's name has no stress unit.", "End it in _MPa or _ksi."))
    frame = _read_csv(path)
    if frame is not None and column not in frame.columns:
        names = [str(name) for name in frame.columns]
        near = did_you_mean(column, names)
        there = f"The columns are {listed(names, 'and')}." if near.startswith("Did") else ""
        faults.append(Fault(column, "there is no such column.", f"{near.replace('Known:', 'The columns are')} {there}"))
    if faults:
        raise InputFaults(str(path), faults)
    given = frame[column]
    values = pd.to_numeric(given, errors="coerce").to_numpy(dtype=np.float64, na_value=np.nan)
    bad = np.flatnonzero(~np.isfinite(values))
    if bad.size:
        shown = [f"line {row + 2} has {show(given.iloc[row], 20)}" for row in bad[:5]]
        more = f" and {bad.size - 5} more" if bad.size > 5 else ""
        raise InputFaults(
            str(path),
            [Fault(column, f"{listed(shown, 'and')}{more}: not a finite number.", "Mend or remove those lines.")],
        )
    if values.size == 0:
        raise InputFaults(str(path), [Fault(column, "the column has no values.", "Give at least two.")])
    assert unit is not None
    notes = ("the history is constant: it has no cycles",) if np.ptp(values) == 0.0 else ()
    return History(values * to_si(1.0, unit), float(flights), f"{path.name}, {column}", notes)


def _read_csv(path: Path) -> pd.DataFrame:
    problem = ""
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore", pd.errors.ParserWarning)
            return pd.read_csv(path, encoding="utf-8-sig", skip_blank_lines=False, low_memory=False)
    except FileNotFoundError:
        problem = "there is no such file."
    except IsADirectoryError:
        problem = "this is a folder, not a CSV file."
    except PermissionError:
        problem = "the file may not be read."
    except UnicodeDecodeError as error:
        problem = f"byte {error.start} is not UTF-8 text: save the file as UTF-8."
    except pd.errors.EmptyDataError:
        problem = "the file is empty."
    except (pd.errors.ParserError, ValueError, OSError) as error:
        problem = f"not a readable CSV file ({' '.join(str(error).split())})."
    raise InputFaults(str(path), [Fault("", problem)])

"""From the case's `[loads]` to the cycles of the remote gross stress, counted once."""

from __future__ import annotations

from dataclasses import dataclass

import spectra
from fatigue.case.build import Case
from spectra import Cycles, History
from spectra.units import from_si, split_unit


@dataclass(frozen=True, eq=False)
class CountedLoads:
    """The counted remote gross stress of one flight.

    Parameters
    ----------
    name : str
        What was counted, in words.
    cycles : Cycles
        Per flight, scaled [MPa].
    history : History or None
        The scaled sequence, where there is one to recount; None for a block table.
    notes : tuple of str
        What the reader of the loads had to say.
    """

    name: str
    cycles: Cycles
    history: History | None
    notes: tuple[str, ...] = ()


def count_loads(case: Case) -> CountedLoads:
    """Count the case's loads.

    Raises
    ------
    InputFaults
        If the spectrum or history cannot be read.
    """
    loads = case.loads
    if loads.blocks is not None:
        blocks = spectra.count_blocks([(b.max_MPa, b.min_MPa, b.cycles) for b in loads.blocks], close=loads.repeating)
        return CountedLoads("blocks of the case file", blocks.scaled(loads.scale), None)
    if loads.history is not None:
        table = loads.history
        below = table.ground_below_MPa
        history = spectra.read_history(
            case.folder / table.file,
            table.column,
            table.flights,
            {own.column: own.factor for own in table.channels} or None,
            table.time,
            None if below is None else spectra.GroundRule(from_si(below, split_unit(table.column)[1] or "MPa")),
            table.repair,
        )
    else:
        assert loads.spectrum is not None  # the reader has seen to it
        shipped = loads.spectrum in spectra.shipped()
        spectrum = spectra.read_spectrum(loads.spectrum if shipped else case.folder / loads.spectrum)
        history = spectrum.history(loads.factors or None)
    history = history.scaled(loads.scale)
    return CountedLoads(history.name, history.cycles(close=loads.repeating), history, history.notes)

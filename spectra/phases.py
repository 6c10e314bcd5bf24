"""The cycles of a spectrum by the phase of flight that holds both their ends."""

from __future__ import annotations

import numpy as np

from spectra.cycles import Cycles, joined
from spectra.places import count_places
from spectra.spectrum import Spectrum

BETWEEN = "between phases, ground-air-ground"


def cycles_by_phase(spectrum: Spectrum, factors: dict[str, float] | None = None) -> dict[str, Cycles]:
    """Return the counted cycles of one flight, by phase.

    A cycle belongs to a phase when both its ends lie in it, in the same flight; all others go between phases or
    flights, ground-air-ground among them.

    Parameters
    ----------
    spectrum : Spectrum
    factors : dict, optional
        Stress per unit of a channel in place of the spectrum's own [MPa].

    Returns
    -------
    dict of Cycles
        By name of the phase, in the order flown, then `BETWEEN` [MPa].

    Examples
    --------
    >>> import spectra
    >>> parts = cycles_by_phase(spectra.read_spectrum("ten-flight-gust-programme"))
    >>> {name: round(cycles.total * 4000) for name, cycles in parts.items()}
    {'flight': 394665, 'ground': 0, 'between phases, ground-air-ground': 4000}
    """
    flown = spectrum.sequence(factors)
    places = count_places(flown.values)
    flight = [np.searchsorted(flown.ends, end, side="right") for end in (places.low, places.high)]
    phase = np.where(
        (flight[0] == flight[1]) & (flown.phase[places.low] == flown.phase[places.high]), flown.phase[places.low], -1
    )
    low, high = flown.values[places.low], flown.values[places.high]
    parts: dict[str, Cycles] = {}
    for number, name in [*enumerate(each.name for each in spectrum.phases), (-1, BETWEEN)]:
        own = phase == number
        cycles = Cycles(low[own], high[own], places.count[own]).per_flight(flown.ends.size)
        parts[name] = joined([parts[name], cycles] if name in parts else [cycles]).merged()
    return parts

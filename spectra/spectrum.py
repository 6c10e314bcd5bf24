"""Flight-by-flight spectra: a file of flight types, phases and repeated loads made into a sequence of stress."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from spectra.history import History

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Phase:
    """One phase of every flight.

    Parameters
    ----------
    name : str
    steady : dict
        Steady value of each channel; a channel not named is 0.
    repeated : str
        The channel the repeated loads move, empty where there are none.
    amplitude : tuple of float
        Levels of the repeated loads, in the channel's unit.
    cycles : dict
        By flight type, how many cycles of each level.
    """

    name: str
    steady: dict[str, float]
    repeated: str = ""
    amplitude: tuple[float, ...] = ()
    cycles: dict[str, tuple[int, ...]] | None = None


@dataclass(frozen=True, eq=False)
class Spectrum:
    """A block of flights that repeats.

    Parameters
    ----------
    name, title : str
    seed : int
        Of the order of flights and of the half cycles within a phase.
    flights : dict
        Flight types and how often each comes in a block.
    channels : dict
        Remote gross stress per unit of each channel [MPa].
    phases : tuple of Phase
        In the order flown.
    notes : tuple of str
    """

    name: str
    title: str
    seed: int
    flights: dict[str, int]
    channels: dict[str, float]
    phases: tuple[Phase, ...]
    notes: tuple[str, ...] = ()

    def history(self, factors: dict[str, float] | None = None) -> History:
        """Return the block as a sequence of remote gross stress.

        In each phase the positive and the negative half cycles are shuffled on their own and flown in turn about the
        steady level; a phase without repeated loads is its steady level. Flights are shuffled over the block. Nothing
        is added: the ground-air-ground cycle comes out of the counting.

        Parameters
        ----------
        factors : dict, optional
            Stress per unit of a channel in place of the spectrum's own [MPa].

        Returns
        -------
        History

        Raises
        ------
        KeyError
            If a factor names no channel.
        """
        stress_per = dict(self.channels)
        for name, value in (factors or {}).items():
            if name not in stress_per:
                raise KeyError(name)
            stress_per[name] = value
        random = np.random.default_rng(self.seed)
        flights = [row for kind, number in self.flights.items() for row in self._fly(kind, number, stress_per, random)]
        order = random.permutation(len(flights))
        values = np.concatenate([flights[i] for i in order])
        return History(values, float(len(flights)), self.title, self.notes)

    def _fly(self, kind: str, number: int, stress_per: dict[str, float], random: np.random.Generator) -> Array:
        """Return all flights of a type, shape (number, points)."""
        parts = []
        for phase in self.phases:
            steady = sum(stress_per[name] * value for name, value in phase.steady.items())
            times = (phase.cycles or {}).get(kind, ())
            amplitude = np.repeat(np.array(phase.amplitude), times) if times else np.empty(0)
            if not amplitude.size:
                parts.append(np.full((number, 1), steady))
                continue
            halves = np.broadcast_to(amplitude * stress_per[phase.repeated], (number, amplitude.size))
            swing = np.empty((number, 2 * amplitude.size))
            swing[:, 0::2] = steady + random.permuted(halves, axis=1)
            swing[:, 1::2] = steady - random.permuted(halves, axis=1)
            parts.append(swing)
        return np.concatenate(parts, axis=1)

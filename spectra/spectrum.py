"""Flight-by-flight spectra: a file of flight types, phases and repeated loads made into a sequence of stress."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from spectra.exceedance import Curve, dealt, flown_levels
from spectra.history import History

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Exceeded:
    """Repeated loads given by how often a block exceeds each level.

    Parameters
    ----------
    up : Curve
        Of loads above the steady level.
    down : Curve or None
        Of loads below it; None: the same.
    smallest : float
        Level below which loads are left out.
    levels : int
        Number of levels flown.
    largest : float
        Loads above it are flown at it.
    """

    up: Curve
    down: Curve | None
    smallest: float
    levels: int
    largest: float = np.inf

    def flown(self) -> tuple[Array, Array, NDArray[np.int64]]:
        """Return the levels up and down, falling, and how often each is reached or exceeded in a block."""
        up, exceeded = flown_levels(self.up, self.smallest, self.levels)
        down = up if self.down is None else self.down.level(exceeded)
        return np.minimum(up, self.largest), np.minimum(down, self.largest), exceeded


@dataclass(frozen=True, eq=False)
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
    exceeded : Exceeded or None
        The repeated loads of the whole block, in place of levels and cycles.
    """

    name: str
    steady: dict[str, float]
    repeated: str = ""
    amplitude: tuple[float, ...] = ()
    cycles: dict[str, tuple[int, ...]] | None = None
    exceeded: Exceeded | None = None


@dataclass(frozen=True, eq=False)
class Flown:
    """A block of flights as flown.

    Parameters
    ----------
    values : ndarray, shape (n,)
        Remote gross stress [MPa].
    phase : ndarray, shape (n,)
        Which phase each value belongs to.
    ends : ndarray, shape (flights,)
        One past the last value of each flight.
    """

    values: Array
    phase: NDArray[np.intp]
    ends: NDArray[np.intp]


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
    severity : dict
        Of the turbulence each flight type meets, where exceedances are dealt out; 1 if left out.
    """

    name: str
    title: str
    seed: int
    flights: dict[str, int]
    channels: dict[str, float]
    phases: tuple[Phase, ...]
    notes: tuple[str, ...] = ()
    severity: dict[str, float] = field(default_factory=dict)

    def history(self, factors: dict[str, float] | None = None) -> History:
        """Return the block as a sequence of remote gross stress; see `sequence`.

        Raises
        ------
        KeyError
            If a factor names no channel.
        """
        return History(self.sequence(factors).values, float(sum(self.flights.values())), self.title, self.notes)

    def sequence(self, factors: dict[str, float] | None = None) -> Flown:
        """Return the block flown through, and which phase each value belongs to.

        In each phase the positive and the negative half cycles are shuffled on their own and flown in turn about the
        steady level; a phase without repeated loads is its steady level. Flights are shuffled over the block. Nothing
        is added: the ground-air-ground cycle comes out of the counting.

        Parameters
        ----------
        factors : dict, optional
            Stress per unit of a channel in place of the spectrum's own [MPa].

        Returns
        -------
        Flown

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
        flights: list[Array] = []
        points: list[NDArray[np.intp]] = []
        dealt_out = {i: self._deal(i, stress_per) for i, phase in enumerate(self.phases) if phase.exceeded}
        for kind, number in self.flights.items():
            own = slice(len(flights), len(flights) + number)
            parts = self._fly(kind, number, stress_per, random)
            for i, swings in dealt_out.items():
                parts[i] = swings[own]
            points.append(np.array([[part.size for part in parts_of] for parts_of in zip(*parts, strict=True)]))
            flights += [np.concatenate(parts_of) for parts_of in zip(*parts, strict=True)]
        order = random.permutation(len(flights))
        per_phase = np.concatenate(points)[order]
        phase = np.repeat(np.tile(np.arange(len(self.phases)), len(flights)), per_phase.reshape(-1))
        return Flown(np.concatenate([flights[i] for i in order]), phase, np.cumsum(per_phase.sum(axis=1)))

    def _fly(
        self, kind: str, number: int, stress_per: dict[str, float], random: np.random.Generator
    ) -> list[Sequence[Array]]:
        """Return every phase of all flights of a type; those with exceedances at their steady level."""
        parts: list[Sequence[Array]] = []
        for phase in self.phases:
            steady = _steady(phase, stress_per)
            times = (phase.cycles or {}).get(kind, ())
            amplitude = np.repeat(np.array(phase.amplitude), times) if times else np.empty(0)
            if not amplitude.size:
                parts.append(list(np.full((number, 1), steady)))
                continue
            halves = np.broadcast_to(amplitude * stress_per[phase.repeated], (number, amplitude.size))
            swing = np.empty((number, 2 * amplitude.size))
            swing[:, 0::2] = steady + random.permuted(halves, axis=1)
            swing[:, 1::2] = steady - random.permuted(halves, axis=1)
            parts.append(list(swing))
        return parts

    def _deal(self, position: int, stress_per: dict[str, float]) -> list[Array]:
        """Return a phase whose loads are given by exceedances, for every flight, types in order."""
        phase = self.phases[position]
        assert phase.exceeded is not None
        random = np.random.default_rng([self.seed, position])
        up, down, exceeded = phase.exceeded.flown()
        severity = np.array([self.severity.get(kind, 1.0) for kind in self.flights])
        flights = np.array(list(self.flights.values()))
        counts = dealt(phase.exceeded.up, up, exceeded, severity, flights, random)
        flight = np.repeat(np.arange(len(counts)), counts.sum(axis=1))
        level = np.repeat(np.tile(np.arange(up.size), len(counts)), counts.reshape(-1))
        per_unit, steady = stress_per[phase.repeated], _steady(phase, stress_per)
        swing = np.empty(2 * flight.size)
        for half, (levels, sign) in enumerate(((up, 1.0), (down, -1.0))):
            shuffled = level[np.lexsort((random.random(flight.size), flight))]
            swing[half::2] = steady + sign * levels[shuffled] * per_unit
        flown = np.split(swing, 2 * np.cumsum(counts.sum(axis=1))[:-1])
        return [each if each.size else np.array([steady]) for each in flown]


def _steady(phase: Phase, stress_per: dict[str, float]) -> float:
    return sum(stress_per[name] * value for name, value in phase.steady.items())

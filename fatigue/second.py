"""The second opinion: local-strain lives from the same counted cycles, and what parts the two theories."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from fatigue.case.build import Case
from fatigue.filled import mapped
from fatigue.material import library
from fatigue.material.local_strain import local_strain_life, separation, switched_lives

if TYPE_CHECKING:
    from fatigue.life import RouteResult

Array = NDArray[np.float64]

FAR_APART = 3.0
"""Ratio of the two lives from which the assumption that parts them is looked for."""
LONGEST_COMPARED = 1e8
"""Where both lives are longer neither can be defended, and they are not compared [flights]."""


@dataclass(frozen=True, eq=False)
class SecondOpinion:
    """Local-strain lives of every location by one route.

    Parameters
    ----------
    life : ndarray, shape (L,)
        NaN where the material has no strain-life constants [flights].
    by_cycle : ndarray, shape (L, n)
        Damage of each counted cycle per flight.
    relaxed : ndarray, shape (L,)
        Share of the stress before any load, fit and residual, that the largest load leaves.
    parted : tuple of str
        By location: which assumption parts the two theories; empty where they agree within a factor of 3.
    """

    life: Array
    by_cycle: Array
    relaxed: Array
    parted: tuple[str, ...]


def second_opinion(
    case: Case, result: RouteResult, levels: Array, count: Array, severity: Array, residual: Array
) -> SecondOpinion:
    """Return the local-strain life of every location from a route's own elastic stresses.

    Parameters
    ----------
    case : Case
    result : RouteResult
        By the route to be judged.
    levels : ndarray, shape (m,)
        Remote gross stress of its map [MPa].
    count : ndarray, shape (n,)
        Of the counted cycles, per flight.
    severity : ndarray, shape (L,)
    residual : ndarray, shape (L, 2)
        Residual stress as made, and what of it is in the map [MPa].
    """
    places, cycles = result.low.shape
    life, relaxed = np.full(places, np.nan), np.full(places, np.nan)
    by_cycle = np.full((places, cycles), np.nan)
    parted = [""] * places
    for name, chosen in by_material(case):
        asked = _arguments(case, name, result, chosen, levels, count, severity, residual)
        found = local_strain_life(**asked)
        life[chosen], by_cycle[chosen], relaxed[chosen] = found.life, found.by_cycle, found.relaxed
        notched = result.life[chosen]
        apart = np.maximum(notched, found.life) > FAR_APART * np.minimum(notched, found.life)
        far = np.flatnonzero(apart & (np.minimum(notched, found.life) < LONGEST_COMPARED))
        if far.size:
            switched = switched_lives(**{key: _only(value, far, key) for key, value in asked.items()})
            for k, i in enumerate(far.tolist()):
                own = separation(
                    float(result.life[chosen[i]]),
                    float(found.life[i]),
                    {words: float(lives[k]) for words, lives in switched.items()},
                )
                parted[int(chosen[i])] = parted_words(own.factor, own.words, own.left)
    return SecondOpinion(life, by_cycle, relaxed, tuple(parted))


def parted_words(factor: float, words: str, left: float) -> str:
    """Say how far two theories part and by which assumption.

    >>> parted_words(0.2, "no plasticity at the edge", 0.8)
    'local strain gives 5.0 times shorter, mostly by one assumption: no plasticity at the edge leaves 1.2 times shorter'
    """

    def times(ratio: float) -> str:
        size = max(ratio, 1 / ratio) if ratio > 0 else float("inf")
        told = "no end of" if np.isinf(size) else f"{size:.1f}" if size < 10 else f"{size:,.0f}"
        return f"{told} times {'shorter' if ratio < 1 else 'longer'}"

    if not words:
        return f"local strain gives {times(factor)}, by no single assumption"
    return f"local strain gives {times(factor)}, mostly by one assumption: {words} leaves {times(left)}"


def judged(result: RouteResult, opinion: SecondOpinion) -> RouteResult:
    """Return a route's result with the local-strain lives in place of the notched ones."""
    return replace(result, by_cycle=opinion.by_cycle, damage=opinion.by_cycle.sum(axis=1), life=opinion.life)


def by_material(case: Case) -> Iterator[tuple[str, NDArray[np.intp]]]:
    """Yield the strain-life constants there are with the locations they hold for."""
    names = [case.splice.sheets[s].material.strain_life for _, s in case.splice.locations]
    for name in dict.fromkeys(filter(None, names)):
        yield name, np.flatnonzero([own == name for own in names])


def _arguments(
    case: Case,
    name: str,
    result: RouteResult,
    chosen: NDArray[np.intp],
    levels: Array,
    count: Array,
    severity: Array,
    residual: Array,
) -> dict[str, Any]:
    made, left = residual[chosen].T
    radius = np.array([case.splice.rows[case.splice.locations[i][0]].hole_diameter / 2 for i in chosen])
    return {
        "low": result.low[chosen] - left[:, None],
        "high": result.high[chosen] - left[:, None],
        "count": count,
        "k": library.strain_life(name),
        "residual": made,
        "unloaded": mapped(result.peak[chosen], levels, np.zeros(1))[:, 0] - left,
        "damage_sum": case.life.damage_sum,
        "severity": severity[chosen],
        "radius": radius,
    }


def _only(value: Any, places: NDArray[np.intp], key: str) -> Any:
    return value[places] if isinstance(value, np.ndarray) and key != "count" else value

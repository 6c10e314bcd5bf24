"""The second opinion: local-strain lives of every location from the same counted cycles."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.loops import Loops, closed_loops
from fatigue.material.mean_stress import loop_life
from fatigue.material.notch import sensitivity_factor
from fatigue.material.strain import StrainLife

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Assumptions:
    """What a local-strain life rests on.

    Parameters
    ----------
    rule : str
        Notch rule: ``neuber``, ``energy-density`` or ``elastic``.
    mean : str
        ``swt``, ``walker``, ``morrow`` or ``none``.
    branch : str
        Branch of the largest loop that smaller ones hang on: ``rising`` (highest mean stress) or ``falling``.
    sensitivity : bool
        Whether the peak is lessened for its gradient, K_f / K_t.
    """

    rule: str = "neuber"
    mean: str = "swt"
    branch: str = "rising"
    sensitivity: bool = False


USUAL = Assumptions()
"""What is used unless a switch is thrown."""


@dataclass(frozen=True, eq=False)
class LocalStrain:
    """Local-strain lives of L locations.

    Parameters
    ----------
    loops : Loops
    cycles_to_failure : ndarray, shape (L, n)
        Of each counted cycle.
    by_cycle : ndarray, shape (L, n)
        Damage of each counted cycle per flight.
    life : ndarray, shape (L,)
        Flights to a crack.
    relaxed : ndarray, shape (L,)
        Share of the initial stress (fit and residual) that the largest load leaves; 1 where there was none.
    """

    loops: Loops
    cycles_to_failure: Array
    by_cycle: Array
    life: Array
    relaxed: Array


def local_strain_life(
    low: ArrayLike,
    high: ArrayLike,
    count: ArrayLike,
    k: StrainLife,
    *,
    residual: ArrayLike = 0.0,
    unloaded: ArrayLike = 0.0,
    assumptions: Assumptions = USUAL,
    damage_sum: float = 1.0,
    severity: ArrayLike | None = None,
    radius: ArrayLike | None = None,
) -> LocalStrain:
    """Return the flights to a crack by local strain.

    Parameters
    ----------
    low, high : array_like, shape (L, n)
        Elastic hole-edge stress at the ends of each counted cycle, the fit's included, the residual one not [MPa].
    count : array_like, shape (n,)
        How often each cycle comes in a flight.
    k : StrainLife
        Of the locations' material.
    residual, unloaded : array_like, shape (L,)
        As in `fatigue.material.loops.closed_loops` [MPa].
    assumptions : Assumptions
    damage_sum : float
        Miner sum at failure.
    severity, radius : array_like, shape (L,), optional
        K_t, and the hole's radius [mm]; needed for `Assumptions.sensitivity`.

    Returns
    -------
    LocalStrain

    Raises
    ------
    ValueError
        If the sensitivity is asked for without severity and radius, or a name is unknown.

    Examples
    --------
    >>> from fatigue.material.library import strain_life
    >>> found = local_strain_life([[0.0]], [[400.0]], [1.0], strain_life("2024-T351"))
    >>> bool(1e4 < found.life[0] < 1e5)
    True
    """
    lows, highs = (np.atleast_2d(np.asarray(v, dtype=np.float64)) for v in (low, high))
    fit = np.asarray(unloaded, dtype=np.float64)
    if assumptions.sensitivity:
        if severity is None or radius is None:
            raise ValueError("the notch sensitivity needs severity and radius")
        factor = np.broadcast_to(sensitivity_factor(severity, radius, k.notch_length), lows.shape[:1])
        lows, highs, fit = lows * factor[:, None], highs * factor[:, None], fit * factor
    loops = closed_loops(
        lows, highs, k, residual=residual, unloaded=fit, rule=assumptions.rule, branch=assumptions.branch
    )
    lives = loop_life(loops.stress_low, loops.stress_high, loops.strain_range, k, assumptions.mean)
    by_cycle = np.asarray(count, dtype=np.float64) / lives
    with np.errstate(divide="ignore", over="ignore"):
        life = damage_sum / by_cycle.sum(axis=1)
    # an initial stress too small to matter would make the share of it overflow
    initial = np.where(np.abs(loops.initial) < 1e-6, np.nan, loops.initial)
    relaxed = np.where(np.isnan(initial), 1.0, loops.unloaded / initial)
    return LocalStrain(loops, lives, by_cycle, life, relaxed)


SWITCHES: dict[str, dict[str, Any]] = {
    "no plasticity at the edge": {"rule": "elastic"},
    "energy-density notch rule": {"rule": "energy-density"},
    "mean stress by Walker": {"mean": "walker"},
    "mean stress by Morrow": {"mean": "morrow"},
    "every loop fully reversed": {"mean": "none"},
    "small loops on the falling branch": {"branch": "falling"},
    "peak lessened for its gradient": {"sensitivity": True},
}
"""Assumptions changed one at a time, in words."""
NO_INITIAL = "no stress before service"


def switched_lives(
    low: ArrayLike,
    high: ArrayLike,
    count: ArrayLike,
    k: StrainLife,
    *,
    residual: ArrayLike = 0.0,
    unloaded: ArrayLike = 0.0,
    assumptions: Assumptions = USUAL,
    damage_sum: float = 1.0,
    severity: ArrayLike | None = None,
    radius: ArrayLike | None = None,
) -> dict[str, Array]:
    """Return the local-strain life with each assumption changed by itself, flights of shape (L,), by what was changed.

    Parameters are those of `local_strain_life`; without severity and radius the gradient is left out. A change that is
    already the assumption is left out, and so is the initial stress where there is none.
    """
    lives: dict[str, Array] = {}
    for words, change in SWITCHES.items():
        changed = replace(assumptions, **change)
        if changed == assumptions or (changed.sensitivity and (severity is None or radius is None)):
            continue
        lives[words] = local_strain_life(
            low,
            high,
            count,
            k,
            residual=residual,
            unloaded=unloaded,
            assumptions=changed,
            damage_sum=damage_sum,
            severity=severity,
            radius=radius,
        ).life
    if np.any(np.asarray(residual) != 0.0):
        lives[NO_INITIAL] = local_strain_life(
            low,
            high,
            count,
            k,
            unloaded=unloaded,
            assumptions=assumptions,
            damage_sum=damage_sum,
            severity=severity,
            radius=radius,
        ).life
    return lives


@dataclass(frozen=True)
class Separation:
    """Why two theories part.

    Parameters
    ----------
    factor : float
        Local-strain life over notched life.
    words : str
        The change that brings the local-strain life nearest to the notched one; empty if none brings it nearer.
    left : float
        The factor that is left with it.
    """

    factor: float
    words: str
    left: float


def separation(notched: float, local: float, switched: dict[str, float]) -> Separation:
    """Find the one assumption whose change brings a local-strain life nearest to the notched one.

    Parameters
    ----------
    notched, local : float
        Lives [flights].
    switched : dict of float
        Local-strain lives by what was changed, of the same location.

    Examples
    --------
    >>> separation(1e5, 1e4, {"a": 2e4, "b": 8e4}).words
    'b'
    """

    def apart(life: float) -> float:
        if not (np.isfinite(life) and np.isfinite(notched)):
            return 0.0 if np.isinf(life) and np.isinf(notched) else np.inf
        return float(abs(np.log10(life / notched)))

    best = min(switched, key=lambda words: apart(switched[words]), default="")
    if not best or apart(switched[best]) >= apart(local):
        return Separation(local / notched, "", local / notched)
    return Separation(local / notched, best, switched[best] / notched)

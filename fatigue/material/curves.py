"""S-N families in the handbook's equivalent-stress form, and the curve of a location between their members.

A location has one severity K0; its local cycle divided by K0 is the nominal cycle of an equivalent coupon of K_t = K0
(same local stress, same gradient). The coupon's curve lies between the neighbouring members: log Seq at equal life, and
A3, are linear in log K_t.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, fields
from functools import lru_cache
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.members import Member, TailedMember, crossings

__all__ = ["LOG_LIVES", "TAILS", "CurveFamily", "LocationCurves", "Member", "stacked"]

Array = NDArray[np.float64]

TAILS = ("limit", "continued", "shallower")
LOG_LIVES = np.linspace(0.0, 20.0, 2001)
"""log10 N at which curves are tabulated, a few moved onto kinks; cubics between them are within 1e-10 of the life."""
LOG_LIVES.setflags(write=False)


@dataclass(frozen=True)
class CurveFamily:
    """Curves of one alloy and product form for several K_t.

    Parameters
    ----------
    name : str
    members : tuple of Member
        By rising K_t.
    tested_cycles, tested_ratio : tuple of float
        Range of N and of R = S_min/S_max the tests cover.
    source, how : str
    """

    name: str
    members: tuple[Member, ...]
    tested_cycles: tuple[float, float]
    tested_ratio: tuple[float, float]
    source: str
    how: str

    @property
    def kt(self) -> Array:
        """K_t of the members, rising."""
        return np.array([member.kt for member in self.members])

    def at(self, severity: ArrayLike, tail: str = "continued") -> LocationCurves:
        """Return the curve of each location.

        Parameters
        ----------
        severity : array_like, shape (L,)
            K0; clipped to the family's K_t, beyond which the stress scales as 1/K_t.
        tail : str
            ``limit``, ``continued`` or ``shallower`` below the last tested life.

        Raises
        ------
        ValueError
            On an unknown tail or a severity that is not finite.

        Notes
        -----
        Outside the tested lives members may cross, tails included. There a member is not allowed above one of lower
        K_t: a sharper notch never stands more nominal stress. Within the tested lives a family whose members cross is
        refused when it is read.

        References
        ----------
        Keys ``mil-hdbk-5j``, ``equivalent-coupon``; the shallower tail ``haibach-1970``.
        """
        if tail not in TAILS:
            raise ValueError(f"tail {tail!r} is none of {TAILS}")
        given = np.atleast_1d(np.asarray(severity, dtype=np.float64))
        if not np.isfinite(given).all():
            raise ValueError("severity must be finite")
        kt = self.kt
        clipped = np.clip(given, kt[0], kt[-1])
        lower, weight = self._between(clipped)
        upper = np.minimum(lower + 1, kt.size - 1)

        def mixed(values: Array) -> Array:
            w = weight.reshape(-1, *[1] * (values.ndim - 1))
            return np.asarray((1 - w) * values[lower] + w * values[upper])

        table = _tabulated(self, tail)
        log_stress, slopes = mixed(table.log_stress), mixed(table.slopes)
        return LocationCurves(
            given=given,
            severity=clipped,
            exponent=mixed(np.array([member.a3 for member in self.members])),
            log_life=np.tile(table.log_life, (given.size, 1)),
            log_stress=log_stress,
            cubic=_cubics(table.log_life, log_stress, slopes),
            ends=table.ends[lower] & table.ends[upper],
            tail=tail,
            tested_cycles=np.tile(self.tested_cycles, (given.size, 1)),
            tested_ratio=np.tile(self.tested_ratio, (given.size, 1)),
            neighbours=(kt[lower], kt[upper]),
        )

    def _between(self, kt: Array) -> tuple[NDArray[np.int64], Array]:
        """Return the index of the member below and the weight of the one above."""
        members = self.kt
        if members.size == 1:
            return np.zeros(kt.size, dtype=np.int64), np.zeros(kt.size)
        lower = np.clip(np.searchsorted(members, kt, side="right") - 1, 0, members.size - 2)
        weight = np.log(kt / members[lower]) / np.log(members[lower + 1] / members[lower])
        return lower.astype(np.int64), weight


@dataclass(frozen=True, eq=False)
class _Table:
    """Members with their tails, guarded against crossing, at common lives.

    Parameters
    ----------
    log_life : ndarray, shape (n,)
    log_stress : ndarray, shape (K, n)
    slopes : ndarray, shape (K, n - 1, 2)
        d log S / d log N at the beginning and the end of each interval.
    ends : ndarray of bool, shape (K,)
        Whether the member has come down to its own asymptote at the last life.
    """

    log_life: Array
    log_stress: Array
    slopes: Array
    ends: NDArray[np.bool_]


@lru_cache(maxsize=64)
def _tabulated(family: CurveFamily, tail: str) -> _Table:
    """Tabulate a family, with a node on every kink: the end of the tests and the crossings of members."""
    log_life = LOG_LIVES.copy()
    last = float(np.log10(family.tested_cycles[1]))
    members = [TailedMember(member, last, tail) for member in family.members]
    for kink in [*(c.log_life for c in crossings(members, log_life[0], log_life[-1])), last]:
        nearest = int(np.argmin(np.abs(log_life - kink)))
        if 0 < nearest < log_life.size - 1:
            log_life[nearest] = kink
    middle = (log_life[1:] + log_life[:-1]) / 2
    at_nodes = np.array([m.log_equivalent(log_life) for m in members])
    at_middle = np.array([m.log_equivalent(middle) for m in members])
    slopes = np.array(
        [np.stack([m.slope(log_life[:-1], after=True), m.slope(log_life[1:], after=False)], -1) for m in members]
    )
    lowest = np.array([np.argmin(at_middle[: k + 1], axis=0) for k in range(len(members))])
    floored = np.array([tail == "limit" and member.a4 > 0.0 for member in family.members])
    return _Table(
        log_life=log_life,
        log_stress=np.minimum.accumulate(at_nodes, axis=0),
        slopes=slopes[lowest, np.arange(middle.size)],
        ends=floored[lowest[:, -1]],
    )


def _cubics(log_life: Array, log_stress: Array, slopes: Array) -> Array:
    """Return log N as a cubic of (node's log S - log S) on each interval, by value and slope at both ends.

    Returns
    -------
    ndarray, shape (L, n - 1, 4)
        Coefficients of rising powers.
    """
    fall = log_stress[:, :-1] - log_stress[:, 1:]
    grows = np.broadcast_to(np.diff(log_life), fall.shape)
    seen = fall > 1e-13  # flatter than that, rounding hides the curve: the interval's first life stands for it
    width = np.where(seen, fall, 1.0)
    chord = np.where(seen, grows / width, 0.0)
    first, last = (np.where(seen, -1.0 / slopes[..., end], 0.0) for end in (0, 1))
    value = np.broadcast_to(log_life[:-1], fall.shape)
    square = (3 * chord - 2 * first - last) / width
    cube = (first + last - 2 * chord) / width**2
    return np.stack([value, first, square, cube], axis=-1)


@dataclass(frozen=True, eq=False)
class LocationCurves:
    """S-N curves of L locations, ready for local cycles.

    Parameters
    ----------
    given, severity : ndarray, shape (L,)
        K0 as computed and as clipped to the family.
    exponent : ndarray, shape (L,)
        A3.
    log_life : ndarray, shape (L, n)
        log10 N of the nodes: `LOG_LIVES` but for those moved onto a kink.
    log_stress : ndarray, shape (L, n)
        log10 of the nominal equivalent stress [MPa] there, falling.
    cubic : ndarray, shape (L, n - 1, 4)
        log10 N between the nodes.
    ends : ndarray of bool, shape (L,)
        Whether there is no damage below the last node.
    tail : str
    tested_cycles, tested_ratio : ndarray, shape (L, 2)
        First and last of N and of R the tests cover.
    neighbours : tuple of ndarray, shape (L,)
        K_t of the family's members on either side.
    """

    given: Array
    severity: Array
    exponent: Array
    log_life: Array
    log_stress: Array
    cubic: Array
    ends: NDArray[np.bool_]
    tail: str
    tested_cycles: Array
    tested_ratio: Array
    neighbours: tuple[Array, Array]

    def only(self, index: int) -> LocationCurves:
        """Return the curve of one location."""
        return _rebuilt([self], lambda parts: parts[0][index : index + 1])

    def equivalent_stress(self, low: Array, high: Array) -> Array:
        """Return the nominal equivalent stress of local cycles, S_max (1 - R)^A3, 0 without tension [MPa].

        Parameters
        ----------
        low, high : ndarray, shape (L, ...)
            Local stress at the ends of each cycle [MPa].

        Notes
        -----
        Written S_max^(1 - A3) (S_max - S_min)^A3, which needs no R and rises with the range and with the maximum.
        """
        top = np.maximum(high, 0.0)
        a3, k0 = (values.reshape(-1, *[1] * (top.ndim - 1)) for values in (self.exponent, self.severity))
        return np.asarray(top ** (1 - a3) * (top - np.minimum(low, top)) ** a3 / k0)

    def life(self, low: Array, high: Array) -> Array:
        """Return the cycles to failure of local cycles, infinite where there is no damage.

        Above the stress of the first cycle the curve goes on along its tangent, so that order is kept; lives outside
        `tested_cycles` are for the caller to flag.

        Parameters
        ----------
        low, high : ndarray, shape (L, ...)
            Local stress at the ends of each cycle [MPa].
        """
        with np.errstate(divide="ignore"):
            log_s = np.log10(self.equivalent_stress(low, high))
        out = np.empty_like(log_s)
        for i in range(self.severity.size):  # one location, all its cycles
            out[i] = self._log_life(i, log_s[i].reshape(-1)).reshape(log_s[i].shape)
        with np.errstate(over="ignore"):
            return np.asarray(10.0**out)

    def _log_life(self, i: int, log_s: Array) -> Array:
        nodes = self.log_stress[i]
        cell = np.clip(np.searchsorted(-nodes, -log_s, side="right") - 1, 0, nodes.size - 2)
        fall = nodes[cell] - log_s
        outside = (log_s > nodes[0]) | (log_s < nodes[-1])
        fall[outside] = 0.0
        c = self.cubic[i][cell]
        out = c[:, 0] + fall * (c[:, 1] + fall * (c[:, 2] + fall * c[:, 3]))
        if outside.any():
            over, under = log_s > nodes[0], log_s < nodes[-1]
            out[over] = self.log_life[i, 0] + (nodes[0] - log_s[over]) * self.cubic[i, 0, 1]
            steepness = np.diff(self.log_life[i, -2:])[0] / max(nodes[-2] - nodes[-1], 1e-300)
            out[under] = np.inf if self.ends[i] else self.log_life[i, -1] + (nodes[-1] - log_s[under]) * steepness
        return np.asarray(out)

    def outside_ratio(self, low: Array, high: Array) -> NDArray[np.bool_]:
        """Tell which local cycles have a stress ratio the tests do not cover, shape (L, ...)."""
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = low / high
        first, last = (self.tested_ratio[:, end].reshape(-1, *[1] * (ratio.ndim - 1)) for end in (0, 1))
        return np.asarray((high > 0.0) & ((ratio < first) | (ratio > last)))


def stacked(curves: Sequence[LocationCurves]) -> LocationCurves:
    """Return the curves of several locations, of whatever family, as one."""
    return _rebuilt(curves, np.concatenate)


def _rebuilt(curves: Sequence[LocationCurves], rule: Callable[[list[Any]], Any]) -> LocationCurves:
    """Apply a rule to every array of some curves."""
    made: dict[str, Any] = {}
    for field in fields(LocationCurves):
        parts = [getattr(one, field.name) for one in curves]
        if field.name == "tail":
            made["tail"] = parts[0]
        elif field.name == "neighbours":
            made["neighbours"] = tuple(rule([part[side] for part in parts]) for side in (0, 1))
        else:
            made[field.name] = rule(parts)
    return LocationCurves(**made)

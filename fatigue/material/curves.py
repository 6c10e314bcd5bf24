"""S-N families in the handbook's equivalent-stress form, and the curve of a location between their members.

Members are log10 N = A1 + A2 log10(Seq - A4) with Seq = S_max (1 - R)^A3, each for coupons of one K_t. A location has
one severity K0; its local cycle divided by K0 is the nominal cycle of an equivalent coupon of K_t = K0 (same local
stress, same gradient). The coupon's curve lies between the neighbouring members: log Seq at equal life, and A3, are
linear in log K_t.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

TAILS = ("limit", "continued", "shallower")
LOG_LIVES = np.linspace(0.0, 20.0, 10001)
"""log10 N at which curves are tabulated; linear interpolation between is within 2e-5 of the life (tested)."""


@dataclass(frozen=True)
class Member:
    """The curve of coupons of one K_t: A1 and A2 for stresses in MPa, whatever was printed.

    Parameters
    ----------
    kt : float
        On net stress.
    a1, a2, a3, a4 : float
        Constants for MPa.
    figure : str
        Where it is printed.
    """

    kt: float
    a1: float
    a2: float
    a3: float
    a4: float
    figure: str = ""

    def log_life(self, equivalent: ArrayLike) -> Array:
        """Return log10 N at an equivalent stress [MPa]; infinite at and below A4."""
        excess = np.asarray(equivalent, dtype=np.float64) - self.a4
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.where(excess > 0.0, self.a1 + self.a2 * np.log10(excess), np.inf)

    def equivalent(self, log_life: ArrayLike) -> Array:
        """Return the equivalent stress at log10 N [MPa]."""
        return np.asarray(self.a4 + 10.0 ** ((np.asarray(log_life, dtype=np.float64) - self.a1) / self.a2))


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
        Outside the tested lives members may cross. There a member is not allowed above the one of the next lower K_t:
        a sharper notch never stands more nominal stress.
        """
        if tail not in TAILS:
            raise ValueError(f"tail {tail!r} is none of {TAILS}")
        given = np.atleast_1d(np.asarray(severity, dtype=np.float64))
        if not np.isfinite(given).all():
            raise ValueError("severity must be finite")
        kt = self.kt
        clipped = np.clip(given, kt[0], kt[-1])
        log_stress = np.log10([member.equivalent(LOG_LIVES) for member in self.members])
        log_stress = np.minimum.accumulate(log_stress, axis=0)
        lower, weight = self._between(clipped)
        upper = np.minimum(lower + 1, kt.size - 1)
        table = (1 - weight)[:, None] * log_stress[lower] + weight[:, None] * log_stress[upper]
        a3 = np.array([member.a3 for member in self.members])
        return LocationCurves(
            given=given,
            severity=clipped,
            exponent=(1 - weight) * a3[lower] + weight * a3[upper],
            log_stress=_with_tail(table, self.tested_cycles[1], tail),
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


def _with_tail(log_stress: Array, last_tested: float, tail: str) -> Array:
    """Replace a table beyond the last tested life by the tangent power law, or by Haibach's shallower one."""
    if tail == "limit":
        return log_stress
    start = int(np.searchsorted(LOG_LIVES, np.log10(last_tested)))
    step = LOG_LIVES[1] - LOG_LIVES[0]
    slope = (log_stress[:, start] - log_stress[:, start - 1]) / step  # d log S / d log N = -1/m
    if tail == "shallower":
        slope = -1.0 / (2.0 * (-1.0 / slope) - 1.0)
    beyond = LOG_LIVES[start:] - LOG_LIVES[start]
    return np.concatenate([log_stress[:, :start], log_stress[:, [start]] + slope[:, None] * beyond], axis=1)


@dataclass(frozen=True, eq=False)
class LocationCurves:
    """S-N curves of L locations, ready for local cycles.

    Parameters
    ----------
    given, severity : ndarray, shape (L,)
        K0 as computed and as clipped to the family.
    exponent : ndarray, shape (L,)
        A3.
    log_stress : ndarray, shape (L, len(LOG_LIVES))
        log10 of the nominal equivalent stress [MPa] at `LOG_LIVES`, falling.
    tail : str
    tested_cycles, tested_ratio : ndarray, shape (L, 2)
        First and last of N and of R the tests cover.
    neighbours : tuple of ndarray, shape (L,)
        K_t of the family's members on either side.
    """

    given: Array
    severity: Array
    exponent: Array
    log_stress: Array
    tail: str
    tested_cycles: Array
    tested_ratio: Array
    neighbours: tuple[Array, Array]

    def only(self, index: int) -> LocationCurves:
        """Return the curve of one location."""
        one = slice(index, index + 1)
        return LocationCurves(
            given=self.given[one],
            severity=self.severity[one],
            exponent=self.exponent[one],
            log_stress=self.log_stress[one],
            tail=self.tail,
            tested_cycles=self.tested_cycles[one],
            tested_ratio=self.tested_ratio[one],
            neighbours=(self.neighbours[0][one], self.neighbours[1][one]),
        )

    def equivalent_stress(self, low: Array, high: Array) -> Array:
        """Return the nominal equivalent stress of local cycles, S_max (1 - R)^A3, 0 without tension [MPa].

        Parameters
        ----------
        low, high : ndarray, shape (L, n)
            Local stress at the ends of each cycle [MPa].

        Notes
        -----
        Written S_max^(1 - A3) (S_max - S_min)^A3, which needs no R.
        """
        top = np.maximum(high, 0.0)
        a3 = self.exponent[:, None]
        return np.asarray(top ** (1 - a3) * (top - np.minimum(low, top)) ** a3 / self.severity[:, None])

    def life(self, low: Array, high: Array) -> Array:
        """Return the cycles to failure of local cycles, infinite where there is no damage, shape (L, n)."""
        stress = self.equivalent_stress(low, high)
        with np.errstate(divide="ignore"):
            log_s = np.log10(stress)
        out = np.empty_like(log_s)
        first = 1.0 / np.diff(LOG_LIVES[:2])[0]
        for i, table in enumerate(self.log_stress):  # one location, all its cycles
            out[i] = np.interp(-log_s[i], -table, LOG_LIVES, right=np.inf)
            over = log_s[i] > table[0]
            if over.any():  # shorter than a cycle: go on along the first chord, so that order is kept
                out[i, over] = (table[0] - log_s[i, over]) / ((table[0] - table[1]) * first)
            under = log_s[i] < table[-1]
            if self.tail != "limit" and under.any():
                slope = (table[-1] - table[-2]) * first
                out[i, under] = LOG_LIVES[-1] + (log_s[i, under] - table[-1]) / slope
        with np.errstate(over="ignore"):
            return np.asarray(10.0**out)

    def outside_ratio(self, low: Array, high: Array) -> NDArray[np.bool_]:
        """Tell which local cycles have a stress ratio the tests do not cover, shape (L, n)."""
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = low / high
        first, last = self.tested_ratio[:, :1], self.tested_ratio[:, 1:]
        return np.asarray((high > 0.0) & ((ratio < first) | (ratio > last)))


def stacked(curves: list[LocationCurves]) -> LocationCurves:
    """Return the curves of several locations, of whatever family, as one."""
    return LocationCurves(
        given=np.concatenate([c.given for c in curves]),
        severity=np.concatenate([c.severity for c in curves]),
        exponent=np.concatenate([c.exponent for c in curves]),
        log_stress=np.concatenate([c.log_stress for c in curves]),
        tail=curves[0].tail,
        tested_cycles=np.concatenate([c.tested_cycles for c in curves]),
        tested_ratio=np.concatenate([c.tested_ratio for c in curves]),
        neighbours=(
            np.concatenate([c.neighbours[0] for c in curves]),
            np.concatenate([c.neighbours[1] for c in curves]),
        ),
    )

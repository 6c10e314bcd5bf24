"""One S-N curve in the handbook's equivalent-stress form, and where the curves of a family cross."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.optimize import brentq

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Member:
    """The curve of coupons of one K_t, log10 N = A1 + A2 log10(Seq - A4), Seq = S_max (1 - R)^A3, for MPa.

    Parameters
    ----------
    kt : float
        On net stress.
    a1, a2, a3, a4 : float
        Constants for MPa, whatever was printed.
    figure : str
        Where it is printed.
    scatter_log10 : float or None
        Standard deviation of log10 N about the curve, where it is known.

    References
    ----------
    Key ``mil-hdbk-5j``.

    Examples
    --------
    >>> member = Member(2.0, 12.0, -3.3, 0.68, 85.0)
    >>> round(float(member.log_life(member.equivalent(5.0))), 12)
    5.0
    """

    kt: float
    a1: float
    a2: float
    a3: float
    a4: float
    figure: str = ""
    scatter_log10: float | None = None

    def log_life(self, equivalent: ArrayLike) -> Array:
        """Return log10 N at an equivalent stress [MPa]; infinite at and below A4."""
        excess = np.asarray(equivalent, dtype=np.float64) - self.a4
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.where(excess > 0.0, self.a1 + self.a2 * np.log10(excess), np.inf)

    def equivalent(self, log_life: ArrayLike) -> Array:
        """Return the equivalent stress at log10 N [MPa]."""
        return np.asarray(10.0 ** self.log_equivalent(log_life))

    def log_equivalent(self, log_life: ArrayLike) -> Array:
        """Return log10 of the equivalent stress [MPa] at log10 N."""
        above = (np.asarray(log_life, dtype=np.float64) - self.a1) / self.a2
        if self.a4 == 0.0:
            return np.asarray(above)
        return np.asarray(np.logaddexp(np.log(self.a4), above * np.log(10.0)) / np.log(10.0))

    def slope(self, log_life: ArrayLike) -> Array:
        """Return d log10 Seq / d log10 N, negative."""
        above = (np.asarray(log_life, dtype=np.float64) - self.a1) / self.a2
        return np.asarray(10.0 ** (above - self.log_equivalent(log_life)) / self.a2)


@dataclass(frozen=True)
class TailedMember:
    """A member up to the last tested life and a tail beyond it.

    Parameters
    ----------
    member : Member
    last : float
        log10 of the last tested life.
    tail : str
        ``limit``: the member's own asymptote; ``continued``: its tangent power law; ``shallower``: slope 2m - 1 where
        the tangent has m.

    References
    ----------
    Haibach 1970; key ``haibach-1970``.
    """

    member: Member
    last: float
    tail: str

    @property
    def kt(self) -> float:
        """K_t of the member."""
        return self.member.kt

    @property
    def tail_slope(self) -> float:
        """Slope d log10 Seq / d log10 N of the tail's power law."""
        slope = float(self.member.slope(self.last))
        return slope if self.tail == "continued" else -1.0 / (2.0 * (-1.0 / slope) - 1.0)

    def log_equivalent(self, log_life: ArrayLike) -> Array:
        """Return log10 of the equivalent stress [MPa] at log10 N."""
        y = np.asarray(log_life, dtype=np.float64)
        own = self.member.log_equivalent(y)
        if self.tail == "limit":
            return own
        beyond = self.member.log_equivalent(self.last) + self.tail_slope * (y - self.last)
        return np.asarray(np.where(y > self.last, beyond, own))

    def slope(self, log_life: ArrayLike, after: bool) -> Array:
        """Return d log10 Seq / d log10 N, on the side after or before each life."""
        y = np.asarray(log_life, dtype=np.float64)
        if self.tail == "limit":
            return self.member.slope(y)
        in_tail = y >= self.last if after else y > self.last
        return np.asarray(np.where(in_tail, self.tail_slope, self.member.slope(y)))


@dataclass(frozen=True)
class Crossing:
    """Two members that stand the same equivalent stress at one life.

    Parameters
    ----------
    lower, upper : float
        Their K_t.
    log_life : float
    """

    lower: float
    upper: float
    log_life: float


def crossings(members: Sequence[Member | TailedMember], first: float, last: float) -> tuple[Crossing, ...]:
    """Find where members cross between two lives, by rising life.

    Parameters
    ----------
    members : sequence of Member
        By rising K_t.
    first, last : float
        log10 N.
    """
    grid = np.linspace(first, last, 401)
    found = []
    for a, b in combinations(members, 2):
        apart = b.log_equivalent(grid) - a.log_equivalent(grid)

        def difference(y: float, a: Member | TailedMember = a, b: Member | TailedMember = b) -> float:
            return float(b.log_equivalent(y) - a.log_equivalent(y))

        side = apart >= 0.0
        for i in np.flatnonzero(side[1:] != side[:-1]):
            ends = (grid[i], grid[i + 1])
            at_end = [y for y in ends if difference(y) == 0.0]
            where = at_end[0] if at_end else float(brentq(difference, *ends, xtol=1e-13))
            found.append(Crossing(a.kt, b.kt, where))
    return tuple(sorted(found, key=lambda one: one.log_life))


def out_of_order(members: Sequence[Member], first: float, last: float) -> tuple[Crossing, ...]:
    """Find the lives between two at which a sharper notch stands more than a blunter one.

    Returns
    -------
    tuple of Crossing
        One for each crossing; for a pair that never crosses but is the wrong way round, one at the first life.
    """
    found = list(crossings(members, first, last))
    seen = {(one.lower, one.upper) for one in found}
    for a, b in combinations(members, 2):
        if (a.kt, b.kt) not in seen and b.log_equivalent(first) > a.log_equivalent(first):
            found.append(Crossing(a.kt, b.kt, first))
    return tuple(found)

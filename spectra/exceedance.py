"""How often repeated loads exceed a level: tables, the published gust form, and the levels flown for them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

from spectra.cycles import locked

Array = NDArray[np.float64]
Counts = NDArray[np.int64]


class Curve(Protocol):
    """Exceedances in a block of flights."""

    def number(self, level: ArrayLike) -> Array:
        """Return how often a block exceeds each level."""

    def level(self, number: ArrayLike) -> Array:
        """Return the level that a block exceeds so often."""


@dataclass(frozen=True, eq=False)
class ExceedanceTable:
    """A table, straight between its points on a logarithmic number scale, and beyond them.

    Parameters
    ----------
    at : ndarray, shape (n,)
        Levels, rising.
    per_block : ndarray, shape (n,)
        How often each is exceeded, falling, greater than 0.

    Examples
    --------
    >>> table = ExceedanceTable(np.array([0.0, 1.0, 2.0]), np.array([1e4, 1e2, 1.0]))
    >>> table.number([0.5, 1.0]), table.level([10.0])
    (array([1000.,  100.]), array([1.5]))
    """

    at: Array
    per_block: Array

    def __post_init__(self) -> None:
        object.__setattr__(self, "at", locked(self.at))
        object.__setattr__(self, "per_block", locked(self.per_block))

    def number(self, level: ArrayLike) -> Array:
        """Return how often a block exceeds each level."""
        return np.exp(_straight(np.asarray(level, dtype=np.float64), self.at, np.log(self.per_block)))

    def level(self, number: ArrayLike) -> Array:
        """Return the level that a block exceeds so often."""
        wanted = np.log(np.asarray(number, dtype=np.float64))
        return _straight(wanted, np.log(self.per_block)[::-1], self.at[::-1])


@dataclass(frozen=True)
class GustForm:
    """Exceedances of continuous turbulence.

    N(y) = N0 T [P1 exp(-y/(b1 A)) + P2 exp(-y/(b2 A))]: Rice's crossings of a Gaussian response of rms A sigma, mixed
    over half-normal sigma of scale b, for the shares P of storm and non-storm turbulence (Press and Steiner 1958, key
    ``press-steiner-1958``).

    Parameters
    ----------
    N0 : float
        Upward crossings of the mean in an hour.
    P1, b1, P2, b2 : float
        Share of the time and scale of each kind of turbulence, b in gust velocity.
    A : float
        Response per unit of gust velocity.
    hours : float
        Time in a block of flights.

    Examples
    --------
    >>> round(float(GustForm(N0=1.0, P1=1.0, b1=3.27, P2=0.0, b2=1.0, A=1.0, hours=1.0).number(10.0)), 10)
    0.0469766798
    """

    N0: float
    P1: float
    b1: float
    P2: float
    b2: float
    A: float
    hours: float

    def number(self, level: ArrayLike) -> Array:
        """Return how often a block exceeds each level."""
        y = np.asarray(level, dtype=np.float64) / self.A
        return np.asarray(self.N0 * self.hours * (self.P1 * np.exp(-y / self.b1) + self.P2 * np.exp(-y / self.b2)))

    def level(self, number: ArrayLike) -> Array:
        """Return the level that a block exceeds so often, by halving."""
        wanted = np.asarray(number, dtype=np.float64)
        widest = self.A * max(self.b1, self.b2) * np.log(np.maximum(self.number(0.0) / wanted, 1.0))
        low, high = np.zeros_like(wanted), widest
        for _ in range(60):
            middle = (low + high) / 2
            above = self.number(middle) > wanted
            low, high = np.where(above, middle, low), np.where(above, high, middle)
        return high


def flown_levels(curve: Curve, smallest: float, most: int) -> tuple[Array, Counts]:
    """Choose levels whose exceedances are whole numbers, the largest once in a block.

    Parameters
    ----------
    curve : Curve
    smallest : float
        Level below which loads are left out.
    most : int
        Number of levels; fewer where whole numbers do not stretch to it.

    Returns
    -------
    level : ndarray, shape (n,)
        Falling.
    exceeded : ndarray, shape (n,)
        How often each is reached or exceeded: from 1 up to the whole part of the smallest level's number, in about
        equal ratios.

    Examples
    --------
    >>> flown_levels(ExceedanceTable(np.array([0.0, 3.0]), np.array([1e3, 1.0])), 1.0, 3)
    (array([3., 2., 1.]), array([  1,  10, 100]))
    """
    all_ = np.floor(float(curve.number(smallest)) * (1 + 1e-12))
    exceeded = np.unique(np.round(np.geomspace(1.0, all_, most))).astype(np.int64)
    return curve.level(exceeded), exceeded


def dealt(
    curve: Curve, level: Array, exceeded: Counts, severity: Array, flights: Counts, random: np.random.Generator
) -> Counts:
    """Deal a block's loads out to its flights.

    A flight type of severity s meets turbulence s times as strong: loads at y as often as the curve has them at y/s.
    The shares are scaled so that the block's exceedances stay what they are; within a type the loads of a level are
    spread evenly, the odd ones at random.

    Parameters
    ----------
    curve : Curve
    level, exceeded : ndarray, shape (n,)
        See `flown_levels`.
    severity, flights : ndarray, shape (k,)
        Severity of each flight type, and how many fly.
    random : numpy.random.Generator

    Returns
    -------
    ndarray, shape (sum of flights, n)
        How often each flight meets each level, types in order.
    """
    out = np.zeros((int(flights.sum()), level.size), dtype=np.int64)
    number = np.diff(exceeded, prepend=0)
    ends = np.cumsum(flights)
    for column, (y, times) in enumerate(zip(level, number, strict=True)):
        weight = flights * curve.number(y / severity)
        share = times * weight / weight.sum()
        each = np.floor(share).astype(np.int64)
        odd = np.argsort(each - share, kind="stable")[: times - each.sum()]
        each[odd] += 1
        for many, fly, end in zip(each, flights, ends, strict=True):
            out[end - fly : end, column] = many // fly
            out[end - fly + random.permutation(fly)[: many % fly], column] += 1
    return out


def _straight(x: Array, xs: Array, ys: Array) -> Array:
    """Interpolate between points of rising x and go straight on beyond them."""
    piece = np.clip(np.searchsorted(xs, x) - 1, 0, xs.size - 2)
    slope = (ys[piece + 1] - ys[piece]) / (xs[piece + 1] - xs[piece])
    return np.asarray(ys[piece] + slope * (x - xs[piece]))

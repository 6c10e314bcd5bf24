"""Straight-line least squares of a fatigue curve with its intervals and the lack-of-fit test, after ASTM E739."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.stats import f as f_law
from scipy.stats import t as t_law

Array = NDArray[np.float64]


@dataclass(frozen=True)
class LackOfFit:
    """Whether a straight line holds: the scatter of group means about it over the scatter within groups.

    Parameters
    ----------
    ratio : float
        F computed.
    limit : float
        F that is exceeded by chance once in twenty straight lines.
    groups : int
    straight : bool
        Whether straightness is not refused.
    """

    ratio: float
    limit: float
    groups: int
    straight: bool


@dataclass(frozen=True)
class StraightLine:
    """Y = A + B X by least squares, Y being log10 N and X log10 of stress or strain.

    Parameters
    ----------
    intercept, slope : float
        A, B.
    variance : float
        s^2 of Y about the line.
    tests : int
    mean : float
        Of X.
    spread : float
        Sum of (X - mean)^2.
    level : float
    intercept_interval, slope_interval : tuple of float
        At that level, by Student's t.
    intercept_error, slope_error : float
        Standard errors.
    lack_of_fit : LackOfFit or None
        None without enough repeated levels.
    """

    intercept: float
    slope: float
    variance: float
    tests: int
    mean: float
    spread: float
    level: float
    intercept_interval: tuple[float, float]
    slope_interval: tuple[float, float]
    intercept_error: float
    slope_error: float
    lack_of_fit: LackOfFit | None

    def at(self, x: ArrayLike) -> Array:
        """Return the line."""
        return np.asarray(self.intercept + self.slope * np.asarray(x, dtype=np.float64))

    def half_band(self, x: ArrayLike) -> Array:
        """Return half the width of the band that holds the whole median line at the level: sqrt(2 F) s h(x)."""
        quantile = float(f_law.ppf(self.level, 2, self.tests - 2))
        off = (np.asarray(x, dtype=np.float64) - self.mean) ** 2 / self.spread
        return np.asarray(np.sqrt(2.0 * quantile * self.variance * (1.0 / self.tests + off)))


def straight_line(x: ArrayLike, y: ArrayLike, level: float = 0.95, groups: ArrayLike | None = None) -> StraightLine:
    """Fit Y = A + B X to failures.

    Parameters
    ----------
    x, y : array_like, shape (n,)
        n >= 3, at two different x at least.
    level : float
        Of the intervals.
    groups : array_like, shape (n,), optional
        Which tests count as repeats of one level; equal x unless given.

    Returns
    -------
    StraightLine

    Raises
    ------
    ValueError
        With fewer than three points or only one level.

    References
    ----------
    ASTM E739; key ``astm-e739``.
    """
    xs, ys = (np.asarray(v, dtype=np.float64) for v in (x, y))
    n = xs.size
    mean = float(xs.mean()) if n else 0.0
    spread = float(np.square(xs - mean).sum())
    if n < 3 or spread <= 0.0:
        raise ValueError("a line needs three points, at two levels at least")
    slope = float((xs - mean) @ (ys - ys.mean())) / spread
    intercept = float(ys.mean()) - slope * mean
    rest = ys - intercept - slope * xs
    variance = float(rest @ rest) / (n - 2)
    slope_error = float(np.sqrt(variance / spread))
    intercept_error = float(np.sqrt(variance * (1.0 / n + mean**2 / spread)))
    quantile = float(t_law.ppf(0.5 + level / 2.0, n - 2))
    return StraightLine(
        intercept=intercept,
        slope=slope,
        variance=variance,
        tests=n,
        mean=mean,
        spread=spread,
        level=level,
        intercept_interval=(intercept - quantile * intercept_error, intercept + quantile * intercept_error),
        slope_interval=(slope - quantile * slope_error, slope + quantile * slope_error),
        intercept_error=intercept_error,
        slope_error=slope_error,
        lack_of_fit=lack_of_fit(ys, intercept + slope * xs, xs if groups is None else np.asarray(groups)),
    )


def lack_of_fit(y: Array, line: Array, groups: Array, level: float = 0.95) -> LackOfFit | None:
    """Test whether a line with two constants holds; None where levels or repeats are too few.

    Parameters
    ----------
    y, line : ndarray, shape (n,)
        Observed, and on the line.
    groups : ndarray, shape (n,)
        Equal where tests repeat one level.
    level : float

    References
    ----------
    ASTM E739, section on the linearity hypothesis; key ``astm-e739``.
    """
    _, member = np.unique(groups, return_inverse=True)
    count = np.bincount(member)
    between, within = count.size - 2, y.size - count.size
    if between < 1 or within < 1:
        return None
    means = np.bincount(member, y) / count
    about_line = float(np.square(np.bincount(member, line) / count - means) @ count) / between
    inside = float(np.square(y - means[member]).sum()) / within
    limit = float(f_law.ppf(level, between, within))
    ratio = about_line / inside if inside > 0.0 else float("inf")
    return LackOfFit(ratio, limit, int(count.size), ratio <= limit)


def line_through_origin(x: ArrayLike, y: ArrayLike) -> tuple[float, float, float]:
    """Return the slope of Y = B X by least squares, its standard error and the standard deviation about it."""
    xs, ys = (np.asarray(v, dtype=np.float64) for v in (x, y))
    square = float(xs @ xs)
    slope = float(xs @ ys) / square
    deviation = float(np.sqrt(np.square(ys - slope * xs).sum() / (xs.size - 1)))
    return slope, deviation / float(np.sqrt(square)), deviation

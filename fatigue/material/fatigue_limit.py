"""The random fatigue-limit model: every specimen has its own limit, below which it never fails."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq, minimize
from scipy.special import ndtr

from fatigue.material.coupons import Coupons
from fatigue.material.family_fit import small_sample_criterion
from spectra.faults import Fault, InputFaults

Array = NDArray[np.float64]

NODES, WEIGHTS = np.polynomial.legendre.leggauss(80)
REACH = 6.0
"""Standard deviations of the log limit that are integrated over, each way."""
PARAMETERS = 5
NAMES = ("intercept", "slope", "s", "log10 limit", "s of log10 limit")


@dataclass(frozen=True, eq=False)
class FatigueLimitFit:
    """A fitted random fatigue-limit model of one K_t.

    log10 N = b0 + b1 log10(Seq - limit), scattered by s; log10 limit normal.

    Parameters
    ----------
    kt : float
    exponent : float
        A3 of Seq = S_max (1 - R)^A3, held.
    intercept, slope : float
        b0, b1 [MPa].
    scatter : float
        s of log10 N at a given limit.
    log_limit, limit_scatter : float
        Mean and standard deviation of log10 of the limit [MPa].
    log_likelihood : float
    tests : int
    """

    kt: float
    exponent: float
    intercept: float
    slope: float
    scatter: float
    log_limit: float
    limit_scatter: float
    log_likelihood: float
    tests: int

    @property
    def point(self) -> Array:
        """Parameters as they are fitted: scales by their logarithm."""
        return np.array([self.intercept, self.slope, np.log(self.scatter), self.log_limit, np.log(self.limit_scatter)])

    def probability(self, log_life: Array, equivalent: Array) -> Array:
        """Return the chance to fail by log10 N at an equivalent stress [MPa]; both of shape (n,)."""
        return np.asarray(1.0 - np.exp(log_survival(np.asarray(log_life), np.log10(equivalent), self.point)))

    def quantile(self, equivalent: float, probability: float = 0.5) -> float:
        """Return log10 of the life by which a share has failed at a stress; infinite if so many never do."""

        def missing(y: float) -> float:
            return float(self.probability(np.array([y]), np.array([equivalent]))[0]) - probability

        return float(brentq(missing, -2.0, 40.0)) if missing(40.0) > 0.0 else float("inf")


def log_survival(log_life: Array, x: Array, point: Array) -> Array:
    """Return log of the chance to last, shape (n,).

    Parameters
    ----------
    log_life, x : ndarray, shape (n,)
        log10 N and log10 Seq.
    point : ndarray, shape (5,)
        b0, b1, log s, mean of log10 limit, log of its standard deviation.
    """
    density, z, never = _integrand(log_life, x, point)
    return np.asarray(np.log(np.maximum(never + (density * ndtr(-z)).sum(axis=1), 1e-300)))


def log_density(log_life: Array, x: Array, point: Array) -> Array:
    """Return log of the density of log10 N, shape (n,)."""
    density, z, _ = _integrand(log_life, x, point)
    bell = np.exp(-0.5 * z * z - point[2]) / np.sqrt(2.0 * np.pi)
    return np.asarray(np.log(np.maximum((density * bell).sum(axis=1), 1e-300)))


def _integrand(log_life: Array, x: Array, point: Array) -> tuple[Array, Array, Array]:
    """Return weights over the limits below each stress, z there, and the chance that the limit is above the stress."""
    b0, b1, log_s, middle, log_spread = point
    spread = np.exp(log_spread)
    first = np.full_like(x, middle - REACH * spread)
    last = np.minimum(x, middle + REACH * spread)
    half = np.maximum(last - first, 0.0) / 2.0
    v = first[:, None] + half[:, None] * (1.0 + NODES)
    standard = (v - middle) / spread
    density = half[:, None] * WEIGHTS * np.exp(-0.5 * standard**2) / (spread * np.sqrt(2.0 * np.pi))
    excess = 10.0 ** x[:, None] - 10.0**v
    log_excess = np.log10(np.maximum(excess, 1e-12))
    z = (log_life[:, None] - b0 - b1 * log_excess) / np.exp(log_s)
    return density, z, ndtr((middle - x) / spread)


def fit_fatigue_limit(coupons: Coupons, exponent: float) -> FatigueLimitFit:
    """Fit the random fatigue-limit model to the tests of one K_t by maximum likelihood.

    Parameters
    ----------
    coupons : Coupons
        Of one K_t.
    exponent : float
        A3, from a family fit.

    Raises
    ------
    InputFaults
        With fewer than seven failures.

    References
    ----------
    Pascual and Meeker 1999; key ``pascual-meeker-1999``.
    """
    kt = float(coupons.kt[0])
    if int(coupons.failed.sum()) < PARAMETERS + 2:
        told = f"{int(coupons.failed.sum())} failures; the random fatigue-limit model needs at least {PARAMETERS + 2}."
        raise InputFaults(coupons.source, [Fault(f"K_t {kt:g}", told, "Use the handbook form or the power law.")])
    y, failed = coupons.log_life, coupons.failed
    x = np.log10(coupons.top * (1.0 - coupons.ratio) ** exponent)

    def cost(point: Array) -> float:
        if not (np.log(1e-3) < point[2] < 2.0 and np.log(2e-3) < point[4] < 0.0 and -30.0 < point[1] < -0.2):
            return 1e10
        value = log_density(y[failed], x[failed], point).sum()
        value += log_survival(y[~failed], x[~failed], point).sum() if (~failed).any() else 0.0
        return -float(value)

    lowest = float(x.min())
    tried = []
    for share in (0.75, 0.9, 0.98):
        middle = lowest + float(np.log10(share))
        excess = np.log10(10.0 ** x[failed] - 10.0**middle)
        slope, intercept = np.polyfit(excess, y[failed], 1)
        slope = min(float(slope), -0.5)
        rest = y[failed] - intercept - slope * excess
        start = np.array([y[failed].mean() - slope * excess.mean(), slope, np.log(max(rest.std(), 0.05)), middle, -3.0])
        simplex = np.vstack([start, start + np.diag([0.5, -0.3, 0.4, 0.03, 0.5])])
        found = minimize(
            cost,
            start,
            method="Nelder-Mead",
            options={"initial_simplex": simplex, "xatol": 1e-6, "fatol": 1e-8, "maxiter": 4000, "adaptive": True},
        )
        tried.append(found)
    best = min(tried, key=lambda found: float(found.fun))
    b0, b1, log_s, middle, log_spread = (float(value) for value in best.x)
    return FatigueLimitFit(
        kt, exponent, b0, b1, float(np.exp(log_s)), middle, float(np.exp(log_spread)), -float(best.fun), len(coupons)
    )


@dataclass(frozen=True, eq=False)
class FatigueLimitFamily:
    """Random fatigue-limit models of several K_t, each by itself."""

    fits: tuple[FatigueLimitFit, ...]
    free_exponents: int

    @property
    def parameters(self) -> int:
        """Number of parameters, A3 among them where the family fit found it."""
        return PARAMETERS * len(self.fits) + self.free_exponents

    @property
    def log_likelihood(self) -> float:
        """Sum over the K_t."""
        return sum(fit.log_likelihood for fit in self.fits)

    @property
    def aicc(self) -> float:
        """Akaike's information criterion with its small-sample term."""
        return small_sample_criterion(self.log_likelihood, self.parameters, sum(fit.tests for fit in self.fits))

"""Likelihood of lives with run-outs: a location-scale law of log10 N, censored on the right, with its derivatives."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.special import log_ndtr

Array = NDArray[np.float64]
Flags = NDArray[np.bool_]

LAWS = ("lognormal", "weibull")
LOG_ROOT_2PI = 0.5 * float(np.log(2.0 * np.pi))


@dataclass(frozen=True, eq=False)
class Terms:
    """Log likelihood of each test and its derivatives by the location mu and by log s, shape (n,) each."""

    value: Array
    by_mu: Array
    by_log_s: Array
    by_mu_mu: Array
    by_mu_log_s: Array
    by_log_s_log_s: Array


def log_likelihood_terms(log_life: Array, failed: Flags, mu: Array, log_s: Array, law: str = "lognormal") -> Terms:
    """Return each test's log likelihood in log10 N: the density where it failed, the chance to last where it ran out.

    Parameters
    ----------
    log_life : ndarray, shape (n,)
        log10 N of failure, or at which the test was stopped.
    failed : ndarray of bool, shape (n,)
        False for run-outs.
    mu, log_s : ndarray, shape (n,)
        Location of log10 N (the median's for ``lognormal``, log10 of the characteristic life for ``weibull``) and
        natural log of its scale; an infinite location is a stress that never fails.
    law : str
        One of `LAWS`.

    Notes
    -----
    With z = (log N - mu)/s and l(z) the log of the standard density or survival, all follows from l' and l''.

    References
    ----------
    Nelson 1984; key ``nelson-1984``.
    """
    s = np.exp(log_s)
    endless = ~np.isfinite(mu)
    z = (log_life - np.where(endless, 0.0, mu)) / s
    if law == "lognormal":
        log_density = -0.5 * z * z - LOG_ROOT_2PI
        log_survival = log_ndtr(-z)
        hazard = np.exp(log_density - log_survival)
        value = np.where(failed, log_density - log_s, log_survival)
        first = np.where(failed, -z, -hazard)
        second = np.where(failed, -1.0, -hazard * (hazard - z))
    elif law == "weibull":
        grown = np.exp(np.minimum(z, 700.0))
        value = np.where(failed, z - grown - log_s, -grown)
        first = np.where(failed, 1.0 - grown, -grown)
        second = -grown
    else:
        raise ValueError(f"law {law!r} is none of {LAWS}")
    value = np.where(endless, np.where(failed, -np.inf, 0.0), value)
    first, second = (np.where(endless, 0.0, v) for v in (first, second))
    own = np.where(failed & ~endless, 1.0, 0.0)
    return Terms(
        value=value,
        by_mu=-first / s,
        by_log_s=-first * z - own,
        by_mu_mu=second / s**2,
        by_mu_log_s=(second * z + first) / s,
        by_log_s_log_s=second * z * z + first * z,
    )

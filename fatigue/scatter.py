"""From the median life of one hole to a life with reliability and confidence for many."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import ndtri


def first_of_many_factor(reliability: ArrayLike, holes: ArrayLike, scatter_log10: ArrayLike) -> NDArray[np.float64]:
    """Return the life reached by the first of m holes with a given reliability, over the median life of one.

    The m lives are independent and lognormal with standard deviation s of log10 N, so the first crack comes after the
    life L with probability (1 - Phi(z))^m: z = Phi^-1(1 - R^(1/m)) and the factor is 10^(s z). With R = 0.5 it is the
    median of the first crack; with m = 1 the quantile of a single hole.

    Parameters
    ----------
    reliability : array_like
        Probability R that no hole of the m has cracked, 0 < R < 1.
    holes : array_like
        Number m of equally loaded holes, at least 1.
    scatter_log10 : array_like
        Standard deviation of log10 life.

    Returns
    -------
    ndarray
        Factor on the median life of one hole, broadcast.

    References
    ----------
    Exact order statistic; key ``weakest-link``.

    Examples
    --------
    >>> round(float(first_of_many_factor(0.5, 20, 0.15)), 4)
    0.5326
    """
    r, m, s = (np.asarray(value, dtype=np.float64) for value in (reliability, holes, scatter_log10))
    # 1 - R^(1/m) written so that it keeps its digits when R is near 1 or m is large
    z = ndtri(-np.expm1(np.log(r) / m))
    return np.asarray(10.0 ** (s * z))


def confidence_factor(confidence: ArrayLike, tests: ArrayLike, scatter_log10: ArrayLike) -> NDArray[np.float64]:
    """Return the factor for a median known from n tests only, the scatter being known.

    The mean of n log lives has standard deviation s / sqrt(n): the factor is 10^(-s z_C / sqrt(n)).

    Parameters
    ----------
    confidence : array_like
        Probability C that the true median is not below the factored one.
    tests : array_like
        Number n of test lives behind the median.
    scatter_log10 : array_like
        Standard deviation of log10 life, known.

    Returns
    -------
    ndarray
        Factor on life, broadcast.

    Examples
    --------
    >>> round(float(confidence_factor(0.95, 1, 0.15)), 4)
    0.5666
    """
    c, n, s = (np.asarray(value, dtype=np.float64) for value in (confidence, tests, scatter_log10))
    return np.asarray(10.0 ** (-s * ndtri(c) / np.sqrt(n)))

"""Lives of one kind of test: the law of their scatter, with run-outs."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.material.likelihood import log_likelihood_terms
from fatigue.material.maximise import maximise

Array = NDArray[np.float64]
LN10 = float(np.log(10.0))


@dataclass(frozen=True)
class LifeSample:
    """A fitted law of lives.

    Parameters
    ----------
    law : str
        ``lognormal`` or ``weibull``.
    location : float
        Of log10 N: the median's, or the characteristic life's.
    scale : float
        Of log10 N: its standard deviation for ``lognormal``.
    log_likelihood : float
        In log10 N.
    """

    law: str
    location: float
    scale: float
    log_likelihood: float

    @property
    def median(self) -> float:
        """Median life."""
        shift = float(np.log(np.log(2.0))) if self.law == "weibull" else 0.0
        return float(10.0 ** (self.location + shift * self.scale))

    @property
    def weibull_shape(self) -> float:
        """Shape of a Weibull law: 1/(s ln 10)."""
        return 1.0 / (self.scale * LN10)

    @property
    def weibull_scale(self) -> float:
        """Characteristic life of a Weibull law."""
        return float(10.0**self.location)


def fit_lives(cycles: ArrayLike, failed: ArrayLike | None = None, law: str = "lognormal") -> LifeSample:
    """Fit the scatter of lives under one load by censored maximum likelihood.

    Parameters
    ----------
    cycles : array_like, shape (n,)
        To failure, or to the stop of a run-out; any unit.
    failed : array_like of bool, shape (n,), optional
        False for run-outs; all failed if not given.
    law : str
        ``lognormal`` or ``weibull``.

    Returns
    -------
    LifeSample

    Raises
    ------
    ValueError
        With fewer than two different failures, or a life that is not above 0.

    References
    ----------
    Nelson 1984; key ``nelson-1984``.

    Examples
    --------
    >>> sample = fit_lives([1e5, 2e5, 3e5], [True, True, False])
    >>> 1.5e5 < sample.median < 3e5
    True
    """
    lives = np.asarray(cycles, dtype=np.float64)
    broken = np.ones(lives.shape, dtype=np.bool_) if failed is None else np.asarray(failed, dtype=np.bool_)
    if not (np.isfinite(lives) & (lives > 0)).all():
        raise ValueError("lives must be finite and above 0")
    if np.unique(lives[broken]).size < 2:
        raise ValueError("two different failures are needed at least")
    log_life = np.log10(lives)

    def objective(point: Array) -> tuple[float, Array, Array]:
        terms = log_likelihood_terms(
            log_life, broken, np.full_like(log_life, point[0]), np.full_like(log_life, point[1]), law
        )
        mixed = terms.by_mu_log_s.sum()
        return (
            float(terms.value.sum()),
            np.array([terms.by_mu.sum(), terms.by_log_s.sum()]),
            np.array([[terms.by_mu_mu.sum(), mixed], [mixed, terms.by_log_s_log_s.sum()]]),
        )

    own = log_life[broken]
    start = np.array([own.mean(), np.log(own.std())])
    best = maximise(objective, start, np.array([-np.inf, -20.0]), np.array([np.inf, 5.0]))
    return LifeSample(law, float(best.point[0]), float(np.exp(best.point[1])), best.value)

"""Censored maximum likelihood of an S-N family: several K_t at once, scatter constant or growing toward long life."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from fatigue.material.coupons import Coupons
from fatigue.material.family_model import LN10, SHALLOWEST, Model, layout_of, objective_of, relative_stress
from fatigue.material.fit_start import starting_points
from fatigue.material.maximise import Interval, Maximum, Objective, maximise, profile_interval
from fatigue.material.members import Member
from spectra.faults import Fault, InputFaults, listed

Array = NDArray[np.float64]

USUAL_EXPONENT = 0.5
"""A3 where tests at one stress ratio cannot tell it: Smith, Watson and Topper's square root."""
MEDIAN_Z = {"lognormal": 0.0, "weibull": float(np.log(np.log(2.0)))}
"""Standard median of each law of log10 N."""


@dataclass(frozen=True, eq=False)
class FamilyFit:
    """A fitted family.

    Parameters
    ----------
    model : Model
    coupons : Coupons
    kts : ndarray, shape (K,)
    names : tuple of str
        Of the parameters: A1 to A4 by K_t, ``log s``, ``growth``.
    place : ndarray of int, shape (K, 4)
        Where each K_t's A1 to A4 stand among the parameters.
    lower, upper : ndarray, shape (p,)
        Bounds; equal where a parameter is held.
    best : Maximum
    objective : callable
        Log likelihood with its derivatives.
    """

    model: Model
    coupons: Coupons
    kts: Array
    names: tuple[str, ...]
    place: NDArray[np.int64]
    lower: Array
    upper: Array
    best: Maximum
    objective: Objective

    @property
    def parameters(self) -> int:
        """Number of parameters fitted."""
        return int((self.lower < self.upper).sum())

    @property
    def log_likelihood(self) -> float:
        """Natural log of the greatest likelihood, in log10 N."""
        return self.best.value

    @property
    def aicc(self) -> float:
        """Akaike's information criterion with its small-sample term (Hurvich and Tsai 1989)."""
        return small_sample_criterion(self.log_likelihood, self.parameters, len(self.coupons))

    @property
    def values(self) -> dict[str, float]:
        """Parameters by name."""
        return dict(zip(self.names, self.best.point.tolist(), strict=True))

    @property
    def scatter(self) -> float:
        """Scale of log10 N, at the middle stress of each K_t where it grows."""
        return float(np.exp(self.best.point[-2]))

    @property
    def freedom_factor(self) -> float:
        """Factor that takes the likelihood's scatter, too small by the constants it was given, to that of n - p."""
        failures = int(self.coupons.failed.sum())
        left = failures - (self.parameters - 1)
        return float(np.sqrt(failures / left)) if left > 0 else 1.0

    @property
    def constants(self) -> Array:
        """A1 to A4 by K_t, shape (K, 4), for the location of the law [MPa]."""
        return self.best.point[self.place]

    @property
    def members(self) -> tuple[Member, ...]:
        """Median curves by rising K_t."""
        shift = MEDIAN_Z[self.model.law] * self.scatter
        corrected = self.scatter * self.freedom_factor
        return tuple(
            Member(float(kt), float(a1 + shift), float(a2), float(a3), float(a4), scatter_log10=corrected)
            for kt, (a1, a2, a3, a4) in zip(self.kts, self.constants, strict=True)
        )

    def location(self) -> Array:
        """Return the fitted location of log10 N of every test, infinite at and below A4."""
        a1, a2, a3, a4 = self.constants[np.searchsorted(self.kts, self.coupons.kt)].T
        excess = self.coupons.top * (1.0 - self.coupons.ratio) ** a3 - a4
        return np.where(excess > 0, a1 + a2 * np.log10(np.where(excess > 0, excess, 1.0)), np.inf)

    def residuals(self) -> Array:
        """Return (log N - location)/s of every test; a run-out's is a lower bound."""
        return np.asarray((self.coupons.log_life - self.location()) / self.scatters())

    def scatters(self) -> Array:
        """Return the scale of log10 N at every test."""
        return np.asarray(np.exp(self.best.point[-2] - self.best.point[-1] * relative_stress(self.coupons, self.kts)))

    def covariance(self) -> Array:
        """Return the parameters' covariance by the curvature of the likelihood, 0 where a bound holds."""
        free = self.best.free
        out = np.zeros((len(self.names), len(self.names)))
        out[np.ix_(free, free)] = np.linalg.pinv(-self.best.hessian[np.ix_(free, free)])
        return out

    def median_band(self, kt: float, equivalent: Array) -> tuple[Array, Array]:
        """Return the median log10 N of a K_t and its standard error by the delta method.

        Parameters
        ----------
        kt : float
            One of the family's.
        equivalent : ndarray
            Seq [MPa]; infinite life at and below A4.
        """
        k = int(np.searchsorted(self.kts, kt))
        member = self.members[k]
        excess = np.asarray(equivalent, dtype=np.float64) - member.a4
        log_excess = np.log10(np.where(excess > 0, excess, np.nan))
        # at given Seq: A3 enters through the stress, not through the curve
        slopes = np.zeros((excess.size, len(self.names)))
        slopes[:, self.place[k, 0]] = 1.0
        slopes[:, self.place[k, 1]] = log_excess
        slopes[:, self.place[k, 3]] = -member.a2 / (LN10 * np.where(excess > 0, excess, np.nan))
        slopes[:, -2] = MEDIAN_Z[self.model.law] * self.scatter
        return member.log_life(equivalent), np.sqrt(np.einsum("ij,jk,ik->i", slopes, self.covariance(), slopes))

    def intervals(self, level: float = 0.95) -> dict[str, Interval]:
        """Return the profile-likelihood interval of every parameter that is fitted; ``s`` itself, not its log.

        The ends of ``s`` carry `freedom_factor`: without it 48 tests' 95 % intervals held the scatter 91 times in 100.
        """
        found: dict[str, Interval] = {}
        for i in np.flatnonzero(self.lower < self.upper):
            one = profile_interval(self.objective, self.best, int(i), self.lower, self.upper, level)
            if self.names[i] == "log s":
                more = self.freedom_factor
                one = replace(one, low=more * float(np.exp(one.low)), high=more * float(np.exp(one.high)))
            found[self.names[i].replace("log s", "s")] = one
        return found


def small_sample_criterion(log_likelihood: float, parameters: int, tests: int) -> float:
    """Return AICc = 2k - 2 log L + 2k(k+1)/(n-k-1); infinite where n leaves no room.

    References
    ----------
    Hurvich and Tsai 1989; key ``hurvich-tsai-1989``.
    """
    room = tests - parameters - 1
    if room <= 0:
        return float("inf")
    return 2.0 * parameters - 2.0 * log_likelihood + 2.0 * parameters * (parameters + 1) / room


def fit_family(coupons: Coupons, model: Model | None = None) -> FamilyFit:
    """Fit a family to test results with run-outs by maximum likelihood.

    Parameters
    ----------
    coupons : Coupons
    model : Model, optional
        The handbook form with constant lognormal scatter and one A3 unless said otherwise.

    Returns
    -------
    FamilyFit

    Raises
    ------
    InputFaults
        If the tests cannot tell the model's parameters, or the curve would rise.

    References
    ----------
    Nelson 1984, Pascual and Meeker 1997 for censored fatigue lives; keys ``nelson-1984``, ``pascual-meeker-1997``.
    """
    model = model or Model()
    if np.unique(coupons.ratio).size == 1 and model.exponent is None:
        model = replace(model, exponent=USUAL_EXPONENT)
    faults = list(test_faults(coupons, model))
    if faults:
        raise InputFaults(coupons.source, faults)
    kts = np.unique(coupons.kt)
    layout = layout_of(kts, model)
    objective = objective_of(coupons, kts, layout, model.law)
    tried = []
    for a1, a2, a3, a4, s in starting_points(coupons, kts, model.form, model.exponent):
        start = np.zeros(len(layout.names))
        for column, values in enumerate((a1, a2, np.full(kts.size, a3), a4)):
            start[layout.place[:, column]] = values
        start[-2] = np.log(s)
        tried.append(maximise(objective, start, layout.lower, layout.upper))
    best = max(tried, key=lambda found: found.value)
    fit = FamilyFit(model, coupons, kts, layout.names, layout.place, layout.lower, layout.upper, best, objective)
    rising = [kt for kt, constants in zip(kts, fit.constants, strict=True) if constants[1] >= SHALLOWEST]
    if rising or not best.converged:
        words = [f"K_t {kt:g}: life does not fall with stress: the curve would rise or be flat." for kt in rising]
        hint = "Look for swapped columns or units; widen the span of stresses tested."
        plain = [Fault("", text, hint) for text in words]
        raise InputFaults(coupons.source, plain or [Fault("", "the fit does not settle.", "Try the power law.")])
    return fit


def test_faults(coupons: Coupons, model: Model) -> Iterator[Fault]:
    """Yield what keeps tests from telling a model's parameters."""
    constants = 3 if model.form == "handbook" else 2
    if model.law == "weibull" and model.scatter == "growing":
        yield Fault("", "growing scatter is fitted with the lognormal law only.", "Choose one.")
    if not coupons.failed.any():
        yield Fault("", f"all {len(coupons)} tests are run-outs: nothing failed, no curve follows.", "Test higher.")
        return
    for kt in np.unique(coupons.kt):
        own = coupons.only(coupons.kt == kt)
        failures = int(own.failed.sum())
        if failures < constants + 2:
            yield Fault(
                f"K_t {kt:g}",
                f"{failures} failure{'s' if failures != 1 else ''} among {len(own)} tests; the {model.form} form needs "
                f"at least {constants + 2}.",
                "Add tests, or fit the power law." if model.form == "handbook" else "Add tests.",
            )
            continue
        levels = np.unique(np.round(own.top[own.failed], 9)).size
        if levels < constants:
            yield Fault(
                f"K_t {kt:g}",
                f"failures at {'one stress' if levels == 1 else f'{levels} stresses'} only; the {model.form} form "
                f"needs {constants} different ones.",
                "Test at other stresses" + (", or fit the power law." if model.form == "handbook" else "."),
            )
    ratios = np.unique(np.round(coupons.ratio, 9))
    if ratios.size > 1 and model.exponent == 0.0:
        told = listed([f"{r:g}" for r in ratios[:4]], "and")
        yield Fault(
            "ratio", f"S_max alone (A3 = 0) cannot take tests at R {told} together.", "Fit A3, or keep to one R."
        )

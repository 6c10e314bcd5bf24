"""Which model the tests speak for: all that can be fitted, by information criterion, with the reasons in words."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from fatigue.material.coupons import Coupons
from fatigue.material.family_fit import FamilyFit, fit_family
from fatigue.material.family_model import FORMS, SCATTERS, Model
from fatigue.material.fatigue_limit import FatigueLimitFamily, fit_fatigue_limit
from spectra.faults import Fault, InputFaults

ALIKE = 2.0
"""Difference of the criterion below which two models are not told apart and the one with fewer parameters is kept
(Burnham and Anderson 2002; key ``burnham-anderson-2002``)."""


@dataclass(frozen=True, eq=False)
class Candidate:
    """A model that was tried.

    Parameters
    ----------
    words : str
    fit : FamilyFit or FatigueLimitFamily or None
        None where the tests cannot tell its parameters.
    faults : tuple of Fault
        Why there is no fit.
    """

    words: str
    fit: FamilyFit | FatigueLimitFamily | None
    faults: tuple[Fault, ...] = ()

    @property
    def aicc(self) -> float:
        """Information criterion, infinite without a fit."""
        return self.fit.aicc if self.fit is not None else float("inf")


@dataclass(frozen=True, eq=False)
class Choice:
    """What was tried and what was taken.

    Parameters
    ----------
    candidates : tuple of Candidate
        Best first.
    taken : Candidate
        With a `FamilyFit`: the form a curve file holds.
    reasons : tuple of str
        Why, in sentences.
    """

    candidates: tuple[Candidate, ...]
    taken: Candidate
    reasons: tuple[str, ...]

    @property
    def fit(self) -> FamilyFit:
        """The fit taken."""
        assert isinstance(self.taken.fit, FamilyFit)
        return self.taken.fit


def choose(
    coupons: Coupons,
    *,
    form: str | None = None,
    scatter: str | None = None,
    exponent: float | None = None,
    fatigue_limit: bool = True,
) -> Choice:
    """Fit every model the tests allow and take the one they speak for.

    Parameters
    ----------
    coupons : Coupons
    form, scatter : str, optional
        Tried alone where given.
    exponent : float, optional
        A3 where it is held.
    fatigue_limit : bool
        Whether the random fatigue-limit model is fitted beside. It is never taken, since a curve file holds the
        handbook form; where it is the better one the reasons say so.

    Raises
    ------
    InputFaults
        If no model can be fitted: the faults of the simplest, which is tried last.
    """
    tried = [_candidate(coupons, model) for model in _models(coupons, form, scatter, exponent)]
    families = [one for one in tried if one.fit is not None]
    if not families:
        raise InputFaults(coupons.source, tried[-1].faults)
    least = min(one.aicc for one in families)
    near = [one for one in families if one.aicc <= least + ALIKE]
    taken = min(near, key=lambda one: (one.fit.parameters if one.fit else 0, one.aicc))
    if fatigue_limit:
        tried.append(_fatigue_limit(coupons, taken))
    ranked = tuple(sorted(tried, key=lambda one: one.aicc))
    return Choice(ranked, taken, tuple(_reasons(ranked, taken)))


def _models(coupons: Coupons, form: str | None, scatter: str | None, exponent: float | None) -> Iterator[Model]:
    kts = np.unique(coupons.kt)
    several = all(np.unique(coupons.ratio[coupons.kt == kt]).size > 1 for kt in kts)
    for own in FORMS if form is None else (form,):
        for law in reversed(SCATTERS) if scatter is None else (scatter,):
            if kts.size > 1 and several and exponent is None:
                yield Model(own, law, shared_exponent=False)
            yield Model(own, law, exponent=exponent)


def model_words(model: Model, families: int = 1) -> str:
    """Say a model in words.

    >>> model_words(Model("power", "growing"))
    'power law, scatter growing'
    """
    form = "handbook form" if model.form == "handbook" else "power law"
    exponents = ", A3 by K_t" if families > 1 and not model.shared_exponent else ""
    return f"{form}, scatter {model.scatter}{exponents}"


def _candidate(coupons: Coupons, model: Model) -> Candidate:
    words = model_words(model, np.unique(coupons.kt).size)
    try:
        return Candidate(words, fit_family(coupons, model))
    except InputFaults as error:
        return Candidate(words, None, error.faults)


def _fatigue_limit(coupons: Coupons, taken: Candidate) -> Candidate:
    words = "random fatigue limit"
    assert isinstance(taken.fit, FamilyFit)
    fit = taken.fit
    try:
        fits = tuple(
            fit_fatigue_limit(coupons.only(coupons.kt == kt), float(a3))
            for kt, a3 in zip(fit.kts, fit.constants[:, 2], strict=True)
        )
    except InputFaults as error:
        return Candidate(words, None, error.faults)
    held = fit.model.exponent is not None
    return Candidate(words, FatigueLimitFamily(fits, 0 if held else len(set(fit.constants[:, 2].tolist()))))


def _reasons(ranked: tuple[Candidate, ...], taken: Candidate) -> Iterator[str]:
    fit = taken.fit
    assert isinstance(fit, FamilyFit)
    tests, stopped = len(fit.coupons), int((~fit.coupons.failed).sum())
    yield (
        f"{tests} tests, {stopped} of them run-outs, taken as lives that were not reached. "
        f"Taken: {taken.words}, {fit.parameters} parameters, AICc {taken.aicc:.1f}."
    )
    for one in ranked:
        if one is taken:
            continue
        if one.fit is None:
            yield f"{one.words}: not fitted. {' '.join(map(str, one.faults))}"
            continue
        apart = one.aicc - taken.aicc
        if not np.isfinite(apart):
            yield f"{one.words}: {one.fit.parameters} parameters are too many for {tests} tests."
        elif isinstance(one.fit, FatigueLimitFamily):
            yield _limit_words(one.words, apart)
        elif apart < 0.0:
            yield (
                f"{one.words}: {-apart:.1f} better, which is too little to tell; the one with fewer parameters is kept."
            )
        elif apart <= ALIKE:
            yield f"{one.words}: {apart:.1f} worse: the tests hardly tell the two apart."
        else:
            yield f"{one.words}: {apart:.1f} worse{_why(one.fit, fit)}."
    floors = [kt for kt, constants in zip(fit.kts, fit.constants, strict=True) if constants[3] == 0.0]
    if fit.model.form == "handbook" and floors:
        yield "A4 came out 0 at K_t " + ", ".join(f"{kt:g}" for kt in floors) + ": no sign of an asymptote there."
    if fit.model.exponent is not None and np.unique(fit.coupons.ratio).size == 1:
        yield (
            f"All tests are at R {fit.coupons.ratio[0]:g}: A3 is not told by them and held at {fit.model.exponent:g}; "
            "other stress ratios rest on it."
        )


def _why(other: FamilyFit, taken: FamilyFit) -> str:
    if other.model.form != taken.model.form:
        return ": the long lives bend the curve" if other.model.form == "power" else ": the lives show no asymptote"
    if other.model.scatter != taken.model.scatter:
        return ": the scatter changes with stress" if other.model.scatter == "constant" else ": the scatter is even"
    return ": the K_t differ in A3" if other.model.shared_exponent else ": one A3 serves all K_t"


def _limit_words(words: str, apart: float) -> str:
    if apart < -ALIKE:
        return (
            f"{words}: {-apart:.1f} better: specimens seem to have limits of their own. A curve file holds the "
            "handbook form, so that is what is written; mind the long lives."
        )
    if apart <= ALIKE:
        return f"{words}: the tests do not tell it apart ({apart:+.1f})."
    return f"{words}: {apart:.1f} worse: no need for a limit that differs from specimen to specimen."

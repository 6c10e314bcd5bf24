"""From a file of test results to a curve file that a case can use: what `faying fit` does, without the printing."""

from __future__ import annotations

import math
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from fatigue.material.coupons import Coupons, read_coupons
from fatigue.material.curve_file import family_text, parse_family
from fatigue.material.curves import CurveFamily
from fatigue.material.family_fit import FamilyFit
from fatigue.material.fit_choice import Choice, choose
from fatigue.material.least_squares import StraightLine, straight_line
from fatigue.material.maximise import Interval
from fatigue.material.members import Member, out_of_order
from spectra.faults import Fault, InputFaults

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class FittedTests:
    """Everything a fit has to say.

    Parameters
    ----------
    coupons : Coupons
    choice : Choice
        Models tried, the one taken and why.
    intervals : dict of Interval
        Profile-likelihood interval of every fitted parameter, by its name.
    level : float
        Of the intervals.
    lines : dict of StraightLine
        Least squares of the failures after ASTM E739 by K_t, log10 N against `line_stress`; empty where impossible.
    line_exponent : float
        A3 of that stress; 0 is S_max itself.
    raw : dict
        Tables of the curve file.
    """

    coupons: Coupons
    choice: Choice
    intervals: dict[str, Interval]
    level: float
    lines: dict[float, StraightLine]
    line_exponent: float
    raw: dict[str, Any]

    @property
    def fit(self) -> FamilyFit:
        """The fit taken."""
        return self.choice.fit

    @property
    def text(self) -> str:
        """The curve file."""
        return family_text(self.raw)

    @property
    def family(self) -> CurveFamily:
        """The curve file as a case reads it."""
        return parse_family(self.raw, self.raw["name"], _no_family)


def fit_tests(
    path: str | Path,
    *,
    name: str | None = None,
    alloy: str = "not said",
    kt: float | None = None,
    form: str | None = None,
    scatter: str | None = None,
    exponent: float | None = None,
    level: float = 0.95,
    fatigue_limit: bool = True,
) -> FittedTests:
    """Fit an S-N family to a file of test results.

    Parameters
    ----------
    path : str or Path
        CSV, see `fatigue.material.coupons.read_coupons`.
    name : str, optional
        Of the family; the file's name unless given.
    alloy : str
    kt : float, optional
        Of all coupons, where there is no such column.
    form, scatter : str, optional
        ``handbook`` or ``power``, ``constant`` or ``growing``; chosen by information criterion unless given.
    exponent : float, optional
        A3 where it is held.
    level : float
        Of the intervals.
    fatigue_limit : bool
        Whether the random fatigue-limit model is tried beside.

    Returns
    -------
    FittedTests

    Raises
    ------
    InputFaults
        If the file is at fault, the tests are too few or say too little, or the members cross where tested.
    """
    coupons = read_coupons(path, kt)
    return fit_coupons(
        coupons,
        name=name or Path(path).stem,
        alloy=alloy,
        form=form,
        scatter=scatter,
        exponent=exponent,
        level=level,
        fatigue_limit=fatigue_limit,
    )


def fit_coupons(
    coupons: Coupons,
    *,
    name: str,
    alloy: str = "not said",
    form: str | None = None,
    scatter: str | None = None,
    exponent: float | None = None,
    level: float = 0.95,
    fatigue_limit: bool = True,
) -> FittedTests:
    """Fit an S-N family to test results already read; parameters as in `fit_tests`."""
    choice = choose(coupons, form=form, scatter=scatter, exponent=exponent, fatigue_limit=fatigue_limit)
    fit = choice.fit
    cycles = (float(coupons.cycles[coupons.failed].min()), float(coupons.cycles.max()))
    faults = [
        Fault(
            "",
            f"the fitted curves of K_t {one.lower:g} and {one.upper:g} cross at {10**one.log_life:.3g} cycles, within "
            f"the tests: the sharper notch would stand more stress.",
            "Fit them with one A3 or the power law, add tests, or fit each K_t by itself.",
        )
        for one in out_of_order(fit.members, math.log10(cycles[0]), math.log10(cycles[1]))
    ]
    if faults:
        raise InputFaults(coupons.source, faults)
    intervals = fit.intervals(level)
    mixed = np.unique(coupons.ratio).size > 1
    line_exponent = float(fit.constants[:, 2].mean()) if mixed else 0.0
    return FittedTests(
        coupons=coupons,
        choice=choice,
        intervals=intervals,
        level=level,
        lines=_lines(coupons, fit, line_exponent, level),
        line_exponent=line_exponent,
        raw=_tables(coupons, choice, intervals, level, name, alloy, cycles),
    )


def line_stress(coupons: Coupons, exponent: float) -> Array:
    """Return log10 of S_max (1-R)^A3 of every test, what the straight line is fitted against [MPa]."""
    return np.asarray(np.log10(coupons.top * (1.0 - coupons.ratio) ** exponent))


def _lines(coupons: Coupons, fit: FamilyFit, exponent: float, level: float) -> dict[float, StraightLine]:
    lines = {}
    for kt in fit.kts:
        own = (coupons.kt == kt) & coupons.failed
        x = line_stress(coupons, exponent)[own]
        if own.sum() >= 3 and np.ptp(x) > 0.0:
            lines[float(kt)] = straight_line(x, coupons.log_life[own], level, groups=np.round(x, 6))
    return lines


def _tables(
    coupons: Coupons,
    choice: Choice,
    intervals: dict[str, Interval],
    level: float,
    name: str,
    alloy: str,
    cycles: tuple[float, float],
) -> dict[str, Any]:
    fit = choice.fit
    stopped = int((~coupons.failed).sum())
    notes = [*choice.reasons]
    for parameter, interval in intervals.items():
        ends = [f"{'' if not open_ else 'beyond '}{end:.4g}" for end, open_ in _ends(interval)]
        unit = "" if parameter in ("s", "growth") or parameter.startswith("A3") else ", for MPa"
        notes.append(f"{parameter}: {100 * level:g} % profile-likelihood interval {ends[0]} to {ends[1]}{unit}")
    return {
        "name": name,
        "alloy": alloy,
        "source": f"{Path(coupons.source).name}, SHA-256 {coupons.digest[:16]}",
        "how": f"fitted by censored maximum likelihood, {choice.taken.words}, lognormal: {len(coupons)} tests, "
        f"{stopped} run-outs",
        "notes": notes,
        "stress_unit": "MPa",
        "tested_cycles": [float(f"{n:.6g}") for n in cycles],
        "tested_ratio": [float(coupons.ratio.min()), float(coupons.ratio.max())],
        "member": [_entry(member, coupons) for member in fit.members],
    }


def _entry(member: Member, coupons: Coupons) -> dict[str, Any]:
    own = coupons.kt == member.kt
    return {
        "kt": member.kt,
        "A1": round(member.a1, 6),
        "A2": round(member.a2, 6),
        "A3": round(member.a3, 6),
        "A4": round(member.a4, 6),
        "scatter_log10": round(float(member.scatter_log10 or 0.0), 6),
        "tests": int(own.sum()),
        "run_outs": int((~coupons.failed[own]).sum()),
    }


def _ends(interval: Interval) -> tuple[tuple[float, bool], tuple[float, bool]]:
    return (interval.low, interval.low_open), (interval.high, interval.high_open)


def _no_family(name: str) -> CurveFamily:
    raise KeyError(name, ())

"""Checks of S-N curves, mean stress, strain life, fits and statistics, and of the chain as a whole."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache, partial
from importlib import resources
from pathlib import Path

import numpy as np

import fatigue
from fatigue.material import mean_stress
from fatigue.material.least_squares import StraightLine, line_through_origin, straight_line
from fatigue.material.library import family, strain_life
from fatigue.material.life_sample import fit_lives
from fatigue.material.strain import life_at_strain
from fatigue.scatter import first_of_many_factor
from reports.evidence.check import Check, Checks
from spectra.units import to_si

E739 = (
    (0.01636, 168), (0.01609, 200), (0.00675, 1000), (0.00682, 1180), (0.00179, 4730),
    (0.00160, 8035), (0.00165, 5254), (0.00053, 28617), (0.00054, 32650),
)  # fmt: skip
"""Plastic strain amplitude and cycles."""
LAP = """
title = "plausibility lap (invented)"
[loads]
blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]
[splice]
kind = "lap"
pitch_mm = 20.0
row_spacing_mm = 20.0
free_length_mm = 150.0
[[sheet]]
name = "upper"
material = "2024-T3 bare sheet"
thickness_mm = 1.2
[[sheet]]
name = "lower"
material = "2024-T3 bare sheet"
thickness_mm = 1.2
[[row]]
name = "A"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[[row]]
name = "B"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[[row]]
name = "C"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[hole.driven]
fit_percent = 0.3
practice = { hole = 1.0, filling = 0.75 }
[life]
credit = "practice"
"""


def _log_life(name: str, kt: float, top_ksi: float, ratio: float) -> float:
    high = np.array([[top_ksi * kt * to_si(1.0, "ksi")]])
    return float(np.log10(family(name).at([kt]).life(ratio * high, high)[0, 0]))


@cache
def _e739() -> StraightLine:
    strain, cycles = np.array(E739).T
    return straight_line(np.log10(strain), np.log10(cycles))


def column(name: str) -> np.ndarray:
    """Return the numbers of a stored table."""
    text = resources.files("reports.evidence").joinpath(f"data/{name}").read_text(encoding="utf-8")
    return np.array([[float(cell) for cell in line.split(",")] for line in text.splitlines()[1:]])


@cache
def _norris() -> StraightLine:
    y, x = column("norris.csv").T
    return straight_line(x, y)


@cache
def _through_origin() -> tuple[float, float, float]:
    return line_through_origin(np.arange(60.0, 71.0), np.arange(130.0, 141.0))


def lives_1969() -> np.ndarray:
    """Return the lives of 101 coupons of 6061-T6 at 21 ksi [thousands of cycles]."""
    return column("lives_6061_t6.csv")[:, 0]


@cache
def _lap() -> fatigue.Estimate:
    return fatigue.estimate(fatigue.parse_case(LAP, "plausibility lap", Path()))


def _outer_row_first() -> float:
    return float(_lap().rows.iloc[0]["row"] in ("A", "C"))


def checks() -> list[Check]:
    """Return the checks of curves, lives and statistics."""
    found = Checks()
    add = found.add

    for name, kt, top, ratio, printed in (
        ("2024-T3 sheet", 1.0, 40.0, 0.0, "5.60625"),
        ("2024-T3 sheet", 2.0, 25.0, 0.1, "5.73591"),
        ("7075-T6 sheet", 2.0, 20.0, -1.0, "4.98997"),
    ):
        what = f"{name}, K_t {kt:g}, {top:g} ksi, R {ratio:g}: log N"
        add("S-N curves", what, printed, partial(_log_life, name, kt, top, ratio), "mil-hdbk-5j")
    steps = (("0.01", "522", 0.5), ("0.005", "1.050e4", 5.0), ("0.003", "2.83e5", 500.0))
    for strain, printed, within in steps:
        add("strain life", f"2024-T351 at {strain}", printed, partial(_at_strain, float(strain)), "coffin-1954",
            unit="cycles", within=within, reason="half a unit in the last digit")  # fmt: skip
    amplitudes: tuple[tuple[str, str, Callable[[], object], str], ...] = (
        ("Goodman", "112.500", lambda: mean_stress.goodman(100.0, 50.0, 450.0), "goodman-1899"),
        ("Gerber", "101.250", lambda: mean_stress.gerber(100.0, 50.0, 450.0), "gerber-1874"),
        ("Morrow", "104.762", lambda: mean_stress.morrow(100.0, 50.0, 1100.0), "morrow-1968"),
        ("Smith, Watson, Topper", "122.474", lambda: mean_stress.smith_watson_topper(100.0, 50.0),
         "smith-watson-topper-1970"),
        ("Walker, 0.56", "119.531", lambda: mean_stress.walker(100.0, 50.0, 0.56), "walker-1970"),
    )  # fmt: skip
    for what, printed, amplitude, source in amplitudes:
        add("mean stress", f"{what}: amplitude 100, mean 50", printed, amplitude, source, unit="MPa")
    for what, printed, compute in (
        ("A", "-0.24474", lambda: _e739().intercept),
        ("B", "-1.45144", lambda: _e739().slope),
        ("s^2", "0.011195", lambda: _e739().variance),
        ("B, lower end of 95 %", "-1.6055", lambda: _e739().slope_interval[0]),
        ("B, upper end of 95 %", "-1.2974", lambda: _e739().slope_interval[1]),
    ):
        add("fits", f"standard worked example: {what}", printed, compute, "astm-e739", how="memory")
    nist = "nist-strd"
    for what, printed, compute in (
        ("Norris: intercept", "-0.262323073774029", lambda: _norris().intercept),
        ("Norris: slope", "1.00211681802045", lambda: _norris().slope),
        ("Norris: error of the intercept", "0.232818234301152", lambda: _norris().intercept_error),
        ("Norris: error of the slope", "0.000429796848199937", lambda: _norris().slope_error),
        ("Norris: residual deviation", "0.884796396144373", lambda: float(np.sqrt(_norris().variance))),
        ("NoInt1: slope", "2.07438016528926", lambda: _through_origin()[0]),
        ("NoInt1: error of the slope", "0.0165289256198347", lambda: _through_origin()[1]),
        ("NoInt1: residual deviation", "3.56753034006338", lambda: _through_origin()[2]),
    ):
        within = 1e-11 * abs(float(printed))
        add("fits", f"certified regression, {what}", printed, compute, nist, how="memory", within=within,
            reason="eleven digits of fifteen: double precision")  # fmt: skip
    coupons, study = "101 lives of 6061-T6", "birnbaum-saunders-1969"
    for what, printed, compute in (
        ("scatter of log10 N", "0.13288", lambda: np.log10(lives_1969()).std(ddof=1)),
        ("Weibull shape", "3.946", lambda: fit_lives(lives_1969(), law="weibull").weibull_shape),
        ("Weibull scale, kcycles", "1545.96", lambda: fit_lives(lives_1969(), law="weibull").weibull_scale),
    ):
        add("fits", f"{coupons}: {what}", printed, compute, study, how="read")
    add("scatter", "scatter 0.14, 99.9 %, one article, sigma known", "4.091",
        lambda: 1 / (float(first_of_many_factor(0.999, 1, 0.14 * np.sqrt(2)))), "weakest-link")  # fmt: skip
    add("scatter", "median of the first of 20, lognormal 0.15, over one hole's", "0.5326",
        lambda: float(first_of_many_factor(0.5, 20, 0.15)), "weakest-link")  # fmt: skip
    plausible = "common practice, no source"
    add("whole chain", "three-row lap 1.2 mm at 0-95 MPa: an outer row goes first (1 = yes)", "1", _outer_row_first,
        plausible, how="practice", within=0.0, reason="yes or no")  # fmt: skip
    add("whole chain", "the same lap's life with practice credit", "1e5",
        lambda: _lap().rows["life_practice_flights"].min(), plausible, how="practice", unit="flights", upto="1e6",
        within=0.0, reason="a range")  # fmt: skip
    return found


def _at_strain(amplitude: float) -> float:
    return float(life_at_strain(amplitude, strain_life("2024-T351")))

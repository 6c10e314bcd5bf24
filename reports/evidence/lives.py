"""Checks of S-N curves, mean stress, strain life, fits and statistics, and of the chain as a whole."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache, partial
from pathlib import Path

import numpy as np

import fatigue
from fatigue.material import mean_stress
from fatigue.material.least_squares import StraightLine, straight_line
from fatigue.material.library import family, strain_life
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

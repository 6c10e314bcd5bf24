"""A fitted S-N family as text and files."""

from __future__ import annotations

import re
from pathlib import Path
from textwrap import wrap

import numpy as np
import pandas as pd

from fatigue.material.fit import FittedTests
from fatigue.material.maximise import Interval
from reports.comparison import aligned
from reports.figures.fit import fit_figure
from reports.figures.style import save
from reports.tables import csv_text
from reports.writing import write_files


def fit_text(found: FittedTests) -> str:
    """Return what was chosen and why, the constants with their intervals, and the straight line beside."""
    fit = found.fit
    lines = [f"{found.raw['name']}: {found.raw['how']}", ""]
    for reason in found.choice.reasons:
        lines += wrap(reason, 108, initial_indent="  ", subsequent_indent="    ")
    lines += ["", "Curves: log10 N = A1 + A2 log10(Seq - A4), Seq = S_max (1-R)^A3 in MPa, net stress"]
    cells = [
        (
            f"{member.kt:g}",
            f"{member.a1:.4f}",
            f"{member.a2:.4f}",
            f"{member.a3:.4f}",
            f"{member.a4:.3f}",
            f"{member.scatter_log10 or 0:.3f}",
        )
        for member in fit.members
    ]
    lines += aligned(("K_t", "A1", "A2", "A3", "A4", "s of log N"), cells)
    lines += ["", f"{100 * found.level:g} % profile-likelihood intervals"]
    ends = [(name, _end(own, "low"), _end(own, "high")) for name, own in found.intervals.items()]
    lines += aligned(("", "from", "to"), ends, left=(0,))
    if found.lines:
        lines += ["", *_line_text(found)]
    return "\n".join(lines)


def _end(interval: Interval, name: str) -> str:
    value = getattr(interval, name)
    return f"beyond {value:.4g}" if getattr(interval, f"{name}_open") else f"{value:.4g}"


def _line_text(found: FittedTests) -> list[str]:
    stress = "S_max" if found.line_exponent == 0 else f"S_max (1-R)^{found.line_exponent:.3g}"
    lines = [f"Beside it, ASTM E739: least squares of the failures only, log10 N = A + B log10 {stress}"]
    for kt, line in found.lines.items():
        low, high = line.slope_interval
        lines.append(
            f"  K_t {kt:g}: A {line.intercept:.4f}, B {line.slope:.4f} "
            f"({100 * line.level:g} % {low:.3f} to {high:.3f}), s {np.sqrt(line.variance):.3f}, {line.tests} failures"
        )
        if line.lack_of_fit is None:
            lines.append("    straightness not tested: too few repeated levels")
        else:
            check = line.lack_of_fit
            verdict = "not refused" if check.straight else "refused: the line bends"
            lines.append(f"    straightness {verdict} (F {check.ratio:.2f}, limit {check.limit:.2f} at 5 %)")
    return lines


def residual_frame(found: FittedTests) -> pd.DataFrame:
    """Return every test with its fitted life and standardised residual; a run-out's is a lower bound."""
    coupons, fit = found.coupons, found.fit
    return pd.DataFrame(
        {
            "kt": coupons.kt,
            "max_MPa": coupons.top,
            "ratio": coupons.ratio,
            "cycles": coupons.cycles,
            "run_out": np.where(coupons.failed, "no", "yes"),
            "fitted_cycles": 10 ** np.minimum(fit.location(), 300.0),
            "residual": fit.residuals(),
        }
    )


def write_fit(found: FittedTests, folder: Path) -> list[Path]:
    """Write the curve file, the tests with their residuals, and the figure."""
    stem = re.sub(r"[^\w.-]+", "-", str(found.raw["name"])).strip("-.") or "curve"
    figure = fit_figure(found)

    def fill(place: Path) -> None:
        (place / f"{stem}.toml").write_text(found.text, encoding="utf-8")
        (place / "residuals.csv").write_text(csv_text(residual_frame(found)), encoding="utf-8")
        for suffix in (".svg", ".png"):
            save(figure, place / f"fit{suffix}")

    return write_files(folder, fill)

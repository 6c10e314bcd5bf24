"""What a report sets beside an estimate: other fits, other hole conditions, other flexibility formulas."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import pandas as pd

from fatigue.fits import FitCurves, compare_conditions, fit_curves
from fatigue.formulas import lives_by_formula
from fatigue.life import Estimate


@dataclass(frozen=True, eq=False)
class Beside:
    """Estimates of the same splice under other assumptions.

    Parameters
    ----------
    fits : FitCurves
        Life against fit.
    conditions : DataFrame
        Of `compare_conditions`.
    formulas : DataFrame
        Of `lives_by_formula`.
    """

    fits: FitCurves
    conditions: pd.DataFrame
    formulas: pd.DataFrame


def set_beside(estimate: Estimate, on_progress: Callable[[int, int], None] | None = None) -> Beside:
    """Compute what stands beside an estimate in its report."""
    return Beside(
        fits=fit_curves(estimate, on_progress=on_progress),
        conditions=compare_conditions(estimate),
        formulas=lives_by_formula(estimate),
    )

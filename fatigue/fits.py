"""What a splice's life owes to its fits: hole conditions side by side, and life against fit."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from fatigue.damage import shortest
from fatigue.filled import filled_holes, governing_point
from fatigue.hole.kinds import COMPARED_FITS, CONDITIONS, Condition, fastener_kinds
from fatigue.life import Estimate, route_result
from fatigue.splice import Splice

Array = NDArray[np.float64]

KINDS_SPAN = ("loosest", "tightest")
MOST_SOLUTIONS = 600
"""Fits times locations from which on fewer fits are computed."""
FIT_STEPS = 31
"""Fits the curve of life against fit is computed at."""


@dataclass(frozen=True, eq=False)
class FitCurves:
    """Life of every location against the fit of all holes, by route `contact`.

    Parameters
    ----------
    fit_percent : ndarray, shape (f,)
        Interference, percent of the hole; negative is clearance.
    life : ndarray, shape (f, L)
        [flights]
    pressing_percent : ndarray, shape (f, L)
        Fit of an elastic pin that presses as hard: less where the hole yields.
    closed : ndarray of bool, shape (f, L)
        Whether contact is kept all round at every load.
    residual_left : ndarray, shape (f, L)
        Residual stress at the governing point after the first block [MPa].
    angle : ndarray, shape (f, L)
        Governing point of the edge [deg].
    practice : ndarray, shape (L,)
        Life by route `practice` [flights].
    practice_fit : ndarray, shape (L,)
        Fit from which the solved life is at least that of `practice`; NaN where no fit in the span gives it [percent].
    """

    fit_percent: Array
    life: Array
    pressing_percent: Array
    closed: NDArray[np.bool_]
    residual_left: Array
    angle: Array
    practice: Array
    practice_fit: Array


def with_fit(splice: Splice, fit: float, cold_expansion: float | None = None) -> Splice:
    """Return a splice with the same fit in every hole.

    Parameters
    ----------
    splice : Splice
    fit : float
        Interference over the diameter.
    cold_expansion : float, optional
        Mandrel expansion over the diameter; as it is if not given.
    """

    def made(row_hole_percent: float) -> float:
        return row_hole_percent if cold_expansion is None else 100 * cold_expansion

    return replace(
        splice,
        rows=tuple(
            replace(
                row,
                hole=replace(
                    row.hole,
                    fit_percent=100 * fit,
                    cold_expansion_percent=made(row.hole.cold_expansion_percent),
                ),
            )
            for row in splice.rows
        ),
    )


def kind_conditions() -> tuple[Condition, ...]:
    """Return the loosest and the tightest usual fit of every fastener kind as conditions, with the case's own pin."""
    return tuple(
        Condition(f"{kind.name}, {name}", fit, words=f"{kind.words}, {name} usual fit ({kind.fit_source})")
        for kind in fastener_kinds().values()
        for name, fit in zip(KINDS_SPAN, kind.usual_fit, strict=True)
    )


def compare_conditions(
    base: Estimate,
    conditions: Sequence[Condition] = CONDITIONS,
    on_progress: Callable[[int, int], None] | None = None,
) -> pd.DataFrame:
    """Return the life of a whole splice under each hole condition, the case as it is first.

    Parameters
    ----------
    base : Estimate
        Of the case as it is: its loads, joint and curves are shared.
    conditions : sequence of Condition
    on_progress : callable, optional

    Returns
    -------
    DataFrame
        One line per condition: `condition, fit_percent, cold_expansion_percent, row, sheet, angle_deg, life_flights,
        ratio_to_open, residual_left_MPa, words`, and the life of every location as `life_<row>_<sheet>_flights`.

    Examples
    --------
    >>> import fatigue
    >>> frame = compare_conditions(fatigue.estimate(fatigue.read_case(fatigue.demo_case())))
    >>> bool(frame.set_index("condition").loc["heavy interference", "ratio_to_open"] > 1)
    True
    """
    report = on_progress or (lambda done, total: None)
    splice = base.case.splice
    lines = [_line(base, splice, "as in the case", np.nan, np.nan, "as the case file says")]
    for number, condition in enumerate(conditions, start=1):
        changed = with_fit(splice, condition.fit, condition.cold_expansion)
        lines.append(_line(base, changed, condition.name, condition.fit, condition.cold_expansion, condition.words))
        report(number, len(conditions))
    frame = pd.DataFrame(lines)
    loose = frame.loc[frame["condition"] == "open", "life_flights"]
    ground = loose.iloc[0] if len(loose) else frame["life_flights"].iloc[1:].min()
    frame.insert(7, "ratio_to_open", frame["life_flights"] / ground)
    return frame


def _line(
    base: Estimate, splice: Splice, name: str, fit: float, cold_expansion: float, words: str
) -> dict[str, object]:
    life, angle, left, _, _ = _solved(base, splice)
    first = shortest(life)
    r, s = splice.locations[first]
    own = {
        f"life_{splice.rows[i].name}_{splice.sheets[j].name}_flights": value
        for (i, j), value in zip(splice.locations, life, strict=True)
    }
    return {
        "condition": name,
        "fit_percent": 100 * fit,
        "cold_expansion_percent": 100 * cold_expansion,
        "row": splice.rows[r].name,
        "sheet": splice.sheets[s].name,
        "angle_deg": angle[first],
        "life_flights": life[first],
        "residual_left_MPa": left[first],
        "words": words,
        **own,
    }


def _solved(base: Estimate, splice: Splice) -> tuple[Array, Array, Array, Array, NDArray[np.bool_]]:
    """Return life, governing angle, residual left, pressing fit and whether contact is kept, by route `contact`."""
    filled = filled_holes(splice, base.joint, base.local, credited_only=True)
    points = governing_point(filled.credited, base.local.levels, base.loads.cycles, base.curves)
    case = base.case
    result = route_result(
        points.peak, base.local.levels, base.loads, base.curves, case.life.damage_sum, case.loads.repeating
    )
    every = np.arange(points.way.size)
    left = np.stack([part.left for part in filled.settled], axis=1)[every, points.way, points.point]
    pressing = np.array([hole.fit for hole in filled.making])
    return result.life, filled.theta[points.point], left, pressing, ~filled.maps.separates


def fit_curves(
    base: Estimate,
    span: tuple[float, float] = COMPARED_FITS,
    steps: int = FIT_STEPS,
    on_progress: Callable[[int, int], None] | None = None,
) -> FitCurves:
    """Return life against fit for every location, all holes changing together.

    Parameters
    ----------
    base : Estimate
    span : tuple of float
        Interference over the diameter.
    steps : int
        Fewer, but at least 7, where the splice has very many locations.
    on_progress : callable, optional
    """
    steps = min(steps, max(7, MOST_SOLUTIONS // len(base.case.splice.locations)))
    report = on_progress or (lambda done, total: None)
    fits = np.unique(np.append(np.linspace(*span, steps), 0.0))
    solved = []
    for number, fit in enumerate(fits, start=1):
        solved.append(_solved(base, with_fit(base.case.splice, float(fit))))
        report(number, fits.size)
    life, angle, left, pressing, closed = (np.array(parts) for parts in zip(*solved, strict=True))
    practice = base.routes["practice"].life
    return FitCurves(
        fit_percent=100 * fits,
        life=life,
        pressing_percent=100 * pressing,
        closed=closed,
        residual_left=left,
        angle=angle,
        practice=practice,
        practice_fit=np.array([_reached(100 * fits, own, want) for own, want in zip(life.T, practice, strict=True)]),
    )


def _reached(fit: Array, life: Array, want: float) -> float:
    """Return the fit above the last one at which the life is still below the wanted one."""
    below = np.flatnonzero(life < want)
    if not below.size:
        return float(fit[0])
    k = int(below[-1])
    if k + 1 == fit.size or not np.isfinite(want) or not np.isfinite(life[k + 1]):
        return float("nan") if k + 1 == fit.size else float(fit[k + 1])
    share = np.log(want / life[k]) / np.log(life[k + 1] / life[k])
    return float(fit[k] + share * (fit[k + 1] - fit[k]))

"""How far the answer hangs on the formula for the fasteners' flexibility."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pandas as pd

from fatigue.joint import compare_flexibilities
from fatigue.life import Estimate, estimate


def lives_by_formula(base: Estimate) -> pd.DataFrame:
    """Return the governing location and its life under each flexibility formula, the case as it is first.

    Parameters
    ----------
    base : Estimate

    Returns
    -------
    DataFrame
        `formula, flexibility_mm_per_N` (mean of the shear planes), `largest_share` of the load that one row takes out
        of the first-loaded sheet, `row, sheet, life_flights, life_no_credit_flights, ratio` of life to the case's own.
        Formulas that do not hold for the splice are left out.

    Examples
    --------
    >>> import fatigue
    >>> frame = lives_by_formula(fatigue.estimate(fatigue.read_case(fatigue.demo_case())))
    >>> frame["formula"].tolist()
    ['as in the case', 'huth', 'swift', 'tate-rosenfeld']
    """
    lines = [_line("as in the case", base)]
    for name, joint in compare_flexibilities(base.case.splice).items():
        lines.append(_line(name, estimate(replace(base.case, splice=joint.splice), base.loads)))
    frame = pd.DataFrame(lines)
    frame["ratio"] = frame["life_flights"] / base.rows["life_flights"].iloc[0]
    return frame


def _line(name: str, one: Estimate) -> dict[str, object]:
    first, joint = one.rows.iloc[0], one.joint
    loaded = joint.sheet == one.case.splice.first_loaded
    return {
        "formula": name,
        "flexibility_mm_per_N": float(np.mean(joint.flexibility)),
        "largest_share": float(joint.transfer[loaded].max()),
        "row": first["row"],
        "sheet": first["sheet"],
        "life_flights": first["life_flights"],
        "life_no_credit_flights": first["life_no_credit_flights"],
    }

"""Declared spreads of a splice's inputs, and samples of them: seeded, correlated, reproducible."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from fatigue.splice import Splice
from fatigue.variation import Variation, variation
from spectra.faults import Fault, InputFaults, did_you_mean, listed, show

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Spreads:
    """Standard deviations of the inputs.

    Percentages are of the value and lognormal, so that nothing turns negative; the fit's are points of the hole
    diameter and normal. The defaults are common practice for drawn sheet and hand-driven rivets, no source: replace
    them by your own measurements.

    Parameters
    ----------
    thickness_percent, pitch_percent, row_spacing_percent : float
    hole_percent, flexibility_percent : float
        Row by row.
    fit_percent : float
        Points of the hole diameter, row by row.
    load_percent : float
        Remote stress.
    curve_log10 : float
        Joint to joint, of the material's log life.
    damage_sum_log10 : float
        Of the damage sum at failure.
    hole_to_hole_log10 : float or None
        Within a joint; None: the case's `inspection.scatter_log10`.
    rows_correlation : float
        Between rows of one joint, of hole, fit and flexibility.
    """

    thickness_percent: float = 2.0
    pitch_percent: float = 1.0
    row_spacing_percent: float = 1.0
    hole_percent: float = 0.7
    fit_percent: float = 0.1
    load_percent: float = 5.0
    flexibility_percent: float = 15.0
    curve_log10: float = 0.10
    damage_sum_log10: float = 0.10
    hole_to_hole_log10: float | None = None
    rows_correlation: float = 0.5


SINGLE = ("thickness", "pitch", "row_spacing", "load", "curve", "damage_sum")
BY_ROW = ("hole", "fit", "flexibility")
MOST_JOINTS = 200_000
LARGEST = {"percent": 50.0, "log10": 1.0}


def spreads_of(table: Mapping[str, object], source: str = "spread") -> Spreads:
    """Return the spreads a table declares, the others as they stand.

    Raises
    ------
    InputFaults
        With every fault of the table.

    Examples
    --------
    >>> spreads_of({"fit_percent": 0.2}).fit_percent
    0.2
    """
    known = [field.name for field in fields(Spreads)]
    faults, good = [], {}
    for key, value in table.items():
        if key not in known:
            faults.append(Fault(f"spread.{key}", "there is no such spread.", did_you_mean(key, known)))
        elif isinstance(value, bool) or not isinstance(value, int | float) or not np.isfinite(value):
            faults.append(Fault(f"spread.{key}", f"{show(value)} is no number.", "Give a standard deviation."))
        elif key == "rows_correlation":
            if not -1 <= value <= 1:
                faults.append(Fault(f"spread.{key}", f"{value:g} is no correlation.", "It lies from -1 to 1."))
            good[key] = float(value)
        elif value < 0:
            faults.append(Fault(f"spread.{key}", f"{value:g} is below zero.", "A standard deviation is 0 or more."))
        elif value > (top := LARGEST["percent" if key.endswith("percent") else "log10"]):
            faults.append(Fault(f"spread.{key}", f"{value:g} is above {top:g}.", "Check the unit: it is in the key."))
        else:
            good[key] = float(value)
    if faults:
        raise InputFaults(source, faults)
    return Spreads(**good)


def numbered(texts: Sequence[str]) -> dict[str, object]:
    """Read ``name=value`` texts; what is no number stays text, for `spreads_of` to refuse.

    >>> numbered(["fit_percent=0.2"])
    {'fit_percent': 0.2}
    """
    found: dict[str, object] = {}
    for text in texts:
        key, _, value = text.partition("=")
        try:
            found[key.strip()] = float(value)
        except ValueError:
            found[key.strip()] = value
    return found


def row_correlation(rows: int, between: float, source: str = "spread") -> Array:
    """Return the correlation matrix of the rows of one joint.

    Raises
    ------
    InputFaults
        If no joint can have it: the matrix is not positive definite.
    """
    matrix = np.full((rows, rows), float(between))
    np.fill_diagonal(matrix, 1.0)
    return checked_correlation(matrix, [f"row {r + 1}" for r in range(rows)], source)


def checked_correlation(matrix: Array, names: Sequence[str], source: str = "spread") -> Array:
    """Return a correlation matrix that is one; a correlation of exactly 1 is taken as all but that.

    Raises
    ------
    InputFaults
        If it is not symmetric, has no unit diagonal or is not positive definite.
    """
    matrix = np.asarray(matrix, dtype=np.float64)
    if matrix.shape != (len(names), len(names)) or not np.allclose(matrix, matrix.T):
        raise InputFaults(source, [Fault("correlation", "the matrix is not square and symmetric.", "Mirror it.")])
    if not np.allclose(np.diag(matrix), 1.0):
        raise InputFaults(source, [Fault("correlation", "its diagonal is not 1.", "Everything goes with itself.")])
    eased = matrix * (1 - 1e-9) + 1e-9 * np.eye(len(names))
    least = float(np.linalg.eigvalsh(eased).min())
    if least <= 0.0:
        low = -1 / max(len(names) - 1, 1)
        raise InputFaults(
            source,
            [
                Fault(
                    "correlation",
                    f"no inputs can be correlated like that: between {listed(list(names), 'and')} the matrix is not "
                    f"positive definite (least eigenvalue {least:.3g}).",
                    f"Equal correlations between {len(names)} rows must exceed {low:.3g}.",
                )
            ],
        )
    return eased


@dataclass(frozen=True, eq=False)
class Sample:
    """n joints drawn from the spreads.

    Parameters
    ----------
    seed : int
    normal : dict of ndarray, shape (n,)
        Standard normal score of each input; by row as ``fit, row A``.
    variants : Variation
    log_life : ndarray, shape (n,)
        Added to every log10 life of the joint: material and damage sum.
    """

    seed: int
    normal: dict[str, Array]
    variants: Variation
    log_life: Array


def draw_sample(splice: Splice, spreads: Spreads, count: int, seed: int) -> Sample:
    """Draw joints.

    Raises
    ------
    InputFaults
        On an impossible correlation or count.

    Examples
    --------
    >>> import fatigue
    >>> splice = fatigue.read_case(fatigue.demo_case()).splice
    >>> a, b = (draw_sample(splice, Spreads(), 50, 7).variants.load for _ in range(2))
    >>> bool((a == b).all())
    True
    """
    if not 50 <= count <= MOST_JOINTS:
        raise InputFaults(
            "joints", [Fault("joints", f"{count} is outside 50 to {MOST_JOINTS}.", "10 000 is a good number.")]
        )
    if seed < 0:
        raise InputFaults("seed", [Fault("seed", f"{seed} is below zero.", "Take 0 or more.")])
    rows = len(splice.rows)
    root = np.linalg.cholesky(row_correlation(rows, spreads.rows_correlation))
    rng = np.random.default_rng(seed)
    normal = {name: rng.standard_normal(count) for name in SINGLE}
    by_row = {name: rng.standard_normal((count, rows)) @ root.T for name in BY_ROW}

    def factor(name: str, score: Array) -> Array:
        sigma = np.sqrt(np.log1p((getattr(spreads, f"{name}_percent") / 100) ** 2))
        return np.asarray(np.exp(sigma * score))

    variants = variation(
        splice,
        count,
        thickness=factor("thickness", normal["thickness"]),
        pitch=factor("pitch", normal["pitch"]),
        row_spacing=factor("row_spacing", normal["row_spacing"]),
        load=factor("load", normal["load"]),
        hole=factor("hole", by_row["hole"]),
        flexibility=factor("flexibility", by_row["flexibility"]),
        fit=spreads.fit_percent * by_row["fit"],
    )
    for name, score in by_row.items():
        if getattr(spreads, f"{name}_percent") > 0:
            normal |= {f"{name}, row {row.name}": score[:, r] for r, row in enumerate(splice.rows)}
    used = {
        name: score
        for name, score in normal.items()
        if "," in name or getattr(spreads, f"{name}_log10", 0) or getattr(spreads, f"{name}_percent", 0)
    }
    log_life = spreads.curve_log10 * normal["curve"] + spreads.damage_sum_log10 * normal["damage_sum"]
    return Sample(seed, used, variants, np.asarray(log_life))

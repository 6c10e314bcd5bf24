"""What drives the answer, and how sure it is: swings one at a time, Monte Carlo, the chance of each row to be first."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
import pandas as pd
from numpy.typing import NDArray
from scipy.special import ndtri
from scipy.stats import rankdata

from fatigue.batch import FAR, Batch, direct_life
from fatigue.life import Estimate
from fatigue.spreads import Spreads, draw_sample
from fatigue.variation import variation

Array = NDArray[np.float64]

QUANTILES = (0.01, 0.05, 0.5, 0.95)
CHECKED = 40
"""Samples of a study that are solved directly as well, to show what the tables cost."""


def swings(base: Estimate, spreads: Spreads) -> pd.DataFrame:
    """Return the splice's life with each input two standard deviations down and up, all others as they are.

    Every life is by `estimate`, no table.

    Parameters
    ----------
    base : Estimate
    spreads : Spreads

    Returns
    -------
    DataFrame
        Worst first: `input, spread, life_down_flights, life_up_flights, worst_ratio, swing` (longer over shorter),
        `row_down, row_up`, the row that governs.
    """
    splice, lines = base.case.splice, []
    here = float(base.route.life.min())

    def add(name: str, words: str, lives: list[Array]) -> None:
        ends = [float(life.min()) for life in lives]
        rows = [splice.rows[splice.locations[int(np.argmin(np.round(np.log(life), 9)))][0]].name for life in lives]
        lines.append((name, words, *ends, min(ends) / here, max(ends) / min(ends), *rows))

    for name in ("thickness", "pitch", "row_spacing", "hole", "flexibility", "load"):
        sd = getattr(spreads, f"{name}_percent")
        if sd > 0:
            sigma = np.sqrt(np.log1p((sd / 100) ** 2))
            both = variation(splice, 2, **{name: np.exp([-2 * sigma, 2 * sigma])})
            add(name, f"2 x {sd:g} %", [direct_life(base, both, i) for i in (0, 1)])
    if spreads.fit_percent > 0 and all(row.hole.fit_percent is not None for row in splice.rows):
        both = variation(splice, 2, fit=np.array([-2.0, 2.0]) * spreads.fit_percent)
        add("fit", f"2 x {spreads.fit_percent:g} points", [direct_life(base, both, i) for i in (0, 1)])
    for name in ("curve", "damage_sum"):
        if (sd := getattr(spreads, f"{name}_log10")) > 0:
            add(name, f"2 x {sd:g} in log10", [base.route.life * 10 ** (k * sd) for k in (-2, 2)])
    names = ["input", "spread", "life_down_flights", "life_up_flights", "worst_ratio", "swing", "row_down", "row_up"]
    frame = pd.DataFrame(lines, columns=names)
    return frame.sort_values("worst_ratio", kind="stable").reset_index(drop=True)


@dataclass(frozen=True, eq=False)
class Scattered:
    """A Monte Carlo study of one splice.

    Parameters
    ----------
    base : Estimate
    spreads : Spreads
    seed, count : int
    rows : tuple of str
    holes : int
        Per row.
    median : ndarray, shape (n, R)
        Life of a typical hole of each row's worse sheet [flights].
    first : ndarray, shape (n, R)
        First crack of the row's holes [flights].
    table : DataFrame
        A line per row and one for the splice: quantiles of the first crack, their standard errors, chance of being
        first and its standard error; NaN for rows too far from first to be followed.
    rank : DataFrame
        Rank correlation of every input with the splice's first crack, strongest first, with its standard error.
    convergence : DataFrame
        The splice's 5 % quantile and median from the first samples on.
    check : DataFrame
        Lives by table against `estimate` on some samples.
    notes : tuple of str
        What was left out.
    """

    base: Estimate
    spreads: Spreads
    seed: int
    count: int
    rows: tuple[str, ...]
    holes: int
    median: Array
    first: Array
    table: pd.DataFrame
    rank: pd.DataFrame
    convergence: pd.DataFrame
    check: pd.DataFrame
    notes: tuple[str, ...]

    @property
    def splice(self) -> Array:
        """First crack anywhere, shape (n,) [flights]."""
        return np.asarray(self.first.min(axis=1))


def monte_carlo(
    base: Estimate,
    spreads: Spreads | None = None,
    count: int = 10_000,
    seed: int = 1,
    checked: int = CHECKED,
    on_progress: Callable[[int, int], None] | None = None,
) -> Scattered:
    """Draw joints, and in them the first crack of every row.

    Parameters
    ----------
    base : Estimate
    spreads : Spreads, optional
    count, seed : int
        Joints drawn; the same seed gives the same study.
    checked : int
        Samples solved directly too.
    on_progress : callable, optional

    Raises
    ------
    InputFaults
        If the spreads are impossible or the case goes one by one only.
    """
    report = on_progress or (lambda done, total: None)
    spreads = spreads or Spreads()
    case, splice = base.case, base.case.splice
    within = case.inspection.scatter_log10 if spreads.hole_to_hole_log10 is None else spreads.hole_to_hole_log10
    sample = draw_sample(splice, spreads, count, seed)
    batch = Batch(base, sample.variants)
    report(1, 4)
    lives = batch.lives()
    report(2, 4)
    row_of = np.array([r for r, _ in splice.locations])
    names = tuple(row.name for row in splice.rows)
    open_ended = np.where(np.isnan(lives.life), np.inf, lives.life) * 10 ** sample.log_life[:, None]
    median = np.stack([open_ended[:, row_of == r].min(axis=1) for r in range(len(names))], axis=1)
    rng = np.random.default_rng([seed, 1])
    holes = case.inspection.holes_per_row
    # the first of m exactly: the least of m uniforms is 1 - U^(1/m); every location has its own holes
    least = ndtri(-np.expm1(np.log(rng.uniform(size=open_ended.shape)) / holes))
    cracked = open_ended * 10 ** (within * least)
    first = np.stack([cracked[:, row_of == r].min(axis=1) for r in range(len(names))], axis=1)
    table = row_table(first, names)
    unseen = [r for r in range(len(names)) if not lives.followed[row_of == r].any()]
    table.loc[unseen, [name for name in table.columns if name.startswith("q")]] = np.nan
    any_row = first.min(axis=1)
    notes = [
        f"{lives.cycles} of {lives.cycles_of} different cycles are followed: those left out do at most "
        f"{100 * lives.damage_dropped:.2g} % of any governing damage",
    ]
    if not lives.followed.all():
        far = [
            f"row {splice.rows[r].name}, {splice.sheets[s].name}"
            for (r, s), near in zip(splice.locations, lives.followed, strict=True)
            if not near
        ]
        notes.append(
            f"left out, as never within {FAR:g} times of the first life in {len(lives.pilot)} pilot samples: "
            f"{'; '.join(far)}"
        )
    check = checked_lives(base, batch, lives.life, checked, report)
    report(4, 4)
    return Scattered(
        base, spreads, seed, count, names, holes, median, first,
        table, rank_table(sample.normal, any_row), convergence(any_row), check, tuple(notes),
    )  # fmt: skip


def checked_lives(
    base: Estimate, batch: Batch, life: Array, count: int, report: Callable[[int, int], None]
) -> pd.DataFrame:
    """Return the splice's life by table and by `estimate` on evenly chosen samples."""
    chosen = np.unique(np.linspace(0, len(batch.variants) - 1, count).astype(np.int64)) if count else np.empty(0, int)
    direct = []
    for done, i in enumerate(chosen.tolist()):
        direct.append(float(direct_life(base, batch.variants, i).min()))
        report(2 * chosen.size + done, 4 * chosen.size)
    table = np.nanmin(life[chosen], axis=1) if chosen.size else np.empty(0)
    frame = pd.DataFrame({"sample": chosen, "life_table_flights": table, "life_direct_flights": direct})
    with np.errstate(invalid="ignore"):
        frame["error_percent"] = 100 * (frame["life_table_flights"] / frame["life_direct_flights"] - 1)
    return frame


def quantile_error(values: Array, q: float) -> float:
    """Return the standard error of a quantile from the order statistics one standard error of rank away."""
    ordered, n = np.sort(values), values.size
    step = np.sqrt(q * (1 - q) * n)
    low, high = (int(np.clip(round(q * n + k * step), 0, n - 1)) for k in (-1, 1))
    return float((ordered[high] - ordered[low]) / 2)


def row_table(first: Array, names: tuple[str, ...]) -> pd.DataFrame:
    """Return the distribution of the first crack of every row and of the splice."""
    any_row, n = first.min(axis=1), first.shape[0]
    tied = first == any_row[:, None]
    share = (tied / tied.sum(axis=1, keepdims=True)).mean(axis=0)
    lines = []
    for r, name in enumerate([*names, "splice"]):
        own = any_row if name == "splice" and r == len(names) else first[:, r]
        line: dict[str, object] = {"row": name}
        for q in QUANTILES:
            held = bool(np.isfinite(own).mean() > q)
            line[f"q{round(100 * q):02d}_flights"] = float(np.quantile(own, q, method="lower")) if held else np.inf
            line[f"q{round(100 * q):02d}_error_flights"] = quantile_error(own, q) if held else np.nan
        chance = 1.0 if r == len(names) else float(share[r])
        line["chance_first"] = chance
        line["chance_first_error"] = float(np.sqrt(chance * (1 - chance) / n))
        lines.append(line)
    return pd.DataFrame(lines)


def rank_table(normal: dict[str, Array], life: Array) -> pd.DataFrame:
    """Return Spearman's rank correlation of each input's score with the life."""
    ranked = rankdata(life)
    found = {name: float(np.corrcoef(rankdata(score), ranked)[0, 1]) for name, score in normal.items()}
    frame = pd.DataFrame({"input": list(found), "rank_correlation": list(found.values())})
    frame["error"] = 1 / np.sqrt(max(life.size - 1, 1))
    order = frame["rank_correlation"].abs().sort_values(ascending=False, kind="stable").index
    return frame.loc[order].reset_index(drop=True)


def convergence(life: Array) -> pd.DataFrame:
    """Return the 5 % quantile and the median from the first half, quarter, ... of the samples."""
    sizes = [n for k in range(8, -1, -1) if (n := life.size >> k) >= 50] or [life.size]
    lines = []
    for n in sizes:
        line: dict[str, float] = {"samples": n}
        for q in (0.05, 0.5):
            line[f"q{round(100 * q):02d}_flights"] = float(np.quantile(life[:n], q))
            line[f"q{round(100 * q):02d}_error_flights"] = quantile_error(life[:n], q)
        lines.append(line)
    return pd.DataFrame(lines)


def without(spreads: Spreads, *names: str) -> Spreads:
    """Return spreads with some of them at zero."""
    return replace(spreads, **dict.fromkeys(names, 0.0))

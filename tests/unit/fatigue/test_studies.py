"""Studies: variants, tables, spreads, chances, sweeps, and what is said of bad input."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

import fatigue
from fatigue.batch import Batch, direct_life
from fatigue.chance import cracked_chance, first_chance, order_chance, splice_chance
from fatigue.scatter import first_of_many_factor
from fatigue.spreads import Spreads, checked_correlation, draw_sample, numbered, row_correlation, spreads_of
from fatigue.study import monte_carlo, quantile_error, swings, without
from fatigue.sweeps import check_geometry, parse_vary, reach, sweep, variants_of
from fatigue.variation import variation, varied_splice
from spectra.faults import InputFaults

NOTHING = Spreads(*[0.0] * 9, rows_correlation=0.0)


@pytest.fixture(scope="module")
def base() -> fatigue.Estimate:
    return fatigue.estimate(fatigue.read_case(fatigue.demo_case()))


@pytest.mark.parametrize(
    ("texts", "words"),
    [
        (["pitch_mm"], "no = in it"),
        (["pitsch_mm=1:2:3"], "Did you mean pitch_mm"),
        (["pitch_mm=1:2"], "not first:last:steps"),
        (["pitch_mm=a:2:3"], "not first:last:steps"),
        (["pitch_mm=nan:2:3"], "not first:last:steps"),
        (["pitch_mm=30:16:3"], "runs backwards"),
        (["pitch_mm=16:16:3"], "is one point"),
        (["pitch_mm=16:30:1"], "is no sweep"),
        (["pitch_mm=16:30:1000"], "too many"),
        (["pitch_mm=0:30:4"], "not above zero"),
        (["fit_percent=-9:1:4"], "outside -5 to 5"),
        (["pitch_mm=16:30:3", "pitch_in=1:2:3"], "varied twice"),
        (["pitch_mm=16:30:3", "hole_mm=3:4:3", "scale=1:2:3"], "one or two"),
        (["pitch_mm=16:30:200", "hole_mm=3:4:200"], "more than 10000"),
    ],
)
def test_a_bad_sweep_is_taught(texts: list[str], words: str) -> None:
    with pytest.raises(InputFaults, match=words):
        parse_vary(texts)


def test_faults_of_a_sweep_come_together() -> None:
    with pytest.raises(InputFaults) as caught:
        parse_vary(["pitch_mm=30:16:1", "pitsch=1:2:3"])
    assert len(caught.value.faults) == 3


@pytest.mark.parametrize(
    ("table", "words"),
    [
        ({"fit_percent": -0.1}, "below zero"),
        ({"fit_percents": 0.1}, "Did you mean fit_percent"),
        ({"curve_log10": 3.0}, "above 1"),
        ({"load_percent": "five"}, "is no number"),
        ({"load_percent": float("nan")}, "is no number"),
        ({"load_percent": True}, "is no number"),
        ({"rows_correlation": 1.5}, "is no correlation"),
    ],
)
def test_a_bad_spread_is_taught(table: dict[str, object], words: str) -> None:
    with pytest.raises(InputFaults, match=words):
        spreads_of(table)


def test_a_correlation_must_be_possible() -> None:
    with pytest.raises(InputFaults, match="not positive definite"):
        row_correlation(3, -0.6)
    with pytest.raises(InputFaults, match="square and symmetric"):
        checked_correlation(np.array([[1.0, 0.2], [0.1, 1.0]]), ["a", "b"])
    with pytest.raises(InputFaults, match="diagonal"):
        checked_correlation(np.array([[2.0, 0.2], [0.2, 1.0]]), ["a", "b"])
    assert np.linalg.eigvalsh(row_correlation(3, 1.0)).min() > 0


def test_counts_and_seeds_are_checked(base: fatigue.Estimate) -> None:
    with pytest.raises(InputFaults, match="outside 50"):
        draw_sample(base.case.splice, Spreads(), 3, 1)
    with pytest.raises(InputFaults, match="below zero"):
        draw_sample(base.case.splice, Spreads(), 100, -1)
    assert numbered(["fit_percent=x"]) == {"fit_percent": "x"}


def test_a_case_that_goes_one_by_one_is_refused(base: fatigue.Estimate) -> None:
    splice = base.case.splice
    slack = replace(splice, rows=tuple(replace(row, slack=0.05) for row in splice.rows))
    loose = replace(splice, rows=tuple(replace(row, hole=replace(row.hole, fit_percent=None)) for row in splice.rows))
    for changed, words in ((slack, "with slack"), (loose, "Give fit_percent")):
        one = replace(base, case=replace(base.case, splice=changed))
        with pytest.raises(InputFaults, match=words):
            Batch(one, variation(changed, 2, fit=np.array([0.0, 0.1])))
    strain = replace(base.case, life=base.case.life.model_copy(update={"curve": "local-strain"}))
    with pytest.raises(InputFaults, match="local-strain"):
        Batch(replace(base, case=strain), variation(splice, 2))


def test_variants_that_cannot_be_built_are_refused(base: fatigue.Estimate) -> None:
    with pytest.raises(InputFaults, match="of the pitch"):
        sweep(base, parse_vary(["hole_mm=4:14:3"]))
    sunk = fatigue.read_case(fatigue.demo_case("unequal-lap")).splice
    with pytest.raises(InputFaults, match="goes through a sheet"):
        check_geometry(sunk, variation(sunk, 2, thickness=[0.4, 1.0]))
    single = replace(base.case.splice, rows=base.case.splice.rows[:1])
    with pytest.raises(InputFaults, match="one row"):
        check_geometry(single, variation(single, 2, row_spacing=[0.9, 1.1]))


def test_the_case_as_a_variant_is_the_case(base: fatigue.Estimate) -> None:
    same = variation(base.case.splice, 1)
    assert varied_splice(base.case.splice, same, 0) == base.case.splice
    np.testing.assert_allclose(direct_life(base, same, 0), base.route.life, rtol=1e-12)


@pytest.mark.parametrize("name", ["crown-lap", "two-strap-butt", "repair-doubler"])
def test_a_batch_agrees_with_estimates(name: str) -> None:
    base = fatigue.estimate(fatigue.read_case(fatigue.demo_case(name)))
    sample = draw_sample(base.case.splice, Spreads(), 60, 3)
    life = Batch(base, sample.variants).lives().life
    some = range(0, 60, 10)
    direct = np.array([direct_life(base, sample.variants, i).min() for i in some])
    error = np.abs(np.nanmin(life[list(some)], axis=1) / direct - 1)
    assert np.median(error) < 0.01
    assert error.max() < 0.05


def test_without_spread_every_joint_is_the_estimate(base: fatigue.Estimate) -> None:
    study = monte_carlo(base, replace(NOTHING, hole_to_hole_log10=0.0), 60, 1, checked=2)
    np.testing.assert_allclose(study.splice, base.route.life.min(), rtol=0.01)
    assert np.ptp(study.splice) <= 1e-9 * study.splice[0]
    assert study.check["error_percent"].abs().max() < 1.0


def test_hole_to_hole_scatter_alone_is_the_first_of_many(base: fatigue.Estimate) -> None:
    study = monte_carlo(base, NOTHING, 20_000, 5, checked=0)
    settings = base.case.inspection
    exact = study.median[0, 0] * first_of_many_factor(0.5, settings.holes_per_row, settings.scatter_log10)
    assert abs(np.median(study.first[:, 0]) - exact) < 4 * study.table["q50_error_flights"][0]


def test_seeds_reproduce_and_chances_sum_to_one(base: fatigue.Estimate) -> None:
    one, two, other = (monte_carlo(base, count=200, seed=seed, checked=0) for seed in (4, 4, 5))
    assert np.array_equal(one.splice, two.splice)
    assert not np.array_equal(one.splice, other.splice)
    assert one.table["chance_first"][:-1].sum() == pytest.approx(1.0, abs=1e-12)


def test_the_chance_of_being_first_agrees_with_simulation() -> None:
    median, holes, s = np.array([1e5, 1.3e5, 2e5, np.inf]), np.array([25, 60, 25, 25]), 0.15
    exact = first_chance(median, holes, s)
    assert exact.sum() == pytest.approx(1.0, abs=1e-12)
    assert exact[3] == 0.0
    rng = np.random.default_rng(2)
    first = np.stack(
        [m * 10 ** (s * rng.standard_normal((20_000, k)).min(axis=1)) for m, k in zip(median[:3], holes, strict=False)]
    )
    share = np.bincount(first.argmin(axis=0), minlength=3) / 20_000
    np.testing.assert_allclose(exact[:3], share, atol=4 * 0.5 / np.sqrt(20_000))
    assert first_chance([1e5, 2e5], 25, 0.0).tolist() == [1.0, 0.0]


def test_the_kth_of_many_agrees_with_simulation() -> None:
    rng = np.random.default_rng(3)
    lives = np.sort(1e5 * 10 ** (0.15 * rng.standard_normal((20_000, 25))), axis=1)
    hole = cracked_chance(8e4, 1e5, 0.15)
    for k in (1, 2, 5):
        assert abs(float(order_chance(hole, 25, k)) - (lives[:, k - 1] <= 8e4).mean()) < 4 * 0.5 / np.sqrt(20_000)
    assert float(splice_chance([0.1, 0.2])) == pytest.approx(0.28)
    with pytest.raises(ValueError, match="k must lie"):
        order_chance(0.1, 5, 6)


def test_a_quantile_knows_its_error() -> None:
    rng = np.random.default_rng(4)
    values = rng.standard_normal((300, 2000))
    spread = np.quantile(values, 0.05, axis=1).std()
    assert np.mean([quantile_error(v, 0.05) for v in values]) == pytest.approx(spread, rel=0.15)


def test_swings_are_worst_first_and_more_load_is_less_life(base: fatigue.Estimate) -> None:
    frame = swings(base, without(Spreads(), "curve_log10"))
    assert frame["worst_ratio"].is_monotonic_increasing
    assert "curve" not in frame["input"].tolist()
    load = frame.set_index("input").loc["load"]
    assert load["life_up_flights"] < base.route.life.min() < load["life_down_flights"]


def test_a_sweep_by_table_agrees_with_its_direct_variants(base: fatigue.Estimate) -> None:
    swept = sweep(base, parse_vary(["row_spacing_mm=16:30:8", "pitch_mm=16:28:8"]), checked=6)
    assert not swept.direct
    assert np.median(np.abs(swept.check)) < 0.02
    assert np.abs(swept.check).max() < 0.05
    assert len(swept.frame()) == 64


def test_reach_finds_the_value_that_gives_a_life(base: fatigue.Estimate) -> None:
    vary = parse_vary(["pitch_mm=16:26:5"])[0]
    found = reach(base, vary, 200_000)
    assert len(found) == 1
    there = variants_of(base, {"pitch_mm": np.array(found)})
    assert direct_life(base, there, 0).min() == pytest.approx(200_000, rel=1e-4)


def test_a_life_out_of_reach_is_said(base: fatigue.Estimate) -> None:
    vary = parse_vary(["scale=0.9:1.1:3"])[0]
    with pytest.raises(InputFaults, match=r"no value from 0\.9 to 1\.1 gives"):
        reach(base, vary, 1e12)
    with pytest.raises(InputFaults, match="no life"):
        reach(base, vary, 0.0)

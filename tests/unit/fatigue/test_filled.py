"""Route `contact` over a whole splice."""

import numpy as np
import pytest

import fatigue
from fatigue.filled import FEW_CYCLES, WAYS, governing_point, made_holes, mapped, on_grid
from fatigue.life import route_result
from spectra import Cycles


@pytest.fixture
def estimated(lap_text, tmp_path):
    def run(*edits):
        text = lap_text
        for old, new in edits:
            assert old in text
            text = text.replace(old, new)
        return fatigue.estimate(fatigue.parse_case(text, "case.toml", tmp_path))

    return run


FIT = ("[hole.driven]", "[hole.driven]\nfit_percent = {}")


def fitted(percent):
    return FIT[0], FIT[1].format(percent)


def test_no_fit_given_is_a_snug_pin_and_says_so(estimated):
    silent = estimated(('credit = "practice"', 'credit = "contact"'))
    snug = estimated(fitted(0.0), ('credit = "practice"', 'credit = "contact"'))
    np.testing.assert_array_equal(silent.routes["contact"].life, snug.routes["contact"].life)
    assert silent.rows["flags"].str.contains("no fit given for hole driven: taken as snug").all()
    assert not snug.rows["flags"].str.contains("no fit given").any()


def test_no_credit_is_the_lower_of_none_and_snug(estimated):
    tight = estimated(fitted(0.5))
    routes = tight.routes
    np.testing.assert_allclose(
        tight.rows["life_no_credit_flights"], np.minimum(routes["none"].life, routes["snug"].life)[tight.order]
    )
    assert (routes["snug"].life < routes["contact"].life).all()


def test_clearance_takes_no_credit_at_all(estimated):
    loose = estimated(fitted(-0.3))
    np.testing.assert_array_equal(loose.routes["snug"].life, loose.routes["contact"].life)


def test_governing_point_is_the_worst_of_every_point_by_itself(estimated):
    one = estimated(fitted(0.3))
    shortest = np.full(one.order.size, np.inf)
    for way in range(len(WAYS)):
        for point in range(0, one.filled.theta.size, 3):
            peak = one.filled.credited[:, way, point]
            own = route_result(peak, one.local.levels, one.loads, one.curves, 1.0, True)
            shortest = np.minimum(shortest, own.life)
    assert (one.routes["contact"].life <= shortest * (1 + 1e-9)).all()
    assert one.routes["contact"].life.min() == pytest.approx(shortest.min(), rel=0.2)


def test_both_ways_of_bending_are_shown_and_the_lower_life_governs(estimated):
    rows = estimated(fitted(0.3)).rows
    ways = rows[["life_bending_resisted_flights", "life_bending_outside_flights"]].min(axis=1)
    np.testing.assert_allclose(rows["life_contact_flights"], ways, rtol=1e-9)
    assert (rows["life_bending_resisted_flights"] != rows["life_bending_outside_flights"]).any()


def test_interference_cuts_the_range_and_raises_the_mean(estimated):
    rows = estimated(fitted(0.5)).rows
    assert (rows["range_factor"] < 1).all()
    assert (rows["mean_shift_MPa"] > 0).all()


def test_practice_that_promises_too_much_is_flagged(estimated):
    rows = estimated(fitted(0.0)).rows
    assert rows["flags"].str.contains("practice factors promise").all()
    assert not estimated(fitted(0.8)).rows["flags"].str.contains("practice factors promise").any()


def test_a_cold_expanded_hole_keeps_its_residual_stress_unless_a_high_load_washes_it_out(estimated):
    expanded = fitted(0.0)[0], "[hole.driven]\nfit_percent = 0.0\ncold_expansion_percent = 4.0"
    calm = estimated(expanded)
    assert (calm.rows["residual_MPa"] < -250).all()
    np.testing.assert_allclose(calm.rows["residual_left_MPa"], calm.rows["residual_MPa"], rtol=0.05)
    crushed = estimated(
        expanded,
        ("{ max_MPa = 95.0, min_MPa = 0.0, cycles = 1 }", "{ max_MPa = 95.0, min_MPa = -140.0, cycles = 0.0001 }"),
    )
    first = crushed.rows.iloc[0]
    assert first["residual_left_MPa"] > 0.9 * first["residual_MPa"]
    assert crushed.rows["flags"].str.contains("of the residual stress").any()


def test_a_squeezed_rivet_is_tighter_under_its_driven_head(lap_text, tmp_path):
    text = lap_text.replace("[hole.driven]", "[hole.driven]\nsqueeze_ratio = 1.5")
    case = fatigue.parse_case(text, "case.toml", tmp_path)
    fits = [hole.fit for hole in made_holes(case.splice)]
    assert [a < b for a, b in zip(fits[0::2], fits[1::2], strict=True)] == [True] * 3  # driven head on the lower sheet
    turned = fatigue.parse_case(
        text.replace('hole = "driven"', 'hole = "driven"\ndriven_head = "upper"'), "case.toml", tmp_path
    )
    assert [hole.fit for hole in made_holes(turned.splice)] == [fits[1], fits[0]] * 3
    assert fatigue.estimate(case).rows["flags"].str.contains("scatters by a factor of two").all()


def test_friction_shortens_the_life(estimated):
    plain = estimated(fitted(0.0))
    rough = estimated((FIT[0], "[hole.driven]\nfit_percent = 0.0\nfriction = 0.2"))
    assert rough.routes["contact"].life.min() < plain.routes["contact"].life.min()
    assert rough.rows["flags"].str.contains("friction as a stated multiplier").all()


def test_maps_are_interpolated_as_numpy_does():
    levels, maps = np.array([-1.0, 0.0, 3.0]), np.array([[2.0, 0.0, 6.0], [1.0, 1.0, 0.0]])
    at = np.array([-1.0, -0.5, 0.0, 1.0, 3.0])
    expected = [np.interp(at, levels, own) for own in maps]
    np.testing.assert_allclose(mapped(maps, levels, at), expected)


def test_a_grid_keeps_the_number_and_the_mean_of_cycles():
    rng = np.random.default_rng(4)
    ends = np.sort(rng.normal(50, 20, (FEW_CYCLES + 500, 2)), axis=1)
    many = Cycles(ends[:, 0], ends[:, 1], rng.uniform(0.1, 3, len(ends)))
    grid = on_grid(many)
    assert len(grid) < len(many)
    assert grid.total == pytest.approx(many.total)
    for end in ("low", "high"):
        assert getattr(grid, end) @ grid.count == pytest.approx(getattr(many, end) @ many.count)
    few = Cycles(many.low[:5], many.high[:5], many.count[:5])
    assert on_grid(few) is few


def test_the_grid_finds_the_same_point_as_all_cycles(estimated):
    one = estimated(fitted(0.3))
    rng = np.random.default_rng(5)
    high = rng.uniform(40, 95, FEW_CYCLES + 400)
    many = Cycles(high - rng.uniform(5, 40, high.size), high, np.ones(high.size))
    hoop, levels = one.filled.credited, one.local.levels
    coarse = governing_point(hoop, levels, many, one.curves)
    ends = [mapped(hoop, levels, end) for end in (many.low, many.high)]
    every = (many.count / one.curves.life(*ends)).sum(axis=-1)
    picked = every[np.arange(len(every)), coarse.way, coarse.point]
    np.testing.assert_allclose(picked, every.max(axis=(1, 2)), rtol=0.02)

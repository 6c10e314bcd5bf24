"""Hole conditions beside each other, and life against fit."""

import numpy as np
import pytest

import fatigue
from fatigue.fits import _reached, compare_conditions, fit_curves, kind_conditions, with_fit
from fatigue.hole.kinds import Condition, fastener_kinds
from reports.fit_words import fit_story


@pytest.fixture(scope="module")
def demo():
    return fatigue.estimate(fatigue.read_case(fatigue.demo_case()))


@pytest.fixture(scope="module")
def curves(demo):
    return fit_curves(demo, steps=16)


def test_the_trade_order_of_hole_conditions(demo):
    life = compare_conditions(demo).set_index("condition")["life_flights"]
    assert life["snug"] < life["open"] < life["light interference"] < life["heavy interference"]
    assert life["cold-expanded"] > 3 * life["snug"]
    assert life["cold-expanded, interference"] == life.max()


def test_the_case_itself_comes_first_and_open_is_the_unit(demo):
    frame = compare_conditions(demo)
    assert frame.loc[0, "life_flights"] == pytest.approx(demo.rows["life_flights"].min())
    assert frame.set_index("condition").loc["open", "ratio_to_open"] == 1.0


def test_own_conditions_are_compared_with_the_shortest_of_them(demo):
    frame = compare_conditions(demo, [Condition("a", 0.0), Condition("b", 0.004)])
    assert frame["ratio_to_open"].tolist()[1:] == [1.0, frame["life_flights"][2] / frame["life_flights"][1]]


def test_every_kind_is_there_with_both_ends_of_its_fits():
    names = [condition.name for condition in kind_conditions()]
    assert len(names) == 2 * len(fastener_kinds())
    assert "tapered-pin, tightest" in names


def test_the_curve_goes_through_the_estimate_of_the_same_fit(demo, curves):
    k = int(np.argmin(np.abs(curves.fit_percent - 0.3)))
    assert curves.fit_percent[k] == pytest.approx(0.3)
    np.testing.assert_allclose(curves.life[k], demo.routes["contact"].life, rtol=1e-9)


def test_the_practice_fit_gives_the_life_of_practice(demo, curves):
    i = demo.governing
    fit = curves.practice_fit[i]
    solved = compare_conditions(demo, [Condition("as practice", fit / 100)])["life_flights"][1]
    assert solved == pytest.approx(demo.routes["practice"].life[i], rel=0.15)
    assert 0.2 < fit < 0.6


def test_reached_is_the_last_rise_above_the_wanted_life():
    fit = np.array([-1.0, 0.0, 1.0, 2.0])
    assert _reached(fit, np.array([100.0, 10.0, 100.0, 1000.0]), 100.0) == pytest.approx(1.0)
    assert _reached(fit, np.array([100.0, 10.0, 1000.0, 1000.0]), 100.0) == pytest.approx(0.5)
    assert _reached(fit, np.array([200.0, 200.0, 300.0, 400.0]), 100.0) == -1.0
    assert np.isnan(_reached(fit, np.array([1.0, 1.0, 1.0, 2.0]), 100.0))


def test_with_fit_changes_every_hole_and_nothing_else(demo):
    splice = demo.case.splice
    changed = with_fit(splice, 0.002)
    assert [row.hole.fit_percent for row in changed.rows] == pytest.approx([0.2] * 3)
    assert {row.hole.cold_expansion_percent for row in changed.rows} == {0.0}
    assert changed.sheets == splice.sheets


def test_the_story_names_what_the_curve_shows(demo, curves):
    story = " ".join(fit_story(demo, curves))
    i, snug = demo.governing, int(np.argmin(np.abs(curves.fit_percent)))
    doubled = curves.fit_percent[snug:][curves.life[snug:, i] >= 2 * curves.life[snug, i]][0]
    assert f"has doubled the life of a snug pin by {doubled:.2g} %" in story
    yields = curves.fit_percent[(curves.fit_percent > 0) & (curves.pressing_percent[:, i] < 0.995 * curves.fit_percent)]
    assert f"From {yields[0]:.2g} % on the hole yields" in story
    assert f"row A {curves.practice_fit[i]:.2f} %" in story

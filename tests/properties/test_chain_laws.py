"""Laws of the whole chain, case file to life."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import fatigue
from fatigue.loads import CountedLoads
from spectra import History
from tests.properties.laps import CREDITS, Lap, laps, numbers

few = settings(max_examples=12)


@few
@given(laps())
def test_row_loads_sum_to_the_applied_load(lap):
    estimate = lap.estimate()
    rows = estimate.rows
    for sheet in ("upper", "lower"):
        assert rows.loc[rows["sheet"] == sheet, "transfer_fraction"].sum() == pytest.approx(1.0, rel=1e-9)
    assert abs(estimate.joint.equilibrium_residual) < 1e-9
    # the load that comes in at a row leaves as bypass and transfer
    top = estimate.local.levels[-1:]
    thickness = np.array([lap.thickness[s] for s in estimate.joint.sheet])
    loads = estimate.joint.loads(top)
    incoming = (loads.bypass + loads.transfer)[:, 0] * thickness
    assert incoming.max() == pytest.approx(top[0] * lap.thickness[0], rel=1e-9)


@few
@given(laps())
def test_mirrored_lap_has_mirrored_lives(lap):
    one, other = lap.estimate(), lap.mirrored().estimate()
    last = len(lap.fits) - 1
    there = {(r, s): i for i, (r, s) in enumerate(other.case.splice.locations)}
    turned = [there[last - r, 1 - s] for r, s in one.case.splice.locations]
    for route in one.routes:
        np.testing.assert_allclose(
            other.routes[route].life[turned], one.routes[route].life, rtol=1e-6, err_msg=f"route {route}"
        )
    opposite = {"upper": "lower", "lower": "upper", "": ""}
    assert [opposite[other.joint.face[i]] for i in turned] == list(one.joint.face)


@few
@given(laps())
def test_inches_give_the_same_lives(lap):
    metric, inch = lap.estimate(), lap.estimate(inch=True)
    for route in metric.routes:
        # the sheet around a hole is solved to some ten figures, and a life multiplies them by its slope
        np.testing.assert_allclose(inch.routes[route].life, metric.routes[route].life, rtol=1e-6)
    assert inch.rows["row"].tolist() == metric.rows["row"].tolist()


@few
@given(laps(), st.sampled_from([0.5, 2.0, 3.0]))
def test_lengths_do_not_matter_but_their_ratios(lap, factor):
    """No length enters by itself: not in the flexibility, the bending, the concentration or the curves."""
    lap = replace(lap, flexibility="huth")
    for route in ("none", "practice", "contact"):
        one, other = lap.estimate().routes[route].life, lap.larger(factor).estimate().routes[route].life
        np.testing.assert_allclose(other, one, rtol=1e-6, err_msg=route)


@few
@given(laps(), numbers(0.5, 1.5))
def test_scale_multiplies_the_loads(lap, factor):
    by_hand = replace(lap, blocks=tuple((factor * high, factor * low, n) for high, low, n in lap.blocks))
    np.testing.assert_allclose(replace(lap, scale=factor).life(), by_hand.life(), rtol=1e-9)


@few
@given(laps(), numbers(0.1, 5.0), st.sampled_from([0.25, 3.0, 1000.0]))
def test_life_goes_with_the_damage_sum_and_against_the_cycles(lap, damage_sum, cycles):
    other = replace(lap, damage_sum=damage_sum, blocks=tuple((high, low, cycles) for high, low, _ in lap.blocks))
    np.testing.assert_allclose(other.life(), np.multiply(lap.life(), damage_sum / cycles), rtol=1e-9)


@settings(max_examples=25)
@given(laps(), numbers(0.0, 60.0), numbers(0.5, 60.0))
@pytest.mark.parametrize("credit", CREDITS)
def test_life_never_rises_with_the_maximum(credit, lap, low, more):
    """At the same minimum: maximum and range grow together."""
    high = lap.blocks[0][0]
    lives = [
        replace(lap, credit=credit, blocks=((top, min(low, high - 1.0), 1.0),)).life() for top in (high, high + more)
    ]
    assert (lives[1] <= lives[0] * (1 + 1e-9)).all()


@settings(max_examples=25)
@given(laps(), numbers(0.0, 60.0), numbers(0.5, 60.0))
@pytest.mark.parametrize("credit", CREDITS)
def test_life_never_rises_with_the_range(credit, lap, low, more):
    """At the same maximum: the minimum goes down, into compression too."""
    high = lap.blocks[0][0]
    low = min(low, high - 1.0)
    lives = [replace(lap, credit=credit, blocks=((high, bottom, 1.0),)).life() for bottom in (low, low - more)]
    # the severity is a secant of a slightly bent map: from 0.001 MPa on or from 0 it differs in the sixth digit
    assert (lives[1] <= lives[0] * (1 + 1e-6)).all()


@few
@given(laps(), st.lists(numbers(0.1, 9.0), min_size=2, max_size=4))
def test_splitting_a_block_changes_nothing(lap, parts):
    high, low, _ = lap.blocks[0]
    small = (0.8 * high, 0.5 * high, 40.0)
    whole = replace(lap, blocks=((high, low, sum(parts)), small))
    split = replace(lap, blocks=(*((high, low, n) for n in parts), small))
    np.testing.assert_allclose(split.life(), whole.life(), rtol=1e-6)


histories = st.lists(st.integers(-40, 130), min_size=3, max_size=40).map(lambda v: np.array([*v, v[0] + 60], float))
SHAPES = (Lap(), Lap(thickness=(1.6, 1.0), fits=(0.0, 0.4, -0.2)))


def life_of(lap, values, flights):
    history = History(values, flights)
    return fatigue.estimate(lap.case(), CountedLoads("test", history.cycles(), history)).routes


def assert_same(one, other):
    for route in one:
        np.testing.assert_allclose(other[route].life, one[route].life, rtol=1e-7, err_msg=route)


@few
@given(st.sampled_from(SHAPES), histories, st.integers(2, 5))
def test_repeating_a_block_changes_nothing(lap, values, times):
    assert_same(life_of(lap, values, 3.0), life_of(lap, np.tile(values, times), 3.0 * times))


@few
@given(st.sampled_from(SHAPES), histories, st.integers(1, 40))
def test_rotating_a_closed_history_changes_nothing(lap, values, by):
    assert_same(life_of(lap, values, 3.0), life_of(lap, np.roll(values, by), 3.0))


@few
@given(st.sampled_from(SHAPES), histories, st.data())
def test_points_on_the_way_change_nothing(lap, values, data):
    place = data.draw(st.integers(1, values.size - 1))
    between = np.insert(values, place, (values[place - 1] + values[place]) / 2)
    assert_same(life_of(lap, values, 3.0), life_of(lap, between, 3.0))

"""The lap of the issue: which row goes first, and about when."""

import numpy as np
import pytest

import fatigue


@pytest.fixture
def rows(lap):
    return fatigue.estimate(lap).rows


def test_an_outer_row_governs_where_its_sheet_bears_the_whole_load(rows):
    assert (rows["row"].iloc[0], rows["sheet"].iloc[0]) in {("A", "upper"), ("C", "lower")}
    assert rows["face"].iloc[0] == {"A": "lower", "C": "upper"}[rows["row"].iloc[0]]
    assert rows["hidden"].iloc[0]


def test_lives_lie_where_laps_of_this_kind_fail(rows):
    first = rows.iloc[0]
    assert 1e5 < first["life_practice_flights"] < 1e6
    assert first["life_none_flights"] < first["life_practice_flights"] / 3


def test_the_outer_rows_of_an_equal_lap_are_twins(rows):
    by_place = rows.set_index(["row", "sheet"])["life_flights"]
    for one, other in [(("A", "upper"), ("C", "lower")), (("A", "lower"), ("C", "upper"))]:
        assert by_place[one] == pytest.approx(by_place[other], rel=1e-9)


def test_no_credit_is_never_longer_than_none(rows):
    assert (rows["life_no_credit_flights"] <= rows["life_none_flights"] * (1 + 1e-12)).all()


def test_neighbouring_members_stand_on_either_side_of_the_severity(lap):
    estimate = fatigue.estimate(lap)
    low, high = estimate.curves.neighbours
    assert (low <= estimate.curves.severity).all()
    assert (estimate.curves.severity <= high).all()


def test_progress_is_told_to_the_end(lap):
    told = []
    fatigue.estimate(lap, on_progress=lambda done, total: told.append((done, total)))
    assert told == [(1, 4), (2, 4), (3, 4), (4, 4)]


def test_shared_counts_give_the_same(lap):
    loads = fatigue.count_loads(lap)
    np.testing.assert_array_equal(
        fatigue.estimate(lap, loads).rows["life_flights"], fatigue.estimate(lap).rows["life_flights"]
    )


def test_compression_is_walked_through_not_jumped_over(lap_text, tmp_path):
    """A pin that changes side pushes on: unloaded between, the edge goes through no stress at all."""
    text = lap_text.replace("min_MPa = 0.0", "min_MPa = -40.0")
    reversed_ = fatigue.estimate(fatigue.parse_case(text, "lap.toml", tmp_path))
    bent = reversed_.routes["none"].folded
    assert bent.any()
    np.testing.assert_allclose(reversed_.routes["none"].low[bent, 0], 0.0, atol=1e-9)
    from_zero = fatigue.estimate(fatigue.parse_case(lap_text, "lap.toml", tmp_path))
    assert (reversed_.routes["none"].life <= from_zero.routes["none"].life * (1 + 1e-9)).all()

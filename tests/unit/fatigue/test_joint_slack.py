"""Rows that pick up load late."""

from dataclasses import replace

import numpy as np
import pytest

import fatigue
from fatigue.joint import solve_joint
from tests.support import make_lap


def with_slack(splice, **slacks):
    rows = tuple(replace(row, slack=slacks.get(row.name, 0.0)) for row in splice.rows)
    return replace(splice, rows=rows)


def shares(joint, stress):
    """Share of the load each row takes out of the first sheet."""
    first = joint.sheet == 0
    loads = joint.loads([stress])
    return (loads.transfer[first, 0] / stress).round(12)


def test_clearance_in_the_middle_row_leaves_it_to_the_outer_ones():
    lap = make_lap()
    tight, loose = solve_joint(lap), solve_joint(with_slack(lap, r1=0.02))
    light = shares(loose, 5.0)
    assert light[1] == 0.0
    assert light[0] > shares(tight, 5.0)[0]
    assert light.sum() == pytest.approx(1.0)


def test_clearance_in_the_outer_rows_leaves_it_to_the_middle_one():
    loose = solve_joint(with_slack(make_lap(), r0=0.02, r2=0.02))
    assert shares(loose, 5.0).tolist() == pytest.approx([0.0, 1.0, 0.0])
    later = shares(loose, 150.0)
    assert later[0] > 0.2
    assert later[1] < 0.6


def test_at_high_load_the_split_returns_to_the_tight_one():
    lap = make_lap()
    loose = solve_joint(with_slack(lap, r1=0.01))
    gaps = [np.abs(shares(loose, s) - shares(solve_joint(lap), s)).max() for s in (20.0, 100.0, 1000.0, 1e5)]
    assert gaps == sorted(gaps, reverse=True)
    assert gaps[-1] < 1e-3


def test_a_row_closes_where_its_slip_reaches_its_slack():
    loose = solve_joint(with_slack(make_lap(), r1=0.02))
    closing = loose.closing_stress[1]
    assert loose.closing_stress[[0, 2]].tolist() == [0.0, 0.0]
    assert 10 < closing < 200
    assert shares(loose, closing * 0.999)[1] == 0.0
    assert shares(loose, closing * 1.01)[1] > 0.0
    doubled = solve_joint(with_slack(make_lap(), r1=0.04))
    assert doubled.closing_stress[1] == pytest.approx(2 * closing)


def test_compression_closes_the_same_gaps_the_other_way():
    loose = solve_joint(with_slack(make_lap(), r1=0.01))
    np.testing.assert_allclose(loose.loads([-80.0]).transfer, -loose.loads([80.0]).transfer)


def test_every_stretch_between_closings_is_linear_and_in_equilibrium():
    loose = solve_joint(with_slack(make_lap(rows=4), r1=0.01, r2=0.03))
    levels = np.linspace(1.0, 300.0, 200)
    loads = loose.loads(levels)
    first = loose.sheet == 0
    np.testing.assert_allclose(loads.transfer[first].sum(axis=0), levels, rtol=1e-9)
    bends = np.abs(np.diff(loads.transfer[first], n=2, axis=1)).max(axis=0) > 1e-9
    assert 1 <= bends.sum() <= 4


def test_friction_share_takes_bearing_off_and_nothing_else():
    lap = make_lap()
    clamped = replace(lap, rows=tuple(replace(row, friction_share=0.3) for row in lap.rows))
    plain, held = solve_joint(lap).loads([100.0]), solve_joint(clamped).loads([100.0])
    np.testing.assert_allclose(held.bearing, 0.7 * plain.bearing)
    np.testing.assert_allclose(held.transfer, plain.transfer)


def test_a_case_with_slack_says_when_the_row_works(lap_text, tmp_path):
    text = lap_text.replace('name = "B"', 'name = "B"\nslack_mm = 0.02')
    one = fatigue.estimate(fatigue.parse_case(text, "case.toml", tmp_path))
    rows = one.rows.set_index(["row", "sheet"])
    closing = one.joint.closing_stress[1]
    assert f"slack 0.02 mm: the row takes load from {closing:.0f} MPa" in rows.loc[("B", "upper"), "flags"]
    assert rows["transfer_fraction"].groupby("sheet").sum().tolist() == pytest.approx([1.0, 1.0])
    tight = fatigue.estimate(fatigue.parse_case(lap_text, "case.toml", tmp_path)).rows
    assert rows["life_flights"].min() < tight["life_flights"].min()

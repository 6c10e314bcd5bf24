"""The drawn outline of a sheet follows its steps and ends."""

from dataclasses import replace

import numpy as np
import pytest

from fatigue.joint import solve_joint
from fatigue.splice import Step
from reports.figures.section import at_hole, reach, sheet_outline
from tests.support import make_doubler, make_lap


def stepped(thin, thick):
    splice = make_doubler(rows=3)
    skin, doubler = splice.sheets
    doubler = replace(doubler, thickness=thin, steps=(Step(0, thick),), edge=8.0)
    return replace(splice, sheets=(skin, doubler))


def height(outline, x):
    """Thickness of an outline at x: upper corners first, then the lower ones backwards."""
    upper, lower = np.split(outline, 2)
    lower = lower[::-1]
    return float(np.interp(x, *upper.T) - np.interp(x, *lower.T))


@pytest.mark.parametrize(("first", "then"), [(0.8, 1.6), (1.6, 0.8)])
def test_a_step_leaves_the_thinner_side_round_the_hole(first, then):
    splice = stepped(first, then)
    joint, d = solve_joint(splice), splice.rows[0].hole_diameter
    outline = sheet_outline(splice, joint, 1, *reach(splice))
    assert outline[:, 0].min() == splice.rows[0].position - 8.0
    assert height(outline, -7.0) == pytest.approx(first)
    assert height(outline, -d) == pytest.approx(0.8)
    assert height(outline, d) == pytest.approx(0.8)
    assert height(outline, splice.rows[1].position / 2) == pytest.approx(then)


def test_sheets_touch_at_every_hole():
    splice = stepped(0.8, 1.6)
    joint = solve_joint(splice)
    for i in range(0, len(splice.locations), 2):
        (m0, t0), (m1, t1) = at_hole(joint, i), at_hole(joint, i + 1)
        assert abs(m0 - m1) == pytest.approx((t0 + t1) / 2)


def test_a_plain_sheet_has_four_corners():
    splice = make_lap()
    joint = solve_joint(splice)
    assert [len(sheet_outline(splice, joint, s, *reach(splice))) for s in (0, 1)] == [4, 4]

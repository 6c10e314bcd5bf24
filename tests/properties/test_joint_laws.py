"""Laws of row loads and bending."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from fatigue.joint import arrays_of, layout_of, solve_joint, solve_variants
from fatigue.splice import Row, Sheet, Splice
from tests.support import ALUMINIUM, DRILLED, RIVET, make_doubler, make_lap, make_one_strap, make_two_strap

LENGTH = st.floats(12, 40)
THICKNESS = st.floats(0.6, 4.0)


@st.composite
def laps(draw):
    rows = draw(st.integers(1, 8))
    at = np.cumsum([draw(LENGTH) for _ in range(rows)])
    made = tuple(
        Row(f"r{i}", float(at[i] - at[0]), draw(st.floats(2.5, 6.5)), draw(st.floats(16, 32)), RIVET, DRILLED)
        for i in range(rows)
    )
    sheets = (
        Sheet("upper", ALUMINIUM, draw(THICKNESS), 0, rows - 1, start="loaded"),
        Sheet("lower", ALUMINIUM, draw(THICKNESS), 0, rows - 1, end="out"),
    )
    return Splice("lap", sheets, made, 20.0, draw(st.floats(60, 300)))


def mirrored(lap):
    end = lap.rows[-1].position
    upper, lower = lap.sheets
    rows = tuple(replace(row, position=end - row.position) for row in reversed(lap.rows))
    sheets = (replace(upper, thickness=lower.thickness), replace(lower, thickness=upper.thickness))
    return replace(lap, rows=rows, sheets=sheets)


@given(laps())
def test_row_loads_of_a_lap_sum_to_the_load(lap):
    joint = solve_joint(lap)
    for s in (0, 1):
        assert joint.transfer[joint.sheet == s].sum() == pytest.approx(1.0, abs=1e-9)
    assert joint.equilibrium_residual < 1e-9
    assert joint.free_body < 1e-9


@given(laps(), st.floats(5, 250))
def test_a_mirrored_lap_has_mirrored_loads_and_bending(lap, stress):
    """Turned end for end and upside down, with the load in the other sheet's terms."""
    one, other = solve_joint(lap), solve_joint(mirrored(lap))
    np.testing.assert_allclose(one.transfer, other.transfer[::-1], rtol=1e-9)
    ratio = lap.sheets[0].thickness / lap.sheets[1].thickness
    ends = [0, -1]
    np.testing.assert_allclose(
        one.bending([stress])[ends, 0], other.bending([stress * ratio])[ends[::-1], 0], rtol=1e-6, atol=1e-9
    )


@given(laps(), st.floats(0.1, 10))
def test_size_does_not_matter(lap, scale):
    """Every length times a factor: the same shares and bending ratios at the same stress."""
    big = replace(
        lap,
        width=lap.width * scale,
        free_length=lap.free_length * scale,
        sheets=tuple(replace(s, thickness=s.thickness * scale) for s in lap.sheets),
        rows=tuple(
            replace(r, position=r.position * scale, pitch=r.pitch * scale, hole_diameter=r.hole_diameter * scale)
            for r in lap.rows
        ),
    )
    one, other = solve_joint(lap), solve_joint(big)
    np.testing.assert_allclose(one.transfer, other.transfer, rtol=1e-9)
    np.testing.assert_allclose(one.bending([80.0]), other.bending([80.0]), rtol=1e-8, atol=1e-9)


@given(laps(), st.floats(0.1, 10))
def test_modulus_and_stress_scale_together(lap, scale):
    material = replace(ALUMINIUM, modulus=ALUMINIUM.modulus * scale)
    fastener = replace(RIVET, modulus=RIVET.modulus * scale)
    stiff = replace(
        lap,
        sheets=tuple(replace(s, material=material) for s in lap.sheets),
        rows=tuple(replace(r, fastener=fastener) for r in lap.rows),
    )
    one, other = solve_joint(lap), solve_joint(stiff)
    np.testing.assert_allclose(one.transfer, other.transfer, rtol=1e-9)
    np.testing.assert_allclose(scale * one.bending([80.0]), other.bending([80.0 * scale]), rtol=1e-8, atol=1e-8)


@given(laps(), st.floats(1, 200), st.floats(1.01, 3))
def test_bending_ratio_falls_with_load(lap, stress, more):
    """Of the sheet that comes in, at its first row, in a lap of equal sheets."""
    upper, lower = lap.sheets
    joint = solve_joint(replace(lap, sheets=(upper, replace(lower, thickness=upper.thickness))))
    low, high = joint.bending([stress, stress * more])[0]
    assert high / (stress * more) <= low / stress * (1 + 1e-9)


@given(st.integers(1, 6), THICKNESS, THICKNESS)
def test_two_straps_do_not_bend(rows, main, strap):
    joint = solve_joint(make_two_strap(rows=rows, main=main, strap=strap))
    np.testing.assert_allclose(joint.bending([50.0, 150.0]), 0.0, atol=1e-6)
    straps = joint.transfer.reshape(rows, 3)
    np.testing.assert_allclose(straps[:, 0], straps[:, 2], rtol=1e-9)
    np.testing.assert_allclose(straps[:, 0] + straps[:, 2], straps[:, 1], rtol=1e-9)


@given(st.integers(2, 8), THICKNESS, THICKNESS)
def test_a_strap_takes_all_of_the_load_at_the_butt(rows, main, strap):
    joint = solve_joint(make_one_strap(rows=rows, main=main, strap=strap))
    assert joint.segment_load[-1].tolist() == pytest.approx([0.0, 1.0], abs=1e-9)
    assert joint.transfer[joint.sheet == 0].sum() == pytest.approx(1.0, abs=1e-9)


@given(THICKNESS, THICKNESS)
def test_a_long_doubler_shares_by_stiffness(skin, doubler):
    joint = solve_joint(make_doubler(rows=40, skin=skin, doubler=doubler))
    assert joint.segment_load[-1, 1] == pytest.approx(doubler / (skin + doubler), rel=1e-3)


def test_a_rigid_strap_leaves_the_skin_to_itself():
    """With straps that do not stretch and fasteners as they are, the load enters as into a rigid grip."""
    rigid = replace(ALUMINIUM, modulus=1e9)
    splice = make_one_strap(rows=4)
    splice = replace(splice, sheets=(splice.sheets[0], replace(splice.sheets[1], material=rigid)))
    rows = tuple(replace(row, flexibility=5e-5) for row in splice.rows)
    joint = solve_joint(replace(splice, rows=rows))
    taken = joint.transfer[joint.sheet == 0]
    bay = splice.rows[1].position / (72e3 * splice.sheets[0].thickness * splice.width)
    decay = 2 + bay / 5e-5 / (splice.rows[0].pitch / splice.width)
    np.testing.assert_allclose(taken[1:-1] * decay, taken[:-2] + taken[2:], rtol=1e-4)


def test_more_rows_leave_the_middle_ones_idle():
    shares = [solve_joint(make_lap(rows=n)).transfer[:2] for n in (3, 6, 12, 24)]
    firsts = [share[0] for share in shares]
    assert firsts == sorted(firsts, reverse=True)
    assert firsts[-1] == pytest.approx(firsts[-2], rel=0.05)
    many = solve_joint(make_lap(rows=24))
    assert many.transfer[many.row == 12].max() < 0.01


@given(laps())
def test_variants_are_the_single_solutions(lap):
    levels = [20.0, 90.0]
    layout, arrays = layout_of(lap), arrays_of(lap)
    factors = np.array([1.0, 0.9, 1.2])
    many = solve_variants(layout, replace(arrays, thickness=arrays.thickness * factors[:, None, None]), levels)
    for k, factor in enumerate(factors):
        own = replace(lap, sheets=tuple(replace(s, thickness=s.thickness * factor) for s in lap.sheets))
        joint = solve_joint(own)
        np.testing.assert_allclose(many.loads.transfer[k], joint.transfer, rtol=1e-10, atol=1e-12)
        np.testing.assert_allclose(many.bending[k], joint.bending(levels), rtol=1e-10, atol=1e-9)

"""Row loads in closed form, derived from equilibrium and compatibility of the spring chain.

The 37/26/37 split of three rows is also a rule of the trade (common practice, no source).
"""

from dataclasses import replace

import numpy as np
import pytest

from fatigue.joint import solve_joint
from tests.support import make_doubler, make_lap, make_two_strap


def transfers(splice, sheet=0):
    joint = solve_joint(splice)
    return joint.transfer[joint.sheet == sheet]


def with_kappa(rows, kappa_a, kappa_b=None):
    """Make a lap whose flexibility gives kappa = (s/(E t W))/C in the first sheet."""
    splice = make_lap(rows=rows)
    sheet, width = splice.sheets[0], splice.width
    bay = splice.rows[1].position / (sheet.material.modulus * sheet.thickness * width)
    c = bay / kappa_a
    splice = replace(splice, rows=tuple(replace(row, flexibility=c) for row in splice.rows))
    if kappa_b is not None:
        second = replace(splice.sheets[1], thickness=sheet.thickness * kappa_a / kappa_b)
        splice = replace(splice, sheets=(sheet, second))
    return splice


def test_three_equal_rows():
    kappa = 0.423
    found = transfers(with_kappa(3, kappa))
    assert found[0] == pytest.approx((1 + kappa) / (3 + 2 * kappa), rel=1e-12)
    assert found == pytest.approx([0.3700, 0.2600, 0.3700], abs=5e-5)


def test_four_equal_rows():
    assert transfers(with_kappa(4, 0.5)) == pytest.approx([1 / 3, 1 / 6, 1 / 6, 1 / 3], rel=1e-12)


def test_two_rows_unequal_sheets():
    """The row where the stiffer sheet ends takes more: F = (1 + kappa_A)/(2 + kappa_A + kappa_B) at the other one."""
    found = transfers(with_kappa(2, 0.6, 0.3))
    assert sorted(found)[1] == pytest.approx(0.551724, abs=5e-7)


@pytest.mark.parametrize("rows", [2, 3, 5, 8])
def test_soft_fasteners_share_equally_and_rigid_ones_leave_it_to_the_ends(rows):
    assert transfers(with_kappa(rows, 1e-9)) == pytest.approx(np.full(rows, 1 / rows), abs=1e-7)
    ends = np.zeros(rows)
    ends[[0, -1]] = 0.5
    assert transfers(with_kappa(rows, 1e7)) == pytest.approx(ends, abs=1e-6)


def test_two_strap_butt():
    """Main 2.0, straps 1.2, steel bolts 4.7625, three rows, s = W = 25, Huth bolted in double shear."""
    found = transfers(make_two_strap(), sheet=1)
    assert found == pytest.approx([0.4047, 0.2396, 0.3557], abs=5e-5)


def test_long_doubler_decays_geometrically():
    splice = make_doubler(rows=24)
    joint = solve_joint(splice)
    loads = joint.transfer[joint.sheet == 0]
    skin, doubler = splice.sheets
    c = joint.flexibility[0]
    bay = splice.rows[1].position / splice.width
    softness = bay / (skin.material.modulus * skin.thickness) + bay / (doubler.material.modulus * doubler.thickness)
    r = (2 + softness / c - np.sqrt((2 + softness / c) ** 2 - 4)) / 2
    assert loads[1:12] / loads[:11] == pytest.approx(np.full(11, r), rel=1e-3)
    share = (doubler.material.modulus * doubler.thickness) / sum(
        s.material.modulus * s.thickness for s in splice.sheets
    )
    assert loads.sum() == pytest.approx(share, rel=1e-6)

import numpy as np
import pytest

from fatigue.hole.contact import Pin, PinInHole
from fatigue.hole.edge import CRITICAL, bending_around, edge_maps, pin_in_hole, raised_loads, uncredited
from fatigue.hole.sheet import wide_sheet

METALS = {"modulus": 72e3, "poisson": 0.33, "pin_modulus": 72e3, "pin_poisson": 0.33}
LEVELS = np.array([-50.0, -20.0, 0.0, 10.0, 60.0, 100.0])


def maps(places=1, **changes):
    given = {
        "bypass": np.outer(np.linspace(0.6, 0.2, places), LEVELS),
        "bearing": np.outer(np.full(places, 1.8), LEVELS),
        "bend": np.zeros((places, LEVELS.size)),
        "edge": "row", "width_ratio": 0.2, "fit": 0.0, "k_bend": 1.9,
    }  # fmt: skip
    return edge_maps(**(given | METALS | changes))


def test_shapes_and_locked_arrays():
    result = maps(3)
    assert result.theta.size == CRITICAL.size == 91
    assert result.resisted.shape == result.outside.shape == (3, 91, LEVELS.size)
    assert result.contact_from.shape == result.contact_to.shape == (3, LEVELS.size)
    with pytest.raises(ValueError, match="read-only"):
        result.resisted[0, 0, 0] = 1.0


def test_each_location_by_itself():
    together = maps(2, width_ratio=[0.2, 0.3], fit=[0.003, -0.001], end_ratio=[np.inf, 2.0])
    for i, (x, fit, end) in enumerate([(0.2, 0.003, np.inf), (0.3, -0.001, 2.0)]):
        bypass = np.outer([[0.6, 0.2][i]], LEVELS)
        alone = maps(1, bypass=bypass, width_ratio=x, fit=fit, end_ratio=end)
        np.testing.assert_allclose(alone.resisted[0], together.resisted[i], atol=1e-7)


def test_no_load_leaves_the_fit_alone():
    assert maps(fit=-0.001).resisted[0, :, 2] == pytest.approx(0.0)
    assert maps(fit=0.003, edge="wide", width_ratio=0.0).resisted[0, :, 2] == pytest.approx(108.0)  # 0.6 of 180


def test_contact_ends_at_each_level():
    loose = maps(fit=-0.001)
    assert np.isnan(loose.contact_from[0, 2])
    assert loose.contact_from[0, -1] == 0.0
    assert 60 < loose.contact_to[0, -1] < 90
    assert loose.separates[0]
    assert not maps(fit=0.012).separates[0]


def test_bending_ways():
    bend = 0.5 * LEVELS[None]
    result = maps(bend=bend, fit=-0.05, bearing=np.zeros((1, LEVELS.size)))
    # nothing touches: both ways are the open hole with bending on top, at 90 deg
    side = result.theta == 90.0
    np.testing.assert_allclose(result.resisted[0, side], result.outside[0, side], rtol=1e-9)
    assert result.outside[0, side, -1][0] == pytest.approx(result.open_factor[0] * 60.0 + 1.9 * 50.0)
    snug = maps(bend=bend)
    assert not np.allclose(snug.resisted, snug.outside)


def test_countersink_leaves_bending_alone():
    bend = 0.5 * LEVELS[None]
    gone = {"bypass": np.zeros((1, LEVELS.size)), "bearing": np.zeros((1, LEVELS.size))}
    plain, sunk = (maps(bend=bend, fit=-0.05, sink=s, **gone) for s in (1.0, 1.3))
    np.testing.assert_allclose(plain.resisted, sunk.resisted, atol=1e-9)
    np.testing.assert_allclose(maps(sink=1.3).resisted, 1.3 * maps().resisted, rtol=1e-12)


def test_tilt_keeps_the_load_on_the_sheet():
    """Four times the pressure, but no more remote stress: bypass plus half the transfer stays."""
    passing, pressing = raised_loads(np.array([60.0]), np.array([200.0]), 0.2, tilt=4.0)
    assert pressing[0] == 800.0
    assert passing[0] + 0.2 * pressing[0] / 2 == pytest.approx(60.0 + 0.2 * 200.0 / 2)


def test_friction_raises_the_peak():
    calm, rough = maps(), maps(friction=0.2)
    assert 1.04 < rough.resisted.max() / calm.resisted.max() < 1.10


def test_bending_around_an_open_hole():
    assert float(bending_around(90.0, 1.8)) == pytest.approx(1.8)
    assert float(bending_around(0.0, (5 + 3 * 0.33) / (3 + 0.33))) == pytest.approx((1 - 0.33) / (3 + 0.33))


def test_theta_must_lie_on_the_grid():
    with pytest.raises(ValueError, match="whole degrees"):
        maps(theta=np.array([90.5]))


def test_uncredited_fit():
    assert uncredited([0.003, -0.001]) == pytest.approx([0.0, -0.001])


def test_holes_are_made_once():
    assert pin_in_hole("row", 0.2, np.inf, 72e3, 0.33, 72e3, 0.33) is pin_in_hole("row", 0.2, np.inf, 72e3, 0.33, 72e3, 0.33)  # fmt: skip  # noqa: E501


def test_idle_and_loose_pin():
    contact = PinInHole(wide_sheet(0.33), 72e3, Pin(72e3, 0.33)).solve(0.0, 0.0, -0.001)
    assert not contact.closed.any()
    assert contact.gap == pytest.approx(0.001)

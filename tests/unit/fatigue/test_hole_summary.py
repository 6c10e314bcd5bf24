import numpy as np
import pytest

from fatigue.hole.installed import installed
from fatigue.hole.relaxation import settle
from fatigue.hole.ring import Metal
from fatigue.hole.squeeze import head_ratio_of_force, hole_expansion, squeeze_force, squeezed
from fatigue.hole.summary import OneHole, factor_against_load, hole_faults, hole_summary

SHEET = Metal(72.4e3, 0.33, 324.0)


def test_loose_pin_under_bypass_is_an_open_hole():
    result = hole_summary(OneHole(diameter=4, width=20, bypass=100, fit=-0.05))
    assert result.range_factor_90 == pytest.approx(result.open_factor)
    assert result.peak == pytest.approx(100 * result.open_factor)
    assert result.peak_angle == pytest.approx(90.0)
    assert np.isnan(result.contact_from)
    assert result.pressure.max() == 0.0


def test_interference_cuts_the_range_and_raises_the_mean():
    loose, tight = (hole_summary(OneHole(diameter=4, width=20, bypass=60, bearing=150, fit=f)) for f in (0.0, 0.008))
    assert tight.range_factor_peak < 0.8 * loose.range_factor_peak
    assert tight.hoop_unloaded.mean() > 200
    assert (tight.contact_from, tight.contact_to) == pytest.approx((0.0, 180.0))


def test_the_gross_stress_is_what_factors_stand_on():
    hole = OneHole(diameter=4, width=20, bypass=60, bearing=200)
    assert hole.gross_stress == pytest.approx(100.0)
    assert OneHole(diameter=4, width=20, bypass=0, bearing=80, edge="wide").gross_stress == 80.0
    result = hole_summary(hole)
    assert result.rise.max() / 100.0 == pytest.approx(result.range_factor_peak)


def test_bending_takes_the_higher_way():
    flat, bent = (hole_summary(OneHole(diameter=4, width=20, bypass=60, bearing=200, bend=b)) for b in (0.0, 60.0))
    assert flat.bending == "outside"
    assert bent.peak > flat.peak + 30


def test_flags():
    odd = OneHole(diameter=4, width=6, bypass=60, bearing=200, end=5.0, friction=0.2)
    flags = " | ".join(hole_summary(odd).flags)
    assert "d/W 0.67 is beyond the 0.6 checked" in flags
    assert "end distance 1.2 d is under the 1.5 d checked" in flags
    assert "friction is not solved" in flags
    assert hole_summary(OneHole(diameter=4, width=20, bypass=60)).flags == ()


def test_all_faults_at_once():
    assert hole_faults(OneHole(diameter=4, width=20, bypass=60, bearing=200, end=8.0)) == []
    wrong = OneHole(
        diameter=4, width=3, bypass=np.nan, end=1.0, fit=0.3, modulus=0.0, poisson=0.6, pin_modulus=-1.0, friction=2.0
    )
    told = [str(fault) for fault in hole_faults(wrong)]
    assert [text.split(":")[0] for text in told] == [
        "modulus", "pin_modulus", "pitch", "end", "poisson", "friction", "fit", "bypass",
    ]  # fmt: skip
    assert (
        told[2]
        == "pitch: 3 given; it must exceed the hole's diameter 4 mm. Holes this close leave no sheet between them."
    )
    assert "30 given; fits lie from -10 to 10 %." in told[6]


def test_factor_needs_a_load():
    with pytest.raises(ValueError, match="needs a load"):
        factor_against_load(OneHole(diameter=4, width=20, bypass=0), [0.0], [1.0])


def test_factor_against_load():
    hole = OneHole(diameter=4, width=20, bypass=60, bearing=200)
    factors = factor_against_load(hole, [-0.002, 0.0, 0.004], [0.25, 0.5, 1.0])
    assert factors.shape == (3, 3)
    assert factors[1] == pytest.approx(factors[1, 0], rel=1e-6)  # a snug pin is linear in the load
    assert np.all(np.diff(factors[2]) > -1e-9)  # a tight one lets go as the load grows
    assert factors[2, -1] > 1.2 * factors[2, 0]
    assert np.all(factors[2] < factors[1])


def test_squeeze_force_and_back():
    assert head_ratio_of_force(float(squeeze_force(1.4, 4.8)), 4.8) == pytest.approx(1.4)
    assert np.all(np.diff(squeeze_force(np.linspace(1.05, 1.8, 20), 4.0)) > 0)


def test_expansion_ranges():
    for ratio in np.linspace(1.0, 1.75, 16):
        low, middle, high = hole_expansion(float(ratio), "driven")
        assert low <= middle <= high
        assert hole_expansion(float(ratio), "formed")[1] == pytest.approx(middle / 3)
    assert hole_expansion(1.5, "driven") == pytest.approx((0.010, 0.015, 0.020))


def test_squeezing_harder_keeps_more():
    light, usual = (squeezed(r, 4.0, "driven", SHEET, 71e3, 0.33) for r in (1.3, 1.5))
    assert 0 < light.retained_fit < usual.retained_fit < 0.01
    assert usual.residual_hoop < -200
    assert squeezed(1.5, 4.0, "formed", SHEET, 71e3, 0.33).retained_fit < usual.retained_fit
    assert "scatters" in usual.flags[0]
    known = squeezed(1.5, 4.0, "driven", SHEET, 71e3, 0.33, expansion=0.004)
    assert known.flags == ()
    assert known.expansion_low == known.expansion_high == 0.004
    assert any("outside" in flag for flag in squeezed(2.0, 4.0, "driven", SHEET, 71e3, 0.33).flags)


def test_installed_routes():
    given = installed(SHEET, 71e3, 0.33, fit=0.003, squeeze_ratio=1.5)
    assert given.fit == pytest.approx(0.003, rel=1e-6)  # a given fit stands above the squeeze
    loose = installed(SHEET, 71e3, 0.33, fit=-0.002)
    assert (loose.fit, loose.residual_hoop, loose.plastic_zone) == (-0.002, 0.0, 1.0)
    worked = installed(SHEET, 71e3, 0.33, fit=-0.002, cold_expansion=0.04)
    assert worked.fit == -0.002
    assert worked.residual_hoop < -300
    assert worked.plastic_zone > 1.6
    squeezed_in = installed(SHEET, 71e3, 0.33, squeeze_ratio=1.5, shank_diameter=4.0, side="formed")
    assert 0 < squeezed_in.fit < 0.01
    assert any("beyond" in flag for flag in installed(SHEET, 71e3, 0.33, cold_expansion=0.08).flags)
    assert any("outside" in flag for flag in installed(SHEET, 71e3, 0.33, fit=0.03).flags)


def test_settling_adds_the_residual_and_keeps_shapes():
    hoop = np.linspace(0, 400, 5)[None, None] + np.array([50.0, 100.0])[None, :, None]
    settled = settle(hoop, [-200.0], 73e3, 662.0, 0.07)
    assert settled.hoop.shape == (1, 2, 5)
    np.testing.assert_allclose(settled.hoop, hoop + settled.left[:, :, None])
    assert np.all((settled.credit_left > 0.9) & (settled.credit_left <= 1.0))
    assert not settled.yields.any()
    untouched = settle(hoop, 0.0, 73e3, 662.0, 0.07)
    np.testing.assert_array_equal(untouched.hoop, hoop)
    np.testing.assert_array_equal(untouched.credit_left, 1.0)
    assert untouched.yields.all()  # 450 and 500 MPa at the largest load

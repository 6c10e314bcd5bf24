"""MIL-HDBK-5J equivalent-stress equations, 2024-T3 and 7075-T6 sheet; constants from memory. Values derived in ksi."""

import numpy as np
import pytest
from scipy.optimize import brentq

from fatigue.material.library import family
from spectra.units import to_si

KSI = to_si(1.0, "ksi")

MEMBERS = {
    "2024-T3 sheet": [
        (1.0, 11.1, -3.97, 0.56, 15.8),
        (1.5, 7.5, -2.13, 0.66, 23.7),
        (2.0, 9.2, -3.33, 0.68, 12.3),
        (4.0, 8.3, -3.30, 0.66, 8.5),
        (5.0, 8.9, -3.73, 0.56, 3.9),
    ],
    "7075-T6 sheet": [(1.0, 14.86, -5.80, 0.49, 0.0), (2.0, 7.50, -2.46, 0.54, 18.6), (4.0, 10.2, -4.63, 0.51, 5.3)],
}


@pytest.mark.parametrize(
    ("name", "kt", "top", "ratio", "log_life"),
    [
        ("2024-T3 sheet", 1.0, 40.0, 0.0, 5.60625),
        ("2024-T3 sheet", 2.0, 25.0, 0.1, 5.73591),
        ("7075-T6 sheet", 2.0, 20.0, -1.0, 4.98997),
    ],
)
def test_printed_points(name, kt, top, ratio, log_life):
    high = np.array([[top * kt * KSI]])
    life = family(name).at([kt]).life(ratio * high, high)
    assert np.log10(life[0, 0]) == pytest.approx(log_life, abs=1e-5)


@pytest.mark.parametrize("name", list(MEMBERS))
def test_members_in_the_printed_unit(name):
    for member, (kt, a1, a2, a3, a4) in zip(family(name).members, MEMBERS[name], strict=True):
        assert (member.kt, member.a2, member.a3) == (kt, a2, a3)
        assert member.a4 == pytest.approx(a4 * KSI)
        stress = a4 + 10.0
        assert float(member.log_life(stress * KSI)) == pytest.approx(a1 + a2 * np.log10(10.0), rel=1e-12)


@pytest.mark.parametrize("severity", [1.2, 1.7, 2.7, 3.3, 4.4])
@pytest.mark.parametrize("log_life", [4.0, 5.3, 6.6])
def test_interpolation_at_equal_life_against_a_root_find(severity, log_life):
    """The table's life equals the root of log Seq(N) interpolated in log K_t between the raw members."""
    members = list(MEMBERS["2024-T3 sheet"])
    upper = next(i for i, m in enumerate(members) if m[0] >= severity)
    (k0, *low), (k1, *high) = members[upper - 1], members[upper]
    w = np.log(severity / k0) / np.log(k1 / k0)

    def log_stress(n):
        return sum(v * np.log10(a4 + 10 ** ((n - a1) / a2)) for v, (a1, a2, _, a4) in ((1 - w, low), (w, high)))

    nominal = 10 ** log_stress(log_life) * KSI
    local_max = np.array([[nominal * severity]])
    found = family("2024-T3 sheet").at([severity]).life(0 * local_max, local_max)[0, 0]
    root = brentq(lambda n: log_stress(n) - np.log10(nominal / KSI), 3, 8, xtol=1e-14)
    assert found == pytest.approx(10**root, rel=1e-9)


def test_above_the_family_stress_scales_as_one_over_kt():
    curves = family("2024-T3 sheet").at([5.0, 8.0])
    local = np.array([[300.0], [300.0]])
    life = curves.life(0 * local, local)
    assert life[0, 0] == life[1, 0]
    assert curves.severity.tolist() == [5.0, 5.0]


def test_tails_leave_tested_lives_alone_and_continued_is_shortest():
    fam = family("2024-T3 sheet")
    local = np.linspace(60, 500, 45)[None]
    lives = {tail: fam.at([3.0], tail).life(0 * local, local)[0] for tail in ("limit", "continued", "shallower")}
    tested = lives["continued"] < 1e7
    assert tested.any()
    assert (~tested).any()
    for tail in ("limit", "shallower"):
        assert lives[tail][tested] == pytest.approx(lives["continued"][tested], rel=1e-9)
        assert (lives[tail][~tested] >= lives["continued"][~tested]).all()


def test_shallower_tail_has_haibachs_slope():
    curves = family("2024-T3 sheet")
    local = np.array([[150.0, 75.0]])

    def slope(tail):
        a, b = np.log10(curves.at([2.0], tail).life(0 * local, local)[0])
        return (b - a) / np.log10(2.0)

    assert slope("shallower") == pytest.approx(2 * slope("continued") - 1, rel=1e-3)


def test_limit_has_no_damage_under_the_asymptote():
    fam = family("2024-T3 sheet")
    asymptote = 12.3 * KSI * 2.0
    local = np.array([[0.98 * asymptote, 1.05 * asymptote]])
    life = fam.at([2.0], "limit").life(0 * local, local)[0]
    assert np.isinf(life[0])
    assert np.isfinite(life[1])

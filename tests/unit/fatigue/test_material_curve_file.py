"""Curve files: strict reading, every fault at once, crossing members, scaled families, writing."""

import tomllib

import numpy as np
import pytest

from fatigue.material import library
from fatigue.material.curve_file import family_text, parse_family
from fatigue.material.members import Member, crossings, out_of_order
from spectra.faults import InputFaults

GOOD = """
name = "lot 7"
alloy = "2024-T3"
source = "own tests"
how = "invented"
stress_unit = "MPa"
tested_cycles = [1e4, 1e7]
tested_ratio = [-1.0, 0.5]
[[member]]
kt = 3.0
A1 = 12.0
A2 = -3.5
A3 = 0.6
A4 = 60.0
[[member]]
kt = 1.0
A1 = 14.3
A2 = -3.9
A3 = 0.56
A4 = 110.0
"""


def read(tmp_path, text):
    (tmp_path / "mine.toml").write_text(text, encoding="utf-8")
    return library.family("mine.toml", tmp_path)


def faults(tmp_path, text):
    with pytest.raises(InputFaults) as caught:
        read(tmp_path, text)
    return str(caught.value)


def test_members_come_out_by_rising_kt(tmp_path):
    family = read(tmp_path, GOOD)
    assert family.kt.tolist() == [1.0, 3.0]
    assert family.members[1].a4 == 60.0


def test_a_file_in_ksi_and_the_same_in_mpa_give_the_same_life(tmp_path):
    from spectra.units import to_si

    ksi = to_si(1.0, "ksi")
    text = GOOD.replace('"MPa"', '"ksi"').replace("A4 = 60.0", f"A4 = {60.0 / ksi!r}")
    text = text.replace("A4 = 110.0", f"A4 = {110.0 / ksi!r}")
    text = text.replace("A1 = 12.0", f"A1 = {12.0 - 3.5 * np.log10(ksi)!r}".replace("np.float64(", "").replace(")", ""))
    text = text.replace("A1 = 14.3", f"A1 = {14.3 - 3.9 * np.log10(ksi)!r}".replace("np.float64(", "").replace(")", ""))
    low, high = np.array([[-30.0, 0.0]]), np.array([[300.0, 500.0]])
    one, other = (read(tmp_path, t).at([2.0]).life(low, high) for t in (GOOD, text))
    assert one == pytest.approx(other, rel=1e-9)


def test_all_faults_come_together(tmp_path):
    text = GOOD.replace("A2 = -3.5", "A2 = 3.5").replace("A3 = 0.6\n", "A33 = 0.6\n").replace('"MPa"', '"psi"')
    text = text.replace("[1e4, 1e7]", "[1e7, 1e4]").replace("alloy", "aloy")
    told = faults(tmp_path, text)
    assert "7 faults" in told
    assert "member[1].A2: 3.5 makes life rise with stress." in told
    assert "member[1].A33: is not a key of a member. Did you mean A3" in told
    assert "member[1].A3: None must be a number from 0 to 1." in told
    assert "stress_unit: 'psi' must be one of ksi and MPa." in told
    assert "tested_cycles: [10000000.0, 10000.0] must be two rising numbers." in told
    assert "aloy: is not a key of a curve file. Did you mean alloy?" in told
    assert "alloy: is missing or not text." in told


def test_members_that_cross_where_tested_are_refused(tmp_path):
    told = faults(tmp_path, GOOD.replace("A4 = 60.0", "A4 = 170.0"))
    assert "K_t 1 and 3 are out of order at" in told
    assert "the sharper notch would stand more stress" in told


def test_members_the_wrong_way_round_are_refused(tmp_path):
    told = faults(
        tmp_path,
        GOOD.replace("kt = 3.0", "kt = 0.9")
        .replace("kt = 0.9", "kt = 1.0", 1)
        .replace("kt = 1.0\nA1 = 14.3", "kt = 3.0\nA1 = 14.3"),
    )
    assert "out of order at 1e+04 cycles" in told


def test_two_members_of_one_kt(tmp_path):
    assert "two members have the same kt" in faults(tmp_path, GOOD.replace("kt = 3.0", "kt = 1.0"))


def test_a_file_that_is_not_there_and_one_that_is_no_toml(tmp_path):
    with pytest.raises(InputFaults, match="cannot be read"):
        library.family("nothing.toml", tmp_path)
    assert "not a valid TOML file" in faults(tmp_path, "name = ")


def test_a_material_without_a_family_is_told_what_to_do():
    with pytest.raises(InputFaults, match="the material has no S-N family"):
        library.family("")


def test_a_family_scaled_from_a_shipped_one(tmp_path):
    text = """
name = "knocked down"
alloy = "2024-T3"
source = "invented"
how = "invented"
of = "2024-T3 sheet"
stress_factor = 0.9
"""
    scaled, base = read(tmp_path, text), library.family("2024-T3 sheet")
    high = np.array([[300.0]])
    assert scaled.at([3.0]).life(0 * high, 0.9 * high) == pytest.approx(base.at([3.0]).life(0 * high, high), rel=1e-9)
    told = faults(tmp_path, text.replace("2024-T3 sheet", "2024-T3 shet").replace("0.9", "-1"))
    assert "there is no shipped family '2024-T3 shet'. Did you mean 2024-T3 sheet" in told
    assert "stress_factor: -1 must be a number above 0" in told


def test_written_text_reads_back():
    raw = tomllib.loads(GOOD)
    raw["notes"] = ['a "quoted" line', "and Ärger"]
    again = tomllib.loads(family_text(raw))
    assert again == raw
    assert parse_family(again, "again", library.family).kt.tolist() == [1.0, 3.0]


def test_crossings_are_found_where_they_are():
    blunt, sharp = Member(1.0, 10.0, -3.0, 0.5, 0.0), Member(2.0, 8.0, -2.0, 0.5, 0.0)
    # (y - 10)/-3 = (y - 8)/-2 at y = 4
    (one,) = crossings((blunt, sharp), 1.0, 7.0)
    assert one.log_life == pytest.approx(4.0, abs=1e-10)
    assert out_of_order((blunt, sharp), 4.5, 7.0) == ()
    assert len(out_of_order((blunt, sharp), 1.0, 3.5)) == 1


def test_no_shipped_family_is_out_of_order_where_tested():
    for name in library.families():
        family = library.family(name)
        assert out_of_order(family.members, *np.log10(family.tested_cycles)) == ()

"""`faying hole` as it is run."""

import json
import math
import subprocess
import sys

import pytest

RUN = [sys.executable, "-c", "from reports.command import main; main()", "hole"]
LAP = ["--hole-mm", "4", "--pitch-mm", "20", "--bypass-MPa", "60", "--bearing-MPa", "200"]


def hole(*options, cwd):
    return subprocess.run([*RUN, *options], cwd=cwd, capture_output=True, text=True, timeout=60, check=False)


def as_json(*options, cwd):
    done = hole(*options, "--format", "json", cwd=cwd)
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)


def test_json_has_the_agreed_keys(tmp_path):
    found = as_json(*LAP, "--fit-percent", "0.3", cwd=tmp_path)
    keys = {"peak_MPa", "peak_angle_deg", "range_factor_90deg", "range_factor_peak", "contact_from_deg"}
    assert keys | {"contact_to_deg", "edge"} <= set(found)
    assert set(found["edge"][0]) == {"angle_deg", "hoop_MPa", "pressure_MPa"}
    assert len(found["edge"]) == 181
    assert found["peak_MPa"] == max(point["hoop_MPa"] for point in found["edge"])


def test_a_wide_sheet_with_contact_kept_has_the_closed_form_factor(tmp_path):
    wide = ["--edge", "wide", "--hole-mm", "4", "--bypass-MPa", "100", "--fit-percent", "0.5"]
    assert as_json(*wide, cwd=tmp_path)["range_factor_90deg"] == pytest.approx(1.75, abs=5e-5)
    steel = as_json(*wide, "--pin-modulus-MPa", "205000", "--pin-poisson", "0.30", cwd=tmp_path)
    assert steel["range_factor_90deg"] == pytest.approx(1.3361, abs=5e-5)


def test_inches_give_the_same_hole(tmp_path):
    metric = as_json(*LAP, cwd=tmp_path)
    ksi = 6.894757293168361
    inch = ["--hole-in", str(4 / 25.4), "--pitch-in", str(20 / 25.4)]
    inch += ["--bypass-ksi", str(60 / ksi), "--bearing-ksi", str(200 / ksi)]
    assert as_json(*inch, cwd=tmp_path)["peak_MPa"] == pytest.approx(metric["peak_MPa"], rel=1e-9)


def test_nothing_touches_a_loose_pin_under_bypass(tmp_path):
    found = as_json("--hole-mm", "4", "--pitch-mm", "20", "--bypass-MPa", "60", "--fit-percent", "-1", cwd=tmp_path)
    assert found["contact_from_deg"] is None
    assert found["contact_to_deg"] is None


def test_csv_and_figures(tmp_path):
    done = hole(*LAP, "--format", "csv", "--out", "drawn", cwd=tmp_path)
    assert done.stdout.splitlines()[0] == "angle_deg,hoop_MPa,pressure_MPa"
    assert len(done.stdout.splitlines()) == 182
    assert {p.name for p in (tmp_path / "drawn").iterdir()} == {
        f"hole_{name}.{kind}" for name in ("edge", "factor") for kind in ("png", "svg")
    }


def test_the_table_says_what_the_making_left(tmp_path):
    done = hole(*LAP, "--fit-percent", "0.8", "--yield-MPa", "324", cwd=tmp_path)
    line = next(line for line in done.stdout.splitlines() if "making" in line)
    assert "fit +0.8 % presses like +0.7" in line
    assert float(line.split("edge ")[1].split(" MPa")[0]) < -100
    assert not math.isnan(float(done.stdout.split("peak ")[1].split()[0]))


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (["--hole-mm", "4"], "--pitch: is missing. Give --pitch-mm or --pitch-in."),
        (["--hole-mm", "4", "--hole-in", "1", "--pitch-mm", "20"], "--hole: is given in mm and in in."),
        (["--hole-mm", "30", "--pitch-mm", "20", "--fit-percent", "1"], "it must exceed the hole's diameter 30 mm"),
        (["--hole-mm", "4", "--pitch-mm", "20"], "no load and no fit: nothing happens."),
        ([*LAP, "--poisson", "0.6"], "Poisson's ratio lies from 0 to 0.5"),
        ([*LAP, "--fit-percent", "30"], "fits lie from -10 to 10 %"),
        ([*LAP, "--end-mm", "1"], "it must exceed half the diameter, 2 mm"),
        ([*LAP, "--modulus-MPa", "-3"], "the sheet's modulus must be above 0"),
        ([*LAP, "--cold-expansion-percent", "4"], "--yield: is missing: expansion yields the hole."),
        ([*LAP, "--bypass-MPa", "nan"], "stresses must be finite"),
        ([*LAP, "--friction", "2"], "the multiplier is stated for 0 to 0.5"),
        (["--hole", "4"], "No such option"),
    ],
)
def test_bad_input_teaches(options, words, tmp_path):
    done = hole(*options, "--out", "drawn", cwd=tmp_path)
    assert done.returncode == 1
    assert words in done.stderr
    assert not (tmp_path / "drawn").exists()

"""`faying compare` as it is run."""

import subprocess
import sys

import pandas as pd
import pytest

import fatigue

RUN = [sys.executable, "-c", "from reports.command import main; main()", "compare"]


def compare(*options, cwd):
    return subprocess.run([*RUN, *options], cwd=cwd, capture_output=True, text=True, timeout=120, check=False)


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "one.toml").write_text(fatigue.starter_text(), encoding="utf-8")
    longer = fatigue.starter_text().replace("row_spacing_mm = 20.0", "row_spacing_mm = 28.0")
    (tmp_path / "two.toml").write_text(longer.replace("My splice", "Longer"), encoding="utf-8")
    return tmp_path


def test_conditions_of_one_case(folder):
    done = compare("one.toml", "--out", "drawn", cwd=folder)
    assert done.returncode == 0, done.stderr
    for words in (
        "cold-expanded, interference",
        "Life against fit",
        "The practice factors promise",
        "No credit for fit",
    ):
        assert words in done.stdout
    names = {"conditions.csv", "life_against_fit.csv", "conditions.png", "life_against_fit.svg"}
    assert names <= {path.name for path in (folder / "drawn").iterdir()}
    curve = pd.read_csv(folder / "drawn" / "life_against_fit.csv")
    assert curve["fit_percent"].iloc[[0, -1]].tolist() == [-0.5, 1.0]


def test_own_fits_and_kinds(folder):
    own = compare("one.toml", "--fit-percent", "-0.2", "--fit-percent", "0.4", cwd=folder)
    assert "fit -0.2 %" in own.stdout
    assert "fit +0.4 %" in own.stdout
    assert "snug " not in own.stdout.split("Life against fit")[0]
    assert "tapered-pin, tightest" in compare("one.toml", "--kinds", cwd=folder).stdout


def test_designs_beside_each_other(folder):
    done = compare("one.toml", "two.toml", "--out", "drawn", cwd=folder)
    assert done.returncode == 0, done.stderr
    table = pd.read_csv(folder / "drawn" / "designs.csv")
    assert table["case"].str.split().str[0].tolist() == ["My", "Longer"]
    assert table["ratio_to_first"].iloc[0] == 1.0
    assert table["life_flights"].iloc[1] > table["life_flights"].iloc[0]


def test_a_broken_case_among_good_ones_writes_nothing(folder):
    (folder / "bad.toml").write_text("title = 1", encoding="utf-8")
    done = compare("one.toml", "bad.toml", "--out", "drawn", cwd=folder)
    assert done.returncode == 1
    assert "bad.toml" in done.stderr
    assert not (folder / "drawn").exists()

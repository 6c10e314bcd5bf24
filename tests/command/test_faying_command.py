"""The `faying` command as it is installed, run from an empty folder."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pandas as pd
import pytest

import fatigue
from reports.command import COMMANDS

FAYING = Path(sys.executable).with_name("faying")
FILES = {"rows.csv", "cycles.csv", "result.json", "report.html", "critical_row.svg", "critical_row.png"}
SETTINGS = {**os.environ, "OMP_NUM_THREADS": "1", "COLUMNS": "100"}


def faying(*options, cwd):
    return subprocess.run(
        [FAYING, *options], cwd=cwd, env=SETTINGS, capture_output=True, text=True, timeout=120, check=False
    )


def good(*options, cwd):
    done = faying(*options, cwd=cwd)
    assert done.returncode == 0, done.stderr
    assert done.stderr == ""
    return done.stdout


def names(folder):
    return {path.name for path in folder.iterdir()}


def test_help(tmp_path):
    shown = good("--help", cwd=tmp_path)
    for name, words in COMMANDS.items():
        assert f"  {name} " in shown
        assert words[:40] in shown
    assert good("-h", cwd=tmp_path) == shown
    assert not names(tmp_path)


@pytest.mark.parametrize("name", COMMANDS)
def test_help_of_each_command(tmp_path, name):
    shown = good(name, "--help", cwd=tmp_path)
    assert shown.startswith(f"Usage: faying {name}")


def test_help_imports_nothing_heavy(tmp_path):
    program = (
        "import sys\nfrom reports.command import main\n"
        "try:\n    main(['--help'])\nexcept SystemExit:\n    pass\n"
        "heavy = {'matplotlib', 'scipy', 'pandas', 'numpy', 'pydantic', 'jinja2'}\n"
        "print('imported', *sorted(heavy & set(sys.modules)))"
    )
    done = subprocess.run([sys.executable, "-c", program], cwd=tmp_path, capture_output=True, text=True, check=True)
    assert "Usage:" in done.stdout
    assert done.stdout.splitlines()[-1] == "imported"


def test_version(tmp_path):
    assert "faying" in good("--version", cwd=tmp_path)


def test_misspelt_command(tmp_path):
    done = faying("lief", "x.toml", cwd=tmp_path)
    assert done.returncode == 1
    assert 'There is no command "lief". Did you mean life?' in done.stderr


def test_demo(tmp_path):
    shown = good("demo", cwd=tmp_path)
    assert names(tmp_path) == {"faying-out"}
    out = tmp_path / "faying-out"
    assert names(out) >= FILES
    rows = pd.read_csv(out / "rows.csv")
    assert rows["row"].iloc[0] in "AC"
    assert len(rows) == 6
    table = [line.split() for line in shown.splitlines() if line.split()[:1] in [[str(n)] for n in range(1, 7)]]
    assert [line[1] for line in table[:6]] == rows["row"].tolist()
    assert f"Row {rows['row'].iloc[0]}, {rows['sheet'].iloc[0]}, goes first" in shown
    assert json.loads((out / "result.json").read_text(encoding="utf-8"))["rows"][0]["rank"] == 1
    assert (out / "critical_row.png").read_bytes().startswith(b"\x89PNG")
    page = (out / "report.html").read_text(encoding="utf-8")
    assert 'src="http' not in page
    assert 'href="http' not in page


def test_life_on_the_starter(tmp_path):
    assert "Now: faying life mine.toml" in good("new", "mine.toml", cwd=tmp_path)
    shown = good("life", "mine.toml", "--out", "out", cwd=tmp_path)
    assert "goes first" in shown
    assert "Written to out: " in shown
    assert names(tmp_path / "out") >= FILES


def test_new_overwrites_nothing(tmp_path):
    (tmp_path / "mine.toml").write_text("mine", encoding="utf-8")
    done = faying("new", "mine.toml", cwd=tmp_path)
    assert done.returncode == 1
    assert "is there already." in done.stderr
    assert (tmp_path / "mine.toml").read_text(encoding="utf-8") == "mine"


def test_life_on_blocks_in_ksi(tmp_path, lap_text):
    (tmp_path / "lap.toml").write_text(lap_text, encoding="utf-8")
    shown = good("life", "lap.toml", "--inch", cwd=tmp_path)
    assert "[ksi]" in shown or "ksi" in shown
    rows = pd.read_csv(tmp_path / "faying-out" / "rows.csv")
    assert "peak_max_ksi" in rows.columns
    assert 1e5 < rows["life_practice_flights"].min() < 1e6
    assert rows["life_none_flights"].min() < rows["life_practice_flights"].min() / 3


def test_life_on_a_recording(tmp_path, lap_text):
    values = "\n".join(str(v) for v in [0, 95, 40, 80, 0, 90, 0])
    (tmp_path / "recording.csv").write_text(f"stress_MPa\n{values}\n", encoding="utf-8")
    history = 'history = { file = "recording.csv", column = "stress_MPa", flights = 2 }'
    text = lap_text.replace("blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]", history)
    (tmp_path / "lap.toml").write_text(text, encoding="utf-8")
    good("life", "lap.toml", cwd=tmp_path)
    cycles = pd.read_csv(tmp_path / "faying-out" / "cycles.csv")
    assert sorted(cycles.itertuples(index=False, name=None)) == [(0, 90, 0.5), (0, 95, 0.5), (40, 80, 0.5)]


def test_life_on_loads_that_do_no_damage(tmp_path, lap_text):
    (tmp_path / "recording.csv").write_text("stress_MPa\n50\n50\n", encoding="utf-8")
    history = 'history = { file = "recording.csv", column = "stress_MPa", flights = 2 }'
    text = lap_text.replace("blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]", history)
    (tmp_path / "lap.toml").write_text(text, encoding="utf-8")
    shown = good("life", "lap.toml", cwd=tmp_path)
    assert "the history is constant: it has no cycles" in shown
    assert names(tmp_path / "faying-out") >= FILES


def test_count(tmp_path):
    (tmp_path / "recording.csv").write_text("stress_MPa\n0\n95\n40\n80\n0\n", encoding="utf-8")
    shown = good(
        "count", "recording.csv", "--column", "stress_MPa", "--flights", "1", "--out", "cycles.csv", cwd=tmp_path
    )
    assert "5 values, 2 cycles in 1 flights" in shown
    cycles = pd.read_csv(tmp_path / "cycles.csv")
    assert {"min_MPa", "max_MPa", "count"} <= set(cycles.columns)


@pytest.mark.parametrize(
    ("topic", "words"),
    [
        ("materials", "2024-T3 bare sheet"),
        ("fasteners", "solid-rivet-2117"),
        ("curves", "2024-T3 sheet"),
        ("spectra", "short-hops"),
        ("methods", "Miner"),
    ],
)
def test_sources(tmp_path, topic, words):
    assert words in good("sources", topic, cwd=tmp_path)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("x = ", "not valid TOML"),
        ("", "title: is missing."),
        ("pitch", "splice.pitch: 20.0 has no unit. Write pitch_mm or pitch_in."),
    ],
)
def test_bad_case_writes_nothing(tmp_path, lap_text, text, message):
    given = lap_text.replace("pitch_mm", "pitch") if text == "pitch" else text
    (tmp_path / "lap.toml").write_text(given, encoding="utf-8")
    done = faying("life", "lap.toml", cwd=tmp_path)
    assert done.returncode == 1
    assert message in done.stderr
    assert "Traceback" not in done.stderr
    assert done.stdout == ""
    assert names(tmp_path) == {"lap.toml"}


@pytest.mark.parametrize(
    ("options", "message"),
    [
        (["life", "none.toml"], "there is no such file."),
        (["life", "."], "this is a folder, not a case file."),
        (["life"], "Missing argument 'CASE'"),
        (["life", "x.toml", "--inches"], "No such option"),
        (["demo", "--case", "crown-lop"], 'there is no shipped case "crown-lop". Did you mean crown-lap?'),
        (["sources", "material"], "is not one of"),
        (["new"], "Missing argument 'FILE'"),
    ],
)
def test_bad_command_line(tmp_path, options, message):
    done = faying(*options, cwd=tmp_path)
    assert done.returncode == 1
    assert message in done.stderr
    assert "Traceback" not in done.stderr
    assert not names(tmp_path)


def test_a_file_in_the_way_of_the_output(tmp_path, lap_text):
    (tmp_path / "lap.toml").write_text(lap_text, encoding="utf-8")
    (tmp_path / "out").write_text("mine", encoding="utf-8")
    done = faying("life", "lap.toml", "--out", "out", cwd=tmp_path)
    assert done.returncode == 1
    assert "out: one fault\n  the output folder cannot be written to" in done.stderr
    assert "Name another with --out." in done.stderr
    assert (tmp_path / "out").read_text(encoding="utf-8") == "mine"


def test_names_cannot_reach_into_the_terminal(tmp_path):
    (tmp_path / "x.toml").write_text('"\\u001b[31mred" = 1', encoding="utf-8")
    done = faying("life", "x.toml", cwd=tmp_path)
    assert done.returncode == 1
    assert "\x1b" not in done.stderr


def test_the_same_case_gives_the_same_bytes(tmp_path, lap_text):
    (tmp_path / "lap.toml").write_text(lap_text, encoding="utf-8")
    for out in ("one", "two"):
        good("life", "lap.toml", "--out", out, cwd=tmp_path)
    for name in names(tmp_path / "one"):
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes(), name


def test_the_command_and_the_package_agree(tmp_path):
    good("demo", cwd=tmp_path)
    estimate = fatigue.estimate(fatigue.read_case(fatigue.demo_case()))
    rows = pd.read_csv(tmp_path / "faying-out" / "rows.csv")
    assert rows["life_flights"].tolist() == pytest.approx(estimate.rows["life_flights"].tolist(), rel=1e-5)

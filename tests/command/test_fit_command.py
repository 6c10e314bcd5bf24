"""`faying fit` as it is run."""

import subprocess
import sys

import numpy as np
import pytest

import fatigue

RUN = [sys.executable, "-c", "from reports.command import main; main()"]
HEAD = "cycles,max_MPa,ratio,kt,run_out,specimen"


def run(*options, cwd):
    return subprocess.run([*RUN, *options], cwd=cwd, capture_output=True, text=True, timeout=120, check=False)


def results(kts=(2.0, 4.0), seed=4):
    """Return invented tests of two K_t with run-outs at a million cycles."""
    random = np.random.default_rng(seed)
    lines, number = [HEAD], 0
    for kt in kts:
        for top in (330, 280, 240, 200, 175, 160, 150):
            for _ in range(2):
                number += 1
                stress = top * (1.0 if kt == 2 else 0.62)
                life = 10 ** (16.2 - 4.6 * np.log10(stress * kt / 2 * (1 if kt == 2 else 0.9)) + random.normal(0, 0.1))
                stopped = life > 1e6
                lines.append(f"{min(life, 1e6):.0f},{stress:.1f},0.1,{kt},{'yes' if stopped else 'no'},c{number}")
    return "\n".join(lines) + "\n"


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "tests.csv").write_text(results(), encoding="utf-8")
    return tmp_path


def test_a_new_user_fits_and_uses_the_curve(folder):
    done = run("fit", "tests.csv", "--alloy", "2024-T3", "--no-fatigue-limit", cwd=folder)
    assert done.returncode == 0, done.stderr
    for words in (
        "run-outs, taken as lives that were not reached",
        "profile-likelihood intervals",
        "ASTM E739",
        "Taken:",
    ):
        assert words in done.stdout
    assert {p.name for p in (folder / "faying-fit").iterdir()} == {"tests.toml", "residuals.csv", "fit.png", "fit.svg"}
    case = fatigue.starter_text().replace('"2024-T3 bare sheet"', '"our sheet"')
    case += '\n[material."our sheet"]\nmodulus_MPa = 72000\npoisson = 0.33\nyield_MPa = 345\n'
    (folder / "case.toml").write_text(case + 'curve = "faying-fit/tests.toml"\n', encoding="utf-8")
    life = run("life", "case.toml", cwd=folder)
    assert life.returncode == 0, life.stderr
    assert "fitted by censored maximum likelihood" in (folder / "faying-out" / "report.html").read_text(
        encoding="utf-8"
    )


def test_one_form_and_level_by_choice(folder):
    done = run("fit", "tests.csv", "--form", "power", "--level", "0.9", "--no-fatigue-limit", cwd=folder)
    assert "90 % profile-likelihood intervals" in done.stdout
    assert "handbook form, scatter" not in done.stdout


def edited(old, new, count=1):
    text = results()
    assert old in text
    return text.replace(old, new, count)


BAD = {
    "empty": ("", "is empty. Columns: cycles, max_MPa or max_ksi"),
    "no tests": (HEAD + "\n", "has a header but no tests."),
    "typo in a column": (edited("run_out", "runout"), "'runout' is not a column of a test file. Did you mean run_out"),
    "no unit": (edited("max_MPa", "max"), "'max' is not a column of a test file. Name the unit: max_MPa or max_ksi."),
    "no cycles": (edited("cycles,", "life,"), "there is no column cycles"),
    "two units": (edited("specimen", "max_ksi"), "max_MPa and max_ksi are both given."),
    "no ratio": (edited("ratio", "note"), "there is no stress ratio."),
    "a column twice": (edited("specimen", "cycles"), "'cycles' stands twice. Keep one."),
    "negative life": (edited("\n1000000,", "\n-5,"), "cycles: -5 is not a life. Lives are above 0."),
    "life with a sign": (edited("\n1000000,", "\n>1000000,"), "Write the cycles at which it was stopped, and run_out"),
    "not a number": (edited(",330.0,", ",33O,"), "max_MPa: '33O' is not a number."),
    "no tension": (edited(",330.0,", ",-330,"), "-330 is no tension."),
    "ratio of one": (edited(",0.1,2.0,", ",1.0,2.0,"), "ratio: 1: S_min is not below S_max."),
    "kt below one": (edited(",2.0,no", ",0.5,no"), "kt: 0.5 must be at least 1."),
    "run-out maybe": (edited(",no,", ",maybe,"), "run_out: 'maybe' must be yes or no."),
    "too many cells": (edited(",c1\n", ",c1,9,9\n"), "has 8 cells, the header 6."),
    "all run-outs": (results().replace(",no,", ",yes,"), "are run-outs: nothing failed, no curve follows."),
    "too few": ("\n".join(results().splitlines()[:4]) + "\n", "K_t 2: 3 failures among 3 tests; the power form needs"),
    "one stress": (
        HEAD + "\n" + "".join(f"{10**5 + 1000 * k},200,0.1,2,no,c{k}\n" for k in range(9)),
        "failures at one stress only",
    ),
    "a curve that rises": (
        HEAD + "\n" + "".join(f"{10**4 * k * k},{150 + 10 * k},0.1,2,no,c{k}\n" for k in range(1, 12)),
        "life does not fall with stress: the curve would rise or be flat.",
    ),
    "members that cross": (
        results(kts=(2.0,)) + "".join(
            f"{10 ** (18.2 - 5.2 * np.log10(s)):.0f},{s},0.1,4.0,no,x{s}\n" for s in (330, 300, 270, 240, 210, 180)
        ),
        "the sharper notch would stand more stress.",
    ),
}  # fmt: skip


@pytest.mark.parametrize("name", BAD)
def test_bad_tests_teach(name, tmp_path):
    text, words = BAD[name]
    (tmp_path / "tests.csv").write_text(text, encoding="utf-8")
    done = run("fit", "tests.csv", "--no-fatigue-limit", cwd=tmp_path)
    assert done.returncode == 1
    assert words in done.stderr
    assert not (tmp_path / "faying-fit").exists()


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (["--kt", "3"], "kt: is given as an option and as a column."),
        (["--exponent", "0", "--form", "power"], "kt"),
        (["--form", "cubic"], "'cubic' is not one of 'handbook', 'power'"),
        (["--level", "1.5"], "1.5 is not in the range"),
    ],
)
def test_options(folder, options, words):
    if options[0] == "--exponent":
        mixed = results().replace(",0.1,2.0,", ",0.4,2.0,", 5)
        (folder / "tests.csv").write_text(mixed, encoding="utf-8")
        words = "S_max alone (A3 = 0) cannot take tests at R 0.1 and 0.4 together."
    done = run("fit", "tests.csv", *options, cwd=folder)
    assert done.returncode == 1
    assert words in done.stderr

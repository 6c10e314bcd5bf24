"""The README does what it says: its commands and its Python are run."""

import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")
FENCES = re.findall(r"^```(\w+)\n(.*?)^```", README, flags=re.MULTILINE | re.DOTALL)
SET_UP = "python3 -m venv .venv && .venv/bin/python -m pip install --quiet"
SHELL = [text for language, text in FENCES if language == "sh"]
PYTHON = [text for language, text in FENCES if language == "python"]
CONSOLE = [text for language, text in FENCES if language == "console"]
PATH = f"{Path(sys.executable).parent}{os.pathsep}{os.environ['PATH']}"


def fence_under(heading):
    return re.search(rf"^## {heading}\n.*?^```sh\n(.*?)^```", README, flags=re.MULTILINE | re.DOTALL).group(1)


def run(command, folder):
    settings = {**os.environ, "PATH": PATH, "OMP_NUM_THREADS": "1"}
    done = subprocess.run(command, cwd=folder, env=settings, capture_output=True, text=True, timeout=300, check=False)
    assert done.returncode == 0, done.stderr
    return done.stdout


def test_every_fence_is_run_here():
    assert {language for language, _ in FENCES} == {"sh", "python", "console"}
    assert all([SHELL, PYTHON, CONSOLE])


@pytest.mark.parametrize("heading", ["Run it", "Test it"])
def test_set_up_is_one_line_that_starts_from_nothing(heading):
    lines = fence_under(heading).splitlines()
    assert len(lines) == 1
    assert lines[0].startswith(SET_UP)
    assert lines[0].split(" && ")[-1].startswith(".venv/bin/")


def test_ci_runs_the_test_command_word_for_word():
    script = (ROOT / ".ci" / "run").read_text(encoding="utf-8")
    extract = re.search(r"^command=\$\((awk .*)\)$", script, flags=re.MULTILINE).group(1)
    assert run(["bash", "-c", extract], ROOT) == fence_under("Test it")
    assert 'bash -euo pipefail -c "$command"' in script


def test_run_it(tmp_path):
    last = fence_under("Run it").strip().split(" && ")[-1].removeprefix(".venv/bin/")
    shown = run(["bash", "-euc", last], tmp_path)
    assert "goes first" in shown
    for name in re.findall(r"`([\w-]+\.(?:html|csv|json))`", README.split("## Test it")[0]):
        assert (tmp_path / "faying-out" / name).is_file(), name


def test_console_blocks_in_one_folder(tmp_path):
    """Every command runs, in order, and every line shown under it is in what it prints, whatever the spaces."""
    for line in "".join(CONSOLE).splitlines():
        if line.startswith("$ "):
            printed = run(["bash", "-euo", "pipefail", "-c", line[2:]], tmp_path).split("\n")
            seen = {" ".join(own.split()) for own in printed}
        elif line != "...":
            wanted = " ".join(line.split())
            assert any(wanted in own for own in seen), f"{line!r} is not among {sorted(seen)}"


@pytest.mark.parametrize("program", PYTHON)
def test_python(program, tmp_path):
    assert "life_flights" in run([sys.executable, "-W", "error", "-c", program], tmp_path)
    assert (tmp_path / "faying-out" / "report.html").is_file()


def test_pictures_and_links_are_there():
    for target in re.findall(r"\]\(([^)#]+)\)", README):
        assert "://" in target or (ROOT / target).exists(), target

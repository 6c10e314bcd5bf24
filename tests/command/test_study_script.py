"""The script in notebook cells runs, and says what its comments say."""

import runpy
from pathlib import Path

import matplotlib as mpl

SCRIPT = Path(__file__).parents[2] / "reports" / "samples" / "study.py"


def test_runs_from_an_empty_folder(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    mpl.use("agg")
    names = runpy.run_path(str(SCRIPT))
    lives = list(names["lives"].values())
    assert lives == sorted(lives)
    assert (tmp_path / "faying-out" / "report.html").exists()
    names["plt"].close("all")

"""`faying try` on the command line, and the rate its pages are held to."""

import socket
import sys

import pytest
from click.testing import CliRunner

from reports.command import main
from reports.live.guard import BURST, MOST_PAGES, PER_SECOND, Rates
from tests.live.serving import served


def run(*arguments):
    return CliRunner().invoke(main, ["try", "--no-browser", *arguments])


def test_a_case_that_is_not_there_is_said(tmp_path):
    done = run(str(tmp_path / "none.toml"))
    assert done.exit_code == 1
    assert "there is no such file" in done.output


@pytest.mark.parametrize(
    ("text", "words"), [("a = ", "not valid TOML"), ("a = nan", "NaN"), ("a = 2020-01-01", "date")]
)
def test_a_file_that_holds_no_case_is_said(tmp_path, text, words):
    path = tmp_path / "bad.toml"
    path.write_text(text, encoding="utf-8")
    done = run(str(path))
    assert done.exit_code == 1
    assert words in done.output


def test_without_the_server_it_says_what_to_install(monkeypatch):
    for name in [name for name in sys.modules if name.startswith("reports.live.server")]:
        monkeypatch.delitem(sys.modules, name)
    monkeypatch.setitem(sys.modules, "uvicorn", None)
    done = run()
    assert done.exit_code == 1
    assert "faying[page]" in done.output


def test_a_port_in_use_is_said():
    with socket.socket() as taken:
        taken.bind(("127.0.0.1", 0))
        taken.listen()
        done = run("--port", str(taken.getsockname()[1]))
    assert done.exit_code == 1
    assert "cannot be used" in done.output


def test_a_case_with_faults_opens_all_the_same(tmp_path):
    path = tmp_path / "faulty.toml"
    path.write_text('title = "x"\n[splice]\nkind = "lap"\n', encoding="utf-8")
    (tmp_path / "elsewhere").mkdir()
    with served(tmp_path / "elsewhere", str(path)) as running:
        assert "faults" in running.answer({"title": "x"})
        assert "faulty.toml" in running.ask("GET", "/start")[1]


def test_a_bucket_empties_and_fills_again():
    rates = Rates()
    assert all(rates.take("a", 0.0) for _ in range(int(BURST)))
    assert not rates.take("a", 0.0)
    assert rates.take("b", 0.0)
    assert sum(rates.take("a", 1.0) for _ in range(int(BURST))) == PER_SECOND


def test_few_pages_are_remembered():
    rates = Rates()
    for i in range(10 * MOST_PAGES):
        rates.take(str(i), 0.0)
    assert len(rates._buckets) == MOST_PAGES

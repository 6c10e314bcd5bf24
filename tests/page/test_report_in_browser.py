"""The report in a real browser: opens from disk, sorts, prints, asks nobody for anything."""

from __future__ import annotations

import re
import shutil
import subprocess
from itertools import pairwise

import pytest

import fatigue
import reports

BROWSER = next(filter(None, map(shutil.which, ("chromium", "chromium-browser", "google-chrome"))), None)
needs_browser = pytest.mark.skipif(BROWSER is None, reason="no Chromium on this machine")
QUIET = ["--headless", "--no-sandbox", "--disable-gpu", "--enable-logging=stderr", "--v=0"]


def browse(page, *options, timeout=90):
    return subprocess.run(
        [BROWSER, *QUIET, f"--user-data-dir={page.parent / 'profile'}", *options, page.as_uri()],
        capture_output=True,
        text=True,
        timeout=timeout,
        check=True,
    )


@pytest.fixture(scope="module")
def page(tmp_path_factory):
    folder = tmp_path_factory.mktemp("report")
    reports.write(fatigue.estimate(fatigue.read_case(fatigue.demo_case())), folder)
    return folder / "report.html"


def with_script(page, script):
    """Return a copy of the page that runs a script when it is loaded."""
    copy = page.with_name("copy.html")
    text = page.read_text(encoding="utf-8")
    assert text.count("</body>") == 1
    copy.write_text(text.replace("</body>", f"<script>{script}</script></body>"), encoding="utf-8")
    return copy


def test_nothing_is_asked_of_any_other_place(page):
    text = page.read_text(encoding="utf-8")
    assert "default-src 'none'" in text
    assert not re.search(r"""(?:src|href)\s*=\s*["'](?!#)""", re.sub(r"xlink:href=\"#", "", text))
    assert not re.search(r"url\((?!#)", text)
    assert "@import" not in text
    assert page.stat().st_size < 3_000_000


def test_the_same_case_gives_the_same_bytes(page):
    again = page.parent / "again"
    reports.write(fatigue.estimate(fatigue.read_case(fatigue.demo_case())), again)
    for path in again.iterdir():
        assert path.read_bytes() == (page.parent / path.name).read_bytes(), path.name


def test_every_figure_and_table_has_its_words(page):
    text = page.read_text(encoding="utf-8")
    assert len(re.findall(r"<svg", text)) == len(re.findall(r'<svg role="img" aria-label="[^"]+"', text))
    heads = re.findall(r"<th[ >][^>]*>", text)
    assert heads
    assert all('scope="col"' in head for head in heads)
    levels = [int(level) for level in re.findall(r"<h([1-6])", text)]
    assert levels[0] == 1
    assert levels.count(1) == 1
    assert all(b - a <= 1 for a, b in pairwise(levels))


@needs_browser
def test_opens_without_a_word_on_the_console(page):
    done = browse(page, "--dump-dom")
    assert "Locations, worst first" in done.stdout
    assert "CONSOLE" not in done.stderr


@needs_browser
def test_sorts_by_a_column_both_ways(page):
    script = """
      const table = document.querySelector("table.sorts");
      const press = () => [...table.querySelectorAll("th button")].at(-1).click();
      const lives = () => [...table.tBodies[0].rows].map((row) => row.cells[row.cells.length - 1].dataset.value);
      press(); const up = lives(); press(); const down = lives();
      document.title = JSON.stringify([up.map(Number), down.map(Number)]);
    """
    dom = browse(with_script(page, script), "--dump-dom").stdout
    up, down = re.search(r"<title>\[\[(.*?)\],\[(.*?)\]\]</title>", dom).groups()
    up, down = ([float(v) for v in part.split(",")] for part in (up, down))
    assert up == sorted(up)
    assert down == sorted(down, reverse=True)
    assert len(up) == 6


@needs_browser
@pytest.mark.parametrize("width", [390, 1280])
def test_nothing_sticks_out_of_the_page(page, width):
    script = "document.title = `${document.documentElement.scrollWidth} ${innerWidth}`;"
    dom = browse(with_script(page, script), "--dump-dom", f"--window-size={width},900").stdout
    content, window = map(int, re.search(r"<title>(\d+) (\d+)</title>", dom).groups())
    assert content <= window


@needs_browser
def test_prints_whole(page):
    pdf = page.with_name("report.pdf")
    browse(page, "--no-pdf-header-footer", f"--print-to-pdf={pdf}")
    pages = len(re.findall(rb"/Type\s*/Page\b", pdf.read_bytes()))
    assert 6 <= pages <= 14


@needs_browser
def test_parts_can_be_hidden(page):
    script = """
      const part = document.querySelector("details");
      const before = document.documentElement.scrollHeight;
      part.querySelector("summary").click();
      document.title = `${part.open} ${document.documentElement.scrollHeight < before}`;
    """
    assert "<title>false true</title>" in browse(with_script(page, script), "--dump-dom").stdout

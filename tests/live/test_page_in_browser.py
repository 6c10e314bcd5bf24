"""The page in a real browser: changed, misused, kept, reloaded, saved and reported on, at three widths."""

import os
import re
import shutil
import time
import tomllib
from pathlib import Path

import pytest
from click.testing import CliRunner

from fatigue.case.shipped import demo_case
from reports.command import main
from reports.live.server import page_files
from tests.live.serving import served

sync_playwright = pytest.importorskip("playwright.sync_api", reason="no browser driver here").sync_playwright
BROWSER = next(filter(None, map(shutil.which, ("chromium", "chromium-browser", "google-chrome"))), None)
pytestmark = pytest.mark.skipif(BROWSER is None, reason="no Chromium on this machine")
FIT = '[data-where="hole.driven.fit_percent"] input[type=number]'
WIDTHS = {"laptop": 1440, "tablet": 820, "telephone": 390}


@pytest.fixture(scope="module")
def server(tmp_path_factory):
    with served(tmp_path_factory.mktemp("page")) as running:
        yield running


@pytest.fixture(scope="module")
def browser():
    with sync_playwright() as play:
        own = play.chromium.launch(executable_path=BROWSER, args=["--no-sandbox"])
        yield own
        own.close()


@pytest.fixture
def page(browser, server):
    """A page that has its first answer; whatever it says on the console or asks of others fails the test."""
    context = browser.new_context(viewport={"width": 1440, "height": 1000})
    own = context.new_page()
    complaints, asked = [], []
    own.on("console", lambda message: complaints.append(message.text))
    own.on("pageerror", lambda error: complaints.append(str(error)))
    context.on("request", lambda request: asked.append(request.url))
    own.goto(server.address)
    own.wait_for_selector("#rows tbody tr", timeout=20_000)
    yield own
    context.close()
    assert complaints == []
    assert asked
    # a blob is the page's own memory, which packs the state for the address
    assert not [
        url for url in asked if not url.startswith((f"http://{server.host}/", "data:,", f"blob:http://{server.host}/"))
    ]


def until(page, condition, seconds=30.0):
    """Wait for a condition; the driver's own way evaluates text in the page, which the page's policy forbids."""
    deadline = time.monotonic() + seconds
    while not page.evaluate(condition):
        assert time.monotonic() < deadline, condition
        page.wait_for_timeout(20)


def drawn(page):
    return int(page.evaluate("document.body.dataset.drawn ?? '0'"))


def change(page, selector, value):
    """Fill a field and wait for what it leads to."""
    before = drawn(page)
    page.fill(selector, value)
    until(page, f"Number(document.body.dataset.drawn) > {before}")


def first_row(page):
    return page.text_content("#rows tbody tr:first-child button")


def first_life(page):
    return page.text_content("#rows tbody tr:first-child td:nth-child(4)")


def test_the_page_is_small():
    assert sum(len(body) for body, _ in page_files().values()) < 300_000


def test_a_changed_field_changes_the_governing_row(page):
    assert first_row(page) == "A, upper skin"
    assert first_life(page) in page.text_content("#section")
    change(page, '[data-where="sheet[2].thickness_mm"] input[type=number]', "0.9")
    assert first_row(page) == "C, lower skin"
    assert "(was 2)" in page.text_content("#rows tbody tr:first-child")
    assert "first: row C, lower skin" in page.text_content("#section")
    assert page.text_content("#toml mark") == "thickness_mm = 0.9"
    assert "Stress make-up: row C" in page.text_content("#h-makeup")


def test_the_present_fit_is_marked_and_a_slider_moves_it(page):
    page.wait_for_selector("#present-fit")
    before, left = first_life(page), float(page.get_attribute("#present-fit", "x"))
    slider = page.locator('[data-where="hole.driven.fit_percent"] input[type=range]')
    slider.focus()
    for _ in range(5):
        page.keyboard.press("ArrowRight")
    until(page, f"document.querySelector('#rows tbody td:nth-child(4)').textContent !== '{before}'")
    until(page, f"Number(document.querySelector('#present-fit').getAttribute('x')) > {left}")
    assert float(page.input_value(FIT)) == pytest.approx(0.35)


def test_an_impossible_value_keeps_the_last_good_answer_dimmed(page):
    before = first_life(page)
    change(page, '[data-where="row[2].hole_mm"] input[type=number]', "30")
    field = page.locator('[data-where="row[2].hole_mm"]')
    assert "pitch of 20 mm" in field.locator(".fault").text_content()
    own = field.locator("input[type=number]")
    assert own.get_attribute("aria-invalid") == "true"
    assert page.evaluate(f"document.getElementById('{own.get_attribute('aria-describedby')}').textContent")
    assert page.locator(".fault").count() == 1
    assert "old" in page.get_attribute("#live", "class")
    assert first_life(page) == before
    assert "hole_mm = 30" in page.text_content("#toml")
    change(page, '[data-where="row[2].hole_mm"] input[type=number]', "4")
    assert page.locator(".fault").count() == 0
    assert not page.get_attribute("#live", "class")


def test_an_empty_number_asks_for_one(page):
    page.fill(FIT, "")
    assert page.text_content('[data-where="hole.driven.fit_percent"] .fault') == "Give a number."
    change(page, FIT, "0.4")
    assert page.locator(".fault").count() == 0


def test_undo_and_redo(page):
    page.click('[data-where="sheet[1]"]')
    before = first_life(page)
    change(page, FIT, "0.7")
    after = first_life(page)
    assert after != before
    for press, want in (("#undo", before), ("#redo", after)):
        seen = drawn(page)
        page.click(press)
        until(page, f"Number(document.body.dataset.drawn) > {seen}")
        assert first_life(page) == want


def test_a_row_is_copied_and_removed(page):
    assert page.locator("#rows tbody tr").count() == 6
    page.click("text=Copy row 3")
    until(page, "document.querySelectorAll('#rows tbody tr').length === 8")
    assert "row D" in page.text_content("#section")
    page.click("text=Remove row 4")
    until(page, "document.querySelectorAll('#rows tbody tr').length === 6")


def test_variants_are_kept_named_and_come_back_with_the_address(page, browser):
    for i, fit in enumerate(["0.1", "0.3", "0.5", "0.7"], start=1):
        if page.input_value(FIT) != fit:
            change(page, FIT, fit)
        page.fill("#name", f"fit {fit}")
        page.click("#keep")
        until(page, f"document.querySelectorAll('#variants thead input').length === {i}")
    until(page, "!document.querySelector('#variants').textContent.includes('...')")
    lives = page.locator("#variants tbody tr:nth-child(2) td").all_text_contents()
    assert len(set(lives)) == 4
    assert "hole.driven.fit_percent = 0.7" in page.text_content("#variants")
    page.locator("#variants thead input").first.fill("loosest")
    page.locator("#variants thead input").first.blur()
    page.wait_for_timeout(800)
    state = (first_life(page), lives)
    for where in (page, browser.new_page()):
        where.goto("about:blank" if where is page else page.url)
        if where is page:
            page.go_back()
        where.wait_for_selector("#fit svg", timeout=20_000)
        until(where, "document.querySelectorAll('#variants thead input').length === 4")
        until(where, "!document.querySelector('#variants').textContent.includes('...')")
        shown = where.locator("#variants tbody tr:nth-child(2) td").all_text_contents()
        assert (first_life(where), shown) == state
        assert where.locator("#variants thead input").first.input_value() == "loosest"
        if where is page:
            page.wait_for_timeout(600)
    where.close()


def test_saved_case_and_report(page, server):
    change(page, FIT, "0.45")
    page.fill("#name", "tighter")
    page.click("#save")
    page.wait_for_selector("text=Saved as tighter.toml.")
    case = server.folder / "tighter.toml"
    assert case.read_text(encoding="utf-8").strip() == page.text_content("#toml").strip()
    done = CliRunner().invoke(main, ["life", str(case), "--out", str(server.folder / "out")])
    assert first_life(page) in done.output
    page.click("#save")
    page.wait_for_selector("#replace")
    page.click("#replace")
    page.wait_for_selector("text=Saved as tighter.toml.")
    page.click("#report")
    with page.context.expect_page() as opened:
        page.click("text=Open it", timeout=90_000)
    opened.value.wait_for_selector("h1")
    assert first_life(page) in opened.value.text_content("body")
    opened.value.close()
    assert (server.folder / "tighter report" / "report.html").is_file()


def test_every_demo_opens(page):
    names = [
        name.removeprefix("demo:")
        for name in page.locator("#open option").evaluate_all("all => all.map((o) => o.value)")
        if name.startswith("demo:")
    ]
    assert len(names) >= 5
    for name in names:
        title = tomllib.loads(demo_case(name).read_text(encoding="utf-8"))["title"]
        page.select_option("#open", f"demo:{name}")
        until(page, f"document.querySelector('#title').textContent === {title!r}")
        assert page.locator("#section .hole").count() == page.locator("#rows tbody tr").count()
        assert page.locator(".fault").count() == 0


def test_markup_in_a_name_stays_text(page):
    change(page, '[data-where="row[1].name"] input', "<img src=x onerror=alert(1)>")
    assert "<img" in page.text_content("#section")
    assert page.locator("main img").count() == 0


def test_fifty_changes_a_second_are_coalesced(page):
    asked = []
    page.on("request", lambda request: asked.append(request.url))
    page.evaluate(
        """async (selector) => {
          const own = document.querySelector(selector);
          for (let i = 1; i <= 100; i++) {
            own.value = (i / 200).toFixed(3);
            own.dispatchEvent(new Event("input", { bubbles: true }));
            await new Promise((then) => setTimeout(then, 20));
          }
        }""",
        FIT,
    )
    until(page, "document.querySelector('#toml').textContent.includes('fit_percent = 0.5\\n')")
    sent = sum(url.endswith("/ask/answer") for url in asked)
    assert 3 <= sent < 60
    took = float(page.evaluate("document.body.dataset.took"))
    # the last change waited for at most one answer before its own
    assert took < 3_000


def test_two_pages_do_not_disturb_each_other(page, browser, server):
    other = browser.new_page()
    other.goto(server.address)
    other.wait_for_selector("#fit svg", timeout=20_000)
    theirs = first_life(other)
    change(page, FIT, "0.8")
    page.wait_for_timeout(300)
    assert first_life(other) == theirs
    assert first_life(page) != theirs
    other.close()


def test_usable_by_keyboard_and_with_words(page):
    page.keyboard.press("Tab")
    assert page.evaluate("document.activeElement.id") == "open"
    unnamed = page.evaluate(
        """() => [...document.querySelectorAll("input, select, button")].filter((own) =>
             !(own.labels?.length || own.getAttribute("aria-label") || own.textContent.trim()))
             .map((own) => own.outerHTML)"""
    )
    assert unnamed == []
    assert page.locator("svg:not([role=img][aria-label])").count() == 0
    assert page.evaluate(
        "((ids) => ids.length === new Set(ids).size)([...document.querySelectorAll('[id]')].map((own) => own.id))"
    )
    page.locator("#rows tbody tr:nth-child(3) button").focus()
    page.keyboard.press("Enter")
    assert page.text_content("#h-makeup") == "Stress make-up: row A, lower skin"
    assert page.evaluate("document.activeElement.dataset.place") == "A|lower skin"


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("width", WIDTHS)
def test_nothing_sticks_out_at_three_widths(page, width, scheme):
    page.wait_for_selector("#fit svg", timeout=20_000)
    page.emulate_media(color_scheme=scheme)
    page.set_viewport_size({"width": WIDTHS[width], "height": 950})
    page.wait_for_timeout(200)
    assert page.evaluate("document.documentElement.scrollWidth") <= WIDTHS[width]
    ink, ground = (
        sum(map(int, re.findall(r"\d+", page.evaluate(f"getComputedStyle(document.body).{name}"))[:3]))
        for name in ("color", "backgroundColor")
    )
    assert (ink < ground) == (scheme == "light")
    assert abs(ink - ground) > 400
    outside = page.evaluate(
        """() => [...document.querySelectorAll("svg")].flatMap((svg) => { const frame = svg.getBoundingClientRect();
          const out = (box) => box.left < frame.left - 1 || box.right > frame.right + 1 || box.bottom > frame.bottom;
          const texts = [...svg.querySelectorAll("text")];
          return texts.filter((own) => out(own.getBoundingClientRect())).map((own) => own.textContent); })"""
    )
    assert outside == []
    if os.environ.get("FAYING_SHOTS"):  # to be looked at
        page.screenshot(path=Path(os.environ["FAYING_SHOTS"]) / f"{width}-{scheme}.png")


def test_a_server_that_has_ended_is_said(browser, tmp_path):
    with served(tmp_path) as running:
        own = browser.new_page()
        own.goto(running.address)
        own.wait_for_selector("#fit svg", timeout=20_000)
    own.fill(FIT, "0.2")
    until(own, "document.querySelector('#state').textContent.includes('start `faying try` again')")
    own.close()

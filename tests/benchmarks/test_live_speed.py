"""Smoke test of the live benchmark: it measures, and the answer is no slower than a person would notice."""

import shutil

import pytest

pytest.importorskip("playwright.sync_api", reason="no browser driver here")

from tests.benchmarks.live_speed import measure


@pytest.mark.skipif(not any(map(shutil.which, ("chromium", "chromium-browser", "google-chrome"))), reason="no Chromium")
def test_a_change_is_on_the_screen_before_long():
    found = measure(changes=5)
    assert 0 < found.engine < found.median + 1000
    assert found.median < 3000
    assert found.size < 300_000

"""Time from a change on the page to its new figures on the screen, and of the engine alone.

    python -m tests.benchmarks.live_speed

Changes the fit of the three-row demo, solved by contact, again and again in a headless browser, waiting for each answer
to be drawn. The page itself measures, from the input event to the frame after the drawing. The engine's time is that of
reading, estimating and preparing the answer, loads counted, on one BLAS thread.
"""

from __future__ import annotations

import os
import shutil
import statistics
import subprocess
import sys
import tempfile
from dataclasses import dataclass
from pathlib import Path

from reports.live.server import page_files
from tests.live.serving import served

CHANGES = 40
ENGINE = """
import statistics, sys, time, tomllib
from pathlib import Path
from fatigue.case.shipped import demo_case
from reports.live.answer import answer
tables = tomllib.loads(demo_case().read_text(encoding="utf-8"))
took = []
for i in range(int(sys.argv[1]) + 1):
    tables["hole"]["driven"]["fit_percent"] = 0.2 + 0.01 * i
    start = time.perf_counter()
    answer(tables, Path())
    took.append(1000 * (time.perf_counter() - start))
print(statistics.median(took[1:]))
"""


@dataclass(frozen=True)
class Found:
    """Medians and the slowest tenth [ms], and the page's size [bytes]."""

    engine: float
    median: float
    slow: float
    size: int


def measure(changes: int = CHANGES) -> Found:
    """Measure in a headless browser."""
    from playwright.sync_api import sync_playwright

    browser = next(filter(None, map(shutil.which, ("chromium", "chromium-browser", "google-chrome"))))
    threads = {"OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1"}
    run = [sys.executable, "-c", ENGINE, str(changes)]
    engine = subprocess.run(run, env={**os.environ, **threads}, capture_output=True, text=True, check=True)
    took = []
    with tempfile.TemporaryDirectory() as folder, served(Path(folder)) as server, sync_playwright() as play:
        own = play.chromium.launch(executable_path=browser, args=["--no-sandbox"])
        page = own.new_page(viewport={"width": 1440, "height": 1000})
        page.goto(server.address)
        page.wait_for_selector("#fit svg", timeout=60_000)
        for i in range(changes):
            drawn = page.evaluate("document.body.dataset.drawn")
            page.fill('[data-where="hole.driven.fit_percent"] input[type=number]', f"{0.2 + 0.01 * i:.2f}")
            while page.evaluate("document.body.dataset.drawn") == drawn:
                page.wait_for_timeout(5)
            took.append(float(page.evaluate("document.body.dataset.took")))
        own.close()
    size = sum(len(body) for body, _ in page_files().values())
    return Found(float(engine.stdout), statistics.median(took), statistics.quantiles(took, n=10)[-1], size)


def main() -> None:
    """Print the measured times."""
    found = measure()
    print(f"engine, answer prepared, median  {found.engine:6.0f} ms")
    print(f"change to screen, median         {found.median:6.0f} ms")
    print(f"change to screen, slowest tenth  {found.slow:6.0f} ms")
    print(f"page                             {found.size / 1000:6.0f} KB")


if __name__ == "__main__":
    main()

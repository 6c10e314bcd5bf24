"""The library as a page: what `faying sources` prints, with the curves drawn."""

from __future__ import annotations

from pathlib import Path

from reports.figures.material import library_figures
from reports.figures.style import svg_text
from reports.page import ENVIRONMENT, inline
from reports.writing import write_files


def write_library(text: str, folder: Path) -> list[Path]:
    """Write `sources.html`."""
    drawings = {label: inline(svg_text(figure), label) for label, figure in library_figures().items()}
    page = ENVIRONMENT.get_template("sources.html").render(text=text, drawings=drawings)

    def fill(place: Path) -> None:
        (place / "sources.html").write_text(page, encoding="utf-8")

    return write_files(folder, fill)

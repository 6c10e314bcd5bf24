"""Write an estimate's files: all of them made first, then put in place one rename at a time."""

from __future__ import annotations

import os
import shutil
import tempfile
from collections.abc import Callable
from pathlib import Path

from fatigue.life import Estimate
from reports.beside import set_beside
from reports.figures.sheets import case_figures
from reports.figures.style import save, svg_text
from reports.page import report_html
from reports.tables import csv_text, cycles_frame, in_unit, result_json
from spectra.faults import Fault, InputFaults, listed


def write(
    estimate: Estimate,
    folder: str | Path,
    inch: bool = False,
    on_progress: Callable[[int, int], None] | None = None,
) -> list[Path]:
    """Write the report, the tables and the figures of an estimate.

    Parameters
    ----------
    estimate : Estimate
    folder : str or Path
        Made if it is not there.
    inch : bool
        Stresses in ksi.
    on_progress : callable, optional
        Called with the fits done and the fits in all, while life against fit is computed.

    Returns
    -------
    list of Path
        The files written.

    Raises
    ------
    InputFaults
        If the folder cannot be written to; files that were there stay as they were.
    """
    beside = set_beside(estimate, on_progress)
    figures = case_figures(estimate, beside.fits)
    drawings = {name: svg_text(figure) for name, figure in figures.items()}
    texts = {
        "rows.csv": csv_text(in_unit(estimate.rows, inch)),
        "cycles.csv": csv_text(in_unit(cycles_frame(estimate), inch)),
        "result.json": result_json(estimate, inch),
        "report.html": report_html(estimate, beside, drawings, inch),
        **{f"{name}.svg": text for name, text in drawings.items()},
    }

    def fill(place: Path) -> None:
        for name, text in texts.items():
            (place / name).write_text(text, encoding="utf-8")
        save(figures["critical_row"], place / "critical_row.png")

    return write_files(Path(folder), fill)


def write_files(folder: Path, fill: Callable[[Path], None]) -> list[Path]:
    """Let `fill` write into a temporary folder beside the target, then rename each file into place.

    Raises
    ------
    InputFaults
        If something cannot be written: nothing half-written is left.
    """
    place = None
    try:
        folder.mkdir(parents=True, exist_ok=True)
        place = Path(tempfile.mkdtemp(prefix=".faying-", dir=folder))
        fill(place)
        made_files = sorted(place.iterdir())
        # found before anything is replaced, so that no file is new beside one that is old
        if blocked := [made.name for made in made_files if (folder / made.name).is_dir()]:
            raise IsADirectoryError(0, f"{listed(blocked, 'and')}: a folder of that name is in the way")
        written = []
        for made in made_files:
            target = folder / made.name
            os.replace(made, target)
            written.append(target)
        return written
    except OSError as error:
        reason = error.strerror or str(error)
        raise InputFaults(
            str(folder), [Fault("", f"the output folder cannot be written to ({reason}).", "Name another with --out.")]
        ) from None
    finally:
        if place is not None:
            shutil.rmtree(place, ignore_errors=True)


def write_text(path: Path, text: str) -> None:
    """Write a text file by way of a temporary name, so that it is there whole or not at all."""
    temporary = path.with_name(f".{path.name}.{os.getpid()}.part")
    try:
        temporary.write_text(text, encoding="utf-8")
        os.replace(temporary, path)
    except OSError as error:
        raise InputFaults(str(path), [Fault("", f"cannot be written ({error.strerror or error}).")]) from None
    finally:
        temporary.unlink(missing_ok=True)

"""What commands share: options, faults as messages, text made safe for a terminal."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import wraps
from pathlib import Path
from typing import Any

import click

from spectra.faults import InputFaults

OUT = click.option(
    "--out",
    "out",
    type=click.Path(path_type=Path),
    default=Path("faying-out"),
    show_default=True,
    help="Folder to write into.",
)
INCH = click.option("--inch", is_flag=True, help="Show and write stresses in ksi.")
STRICT = click.option("--strict", is_flag=True, help="Exit with code 1 when any location is flagged.")


def taught(function: Callable[..., Any]) -> Callable[..., Any]:
    """Turn faults of the input into one message and exit code 1."""

    @wraps(function)
    def run(*args: Any, **options: Any) -> Any:
        try:
            return function(*args, **options)
        except InputFaults as faults:
            click.echo(plain(str(faults)), err=True)
            sys.exit(1)

    return run


def plain(text: str) -> str:
    """Return text without control characters, which a file's names could carry into a terminal."""
    return "".join(c if c.isprintable() or c == "\n" else "?" for c in text)


@contextmanager
def progress(words: str) -> Iterator[Callable[[int, int], None]]:
    """Show a bar on a terminal while something runs; quiet in a pipe."""
    with click.progressbar(length=1000, label=words, file=sys.stderr, hidden=not sys.stderr.isatty()) as bar:
        yield lambda done, total: bar.update(1000 * done // max(total, 1) - bar.pos)


def estimate_and_write(case: Path, out: Path, inch: bool, strict: bool) -> None:
    """Estimate a case, write its files and print the ranked table."""
    import fatigue
    import reports

    estimate = fatigue.estimate(fatigue.read_case(case))
    with progress("life against fit") as report:
        written = reports.write(estimate, out, inch, report)
    click.echo(plain(reports.ranked_text(estimate, inch)))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")
    if strict and (estimate.rows["flags"] != "").any():
        click.echo("Flagged, and --strict was given.", err=True)
        sys.exit(1)

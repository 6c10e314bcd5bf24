"""The `faying` command. Everything heavy is imported when a command runs, not when help is shown."""

from __future__ import annotations

import sys
from collections.abc import Callable
from functools import wraps
from pathlib import Path
from typing import Any

import click

OUT = click.option(
    "--out",
    "out",
    type=click.Path(path_type=Path),
    default=Path("faying-out"),
    show_default=True,
    help="Folder to write into.",
)
INCH = click.option("--inch", is_flag=True, help="Show and write stresses in ksi.")


def taught(function: Callable[..., Any]) -> Callable[..., Any]:
    """Turn faults of the input into one message and exit code 1."""

    @wraps(function)
    def run(*args: Any, **options: Any) -> Any:
        from spectra.faults import InputFaults

        try:
            return function(*args, **options)
        except InputFaults as faults:
            click.echo(plain(str(faults)), err=True)
            sys.exit(1)

    return run


def plain(text: str) -> str:
    """Return text without control characters, which a file's names could carry into a terminal."""
    return "".join(c if c.isprintable() or c == "\n" else "?" for c in text)


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100})
@click.version_option(package_name="faying")
def main() -> None:
    """Fatigue life of every fastener row and sheet of a sheet-metal splice.

    Start with `faying demo`, or `faying new mine.toml` and then `faying life mine.toml`.
    """


@main.command()
@click.argument("case", type=click.Path(path_type=Path))
@OUT
@INCH
@click.option("--strict", is_flag=True, help="Exit with code 1 when any location is flagged.")
@taught
def life(case: Path, out: Path, inch: bool, strict: bool) -> None:
    """Estimate the life of every row and sheet of a CASE file and write the report."""
    _estimate_and_write(case, out, inch, strict)


@main.command()
@OUT
@INCH
@click.option("--list", "list_", is_flag=True, help="List the shipped cases instead.")
@click.option("--case", "name", default="crown-lap", show_default=True, help="Which shipped case.")
@taught
def demo(out: Path, inch: bool, list_: bool, name: str) -> None:
    """Run a shipped, invented case."""
    import fatigue
    from fatigue.case.shipped import demo_names
    from spectra.faults import Fault, InputFaults, did_you_mean

    if list_:
        for each in demo_names():
            click.echo(f"{each:24} {fatigue.read_case(fatigue.demo_case(each)).title}")
        return
    if name not in demo_names():
        raise InputFaults(
            "--case", [Fault("", f'there is no shipped case "{name}".', did_you_mean(name, demo_names()))]
        )
    _estimate_and_write(fatigue.demo_case(name), out, inch, strict=False)


def _estimate_and_write(case: Path, out: Path, inch: bool, strict: bool) -> None:
    import fatigue
    import reports

    estimate = fatigue.estimate(fatigue.read_case(case))
    written = reports.write(estimate, out, inch)
    click.echo(plain(reports.ranked_text(estimate, inch)))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")
    if strict and (estimate.rows["flags"] != "").any():
        click.echo("Flagged, and --strict was given.", err=True)
        sys.exit(1)


@main.command()
@click.argument("file", type=click.Path(path_type=Path))
@taught
def new(file: Path) -> None:
    """Write a commented starter case to FILE, which must not be there yet."""
    import fatigue
    from reports.writing import write_text
    from spectra.faults import Fault, InputFaults

    if file.exists():
        raise InputFaults(str(file), [Fault("", "is there already.", "Choose another name; nothing was overwritten.")])
    write_text(file, fatigue.starter_text())
    click.echo(f"Wrote {plain(str(file))}. Now: faying life {plain(str(file))}")


@main.command()
@click.argument("file", type=click.Path(path_type=Path))
@click.option("--column", required=True, help="Column of the CSV file, its unit last: gross_stress_MPa.")
@click.option("--flights", type=float, default=1.0, show_default=True, help="Flights the history covers.")
@click.option("--open", "open_", is_flag=True, help="Count as an open history with half cycles, not a repeating block.")
@click.option(
    "--out", "out", type=click.Path(path_type=Path), default=None, help="Also write the cycles to this CSV file."
)
@INCH
@taught
def count(file: Path, column: str, flights: float, open_: bool, out: Path | None, inch: bool) -> None:
    """Count a recorded history's rainflow cycles."""
    import pandas as pd

    import spectra
    from reports.tables import csv_text, in_unit
    from reports.writing import write_text

    history = spectra.read_history(file, column, flights)
    cycles = history.cycles(close=not open_)
    frame = in_unit(pd.DataFrame({"min_MPa": cycles.low, "max_MPa": cycles.high, "count": cycles.count}), inch)
    click.echo(
        f"{plain(history.name)}: {history.values.size:,} values, "
        f"{cycles.total * flights:,.10g} cycles in {flights:,g} flights"
    )
    for note in history.notes:
        click.echo(f"  {plain(note)}")
    if len(cycles):
        click.echo("Largest ranges, per flight:")
        click.echo(frame.head(12).to_string(index=False, float_format=lambda v: f"{v:.5g}"))
    if out is not None:
        write_text(out, csv_text(frame))
        click.echo(f"Written: {plain(str(out))}")


@main.command()
@click.argument("topic", required=False, type=click.Choice(["materials", "fasteners", "curves", "spectra", "methods"]))
@taught
def sources(topic: str | None) -> None:
    """Print materials, fasteners, curves, spectra and methods with where they come from."""
    from reports.provenance import sources_text

    click.echo(sources_text(topic))

"""`faying count`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import INCH, plain, taught


@click.command()
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

"""`faying new`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import plain, taught


@click.command()
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

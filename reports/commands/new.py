"""`faying new`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import plain, taught


@click.command()
@click.argument("file", type=click.Path(path_type=Path))
@click.option("--recording", is_flag=True, help="Write an invented recording of six flights, faults included, instead.")
@taught
def new(file: Path, recording: bool) -> None:
    """Write a commented starter case to FILE, which must not be there yet."""
    import fatigue
    from reports.writing import write_text
    from spectra.faults import Fault, InputFaults
    from spectra.library import recorded_text

    if file.exists():
        raise InputFaults(str(file), [Fault("", "is there already.", "Choose another name; nothing was overwritten.")])
    write_text(file, recorded_text() if recording else fatigue.starter_text())
    name = plain(str(file))
    click.echo(f"Wrote {name}. Now: faying {f'count {name} --column skin_stress_MPa' if recording else f'life {name}'}")

"""`faying sources`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import plain, taught


@click.command()
@click.argument("topic", required=False, type=click.Choice(["materials", "fasteners", "curves", "spectra", "methods"]))
@click.option(
    "--out",
    "out",
    type=click.Path(path_type=Path),
    default=None,
    help="Also write a page of it into this folder, with the curves drawn.",
)
@taught
def sources(topic: str | None, out: Path | None) -> None:
    """Print materials, fasteners, curves, spectra and methods with where they come from."""
    from reports.provenance import sources_text

    text = sources_text(topic)
    click.echo(text)
    if out is not None:
        from reports.library_page import write_library

        written = write_library(text, out)
        click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")

"""`faying sources`."""

from __future__ import annotations

import click

from reports.commands.common import taught


@click.command()
@click.argument("topic", required=False, type=click.Choice(["materials", "fasteners", "curves", "spectra", "methods"]))
@taught
def sources(topic: str | None) -> None:
    """Print materials, fasteners, curves, spectra and methods with where they come from."""
    from reports.provenance import sources_text

    click.echo(sources_text(topic))

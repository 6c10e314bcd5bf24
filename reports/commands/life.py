"""`faying life`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import INCH, OUT, STRICT, estimate_and_write, taught


@click.command()
@click.argument("case", type=click.Path(path_type=Path))
@OUT
@INCH
@STRICT
@taught
def life(case: Path, out: Path, inch: bool, strict: bool) -> None:
    """Estimate the life of every row and sheet of a CASE file and write the report."""
    estimate_and_write(case, out, inch, strict)

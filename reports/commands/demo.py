"""`faying demo`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import INCH, OUT, STRICT, estimate_and_write, taught


@click.command()
@OUT
@INCH
@STRICT
@click.option("--list", "list_", is_flag=True, help="List the shipped cases instead.")
@click.option("--case", "name", default="crown-lap", show_default=True, help="Which shipped case.")
@taught
def demo(out: Path, inch: bool, strict: bool, list_: bool, name: str) -> None:
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
    estimate_and_write(fatigue.demo_case(name), out, inch, strict)

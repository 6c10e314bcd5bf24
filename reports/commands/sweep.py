"""`faying sweep`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import OUT, plain, taught


@click.command()
@click.argument("case", type=click.Path(path_type=Path))
@click.option(
    "--vary", "vary", multiple=True, required=True, help="key=first:last:steps, as pitch_mm=16:32:9; once or twice."
)
@click.option(
    "--reach", "flights", type=float, help="Also find the value of the one input that gives this many flights."
)
@OUT
@taught
def sweep(case: Path, vary: tuple[str, ...], flights: float | None, out: Path) -> None:
    """Show the life of CASE over one or two of its inputs."""
    import fatigue
    from fatigue.sweeps import parse_vary, reach
    from fatigue.sweeps import sweep as swept_over
    from reports.decisions import reach_text, sweep_text, write_sweep
    from spectra.faults import Fault, InputFaults

    inputs = parse_vary(vary)
    if flights is not None and len(inputs) != 1:
        raise InputFaults("--reach", [Fault("reach", "it solves for one input.", "Give --vary once.")])
    base = fatigue.estimate(fatigue.read_case(case))
    found = reach(base, inputs[0], flights) if flights is not None else []
    swept = swept_over(base, inputs)
    written = write_sweep(swept, out)
    click.echo(plain(sweep_text(swept)))
    if flights is not None:
        click.echo(f"\n{reach_text(inputs[0].key, flights, found)}")
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")

"""`faying scatter`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import OUT, plain, progress, taught


@click.command()
@click.argument("case", type=click.Path(path_type=Path))
@click.option(
    "--spread", "given", multiple=True, help="name=value, as fit_percent=0.2: a standard deviation; repeat at will."
)
@click.option("--joints", default=10_000, show_default=True, help="Joints to draw.")
@click.option("--seed", default=1, show_default=True, help="The same seed gives the same joints.")
@click.option("--check", "checked", default=40, show_default=True, help="Joints solved directly as well.")
@OUT
@taught
def scatter(case: Path, given: tuple[str, ...], joints: int, seed: int, checked: int, out: Path) -> None:
    """Show what drives the life of CASE, and which row cracks first when its inputs scatter."""
    import fatigue
    from fatigue.spreads import numbered, spreads_of
    from fatigue.study import monte_carlo, swings
    from reports.decisions import scatter_text, write_scatter

    spreads = spreads_of(numbered(given), "--spread")
    base = fatigue.estimate(fatigue.read_case(case))
    frame = swings(base, spreads)
    with progress("joints") as report:
        study = monte_carlo(base, spreads, joints, seed, checked, report)
    written = write_scatter(study, frame, out)
    click.echo(plain(scatter_text(study, frame)))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")

"""`faying compare`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import OUT, plain, progress, taught


@click.command()
@click.argument("cases", nargs=-1, required=True, type=click.Path(path_type=Path))
@OUT
@click.option("--kinds", is_flag=True, help="Compare the usual fits of every fastener kind instead.")
@click.option(
    "--fit-percent",
    "fits",
    type=click.FloatRange(-5, 5),
    multiple=True,
    help="Compare this fit instead; give it as often as wanted.",
)
@taught
def compare(cases: tuple[Path, ...], out: Path, kinds: bool, fits: tuple[float, ...]) -> None:
    """Put the hole conditions of one case, or the governing rows of several CASES, beside each other."""
    import fatigue
    from fatigue.fits import compare_conditions, fit_curves, kind_conditions
    from fatigue.hole.kinds import CONDITIONS, Condition
    from reports.comparison import conditions_text, designs_text, write_conditions, write_designs

    estimates = [fatigue.estimate(fatigue.read_case(case)) for case in cases]
    if len(estimates) > 1:
        written = write_designs(estimates, out)
        click.echo(plain(designs_text(estimates)))
    else:
        base = estimates[0]
        own = tuple(Condition(f"fit {fit:+g} %", fit / 100) for fit in fits)
        with progress("hole conditions") as report:
            frame = compare_conditions(base, own or (kind_conditions() if kinds else CONDITIONS), report)
        with progress("life against fit") as report:
            curves = fit_curves(base, on_progress=report)
        written = write_conditions(base, frame, curves, out)
        click.echo(plain(conditions_text(base, frame, curves)))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")

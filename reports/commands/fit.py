"""`faying fit`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import plain, taught


@click.command()
@click.argument("tests", type=click.Path(path_type=Path))
@click.option(
    "--out",
    "out",
    type=click.Path(path_type=Path),
    default=Path("faying-fit"),
    show_default=True,
    help="Folder to write the curve file and the figure into.",
)
@click.option("--name", help="Of the curve family; the file's name if left out.")
@click.option("--alloy", default="not said", show_default=True, help="What the coupons are made of.")
@click.option("--kt", type=float, help="K_t of all coupons, where the file has no such column.")
@click.option("--form", type=click.Choice(["handbook", "power"]), help="Only this form; chosen by the tests otherwise.")
@click.option("--scatter", type=click.Choice(["constant", "growing"]), help="Only this kind of scatter.")
@click.option("--exponent", type=float, help="Hold A3, the exponent of the stress ratio.")
@click.option("--level", type=click.FloatRange(0.5, 0.999), default=0.95, show_default=True, help="Of the intervals.")
@click.option("--no-fatigue-limit", is_flag=True, help="Leave out the random fatigue-limit model beside.")
@taught
def fit(
    tests: Path,
    out: Path,
    name: str | None,
    alloy: str,
    kt: float | None,
    form: str | None,
    scatter: str | None,
    exponent: float | None,
    level: float,
    no_fatigue_limit: bool,
) -> None:
    """Fit an S-N family to TESTS, a CSV file of test results with run-outs, and write it as a curve file.

    Columns: cycles; max_MPa or max_ksi; ratio or min_MPa or min_ksi; if need be kt and run_out (yes or no).
    """
    from fatigue.material.fit import fit_tests
    from reports.fitting import fit_text, write_fit

    found = fit_tests(
        tests,
        name=name,
        alloy=alloy,
        kt=kt,
        form=form,
        scatter=scatter,
        exponent=exponent,
        level=level,
        fatigue_limit=not no_fatigue_limit,
    )
    written = write_fit(found, out)
    click.echo(plain(fit_text(found)))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")
    click.echo(f'In a case: [material."..."] curve = "{plain(str(out / written_curve(written)))}"')


def written_curve(written: list[Path]) -> str:
    """Return the name of the curve file among those written."""
    return next(path.name for path in written if path.suffix == ".toml")

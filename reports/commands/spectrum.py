"""`faying spectrum`."""

from __future__ import annotations

from pathlib import Path

import click

from reports.commands.common import INCH, plain, taught
from spectra.faults import Fault, InputFaults, did_you_mean, show


@click.command()
@click.argument("name", required=False)
@click.option(
    "--factor",
    "factors",
    multiple=True,
    metavar="CHANNEL=MPA",
    help="Stress per unit of a channel in place of the spectrum's own; give it as often as wanted.",
)
@click.option("--case", type=click.Path(path_type=Path), default=None, help="Judge damage at this case's worst hole.")
@click.option("--out", "out", type=click.Path(path_type=Path), default=None, help="Write the table and figure here.")
@INCH
@taught
def spectrum(name: str | None, factors: tuple[str, ...], case: Path | None, out: Path | None, inch: bool) -> None:
    """Show a spectrum's flights, phases and cycles.

    NAME is a shipped spectrum or a spectrum file; without it the shipped ones are listed.
    """
    import spectra
    from reports.loads import REFERENCE, damage_by_phase, spectrum_text, write_spectrum

    if name is None:
        for each, title in spectra.shipped().items():
            click.echo(f"{each:<26} {title}")
        return
    given = spectra.read_spectrum(name)
    own = _factors(factors, list(given.channels))
    history = given.history(own)
    cycles = history.cycles()
    law, said = REFERENCE, ""
    if case is not None:
        import fatigue
        from fatigue.cycle_damage import cycle_damage
        from fatigue.loads import CountedLoads

        estimate = fatigue.estimate(fatigue.read_case(case), CountedLoads(history.name, cycles, history))
        worst = estimate.rows.iloc[0]
        law = f"row {worst['row']}, {worst['sheet']}"
        said = f"In {case.name} under it: {law} is worst, {worst['life_flights']:,.4g} flights"

        parts, shares = damage_by_phase(given, own, lambda table: float(cycle_damage(estimate, table).sum()))
    else:
        parts, shares = damage_by_phase(given, own)
    click.echo(plain(spectrum_text(given, own, cycles, parts, shares, law, inch)))
    if said:
        click.echo(plain(said))
    if out is not None:
        written = write_spectrum(given, own, cycles, shares, law, out, inch)
        click.echo(f"Written to {plain(str(out))}: {', '.join(path.name for path in written)}")


def _factors(given: tuple[str, ...], channels: list[str]) -> dict[str, float]:
    """Read CHANNEL=MPA options."""
    factors, faults = {}, []
    for text in given:
        name, _, value = text.rpartition("=")
        try:
            factors[name] = float(value)
        except ValueError:
            faults.append(Fault("--factor", f"{show(text)} is not CHANNEL=MPA.", "Write gust=12, say."))
            continue
        if name not in channels:
            faults.append(Fault("--factor", f'there is no channel "{name}".', did_you_mean(name, channels)))
    if faults:
        raise InputFaults("faying spectrum", faults)
    return factors

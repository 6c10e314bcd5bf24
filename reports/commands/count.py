"""`faying count`."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from reports.commands.common import INCH, plain, progress, taught
from spectra.faults import Fault, InputFaults, show

if TYPE_CHECKING:
    from spectra import Cycles, Recording
    from spectra.edits import Edited


@click.command()
@click.argument("file", type=click.Path(path_type=Path))
@click.option("--column", required=True, help="Column, its unit last: gross_stress_MPa. With --channel: a name.")
@click.option(
    "--channel",
    "channels",
    multiple=True,
    metavar="NAME=FACTOR",
    help="Count the sum of columns, each times its factor; give it as often as wanted.",
)
@click.option("--flights", type=float, default=None, help="Flights the history covers.  [default: found, else 1]")
@click.option("--time", default=None, help="Column of times: seconds, or dates.")
@click.option("--ground-below", type=float, default=None, help="On the ground at or below this; finds the flights.")
@click.option("--least-flight", type=float, default=300.0, show_default=True, help="Shorter is no flight [s].")
@click.option("--least-ground", type=float, default=60.0, show_default=True, help="Shorter ends no flight [s].")
@click.option(
    "--repair",
    multiple=True,
    type=click.Choice(["missing", "spikes", "drop-outs"]),
    help="Leave these out, and list them.",
)
@click.option(
    "--spike", type=float, default=None, help="How far a spike stands off both neighbours.  [default: learnt]"
)
@click.option("--omit", type=float, default=None, help="Leave out ranges below this.")
@click.option("--clip-above", type=float, default=None, help="Clip what goes above.")
@click.option("--clip-below", type=float, default=None, help="Clip what goes below.")
@click.option("--case", type=click.Path(path_type=Path), default=None, help="Judge damage at this case's worst hole.")
@click.option("--open", "open_", is_flag=True, help="Count as an open history with half cycles, not a repeating block.")
@click.option(
    "--out", "out", type=click.Path(path_type=Path), default=None, help="Write here: a folder, or a .csv file."
)
@INCH
@taught
def count(
    file: Path,
    column: str,
    channels: tuple[str, ...],
    flights: float | None,
    time: str | None,
    ground_below: float | None,
    least_flight: float,
    least_ground: float,
    repair: tuple[str, ...],
    spike: float | None,
    omit: float | None,
    clip_above: float | None,
    clip_below: float | None,
    case: Path | None,
    open_: bool,
    out: Path | None,
    inch: bool,
) -> None:
    """Count a recorded history's rainflow cycles.

    FILE is CSV (compressed too), Parquet or .npy. Levels and ranges are given in the column's unit.
    """
    import spectra
    from reports.loads import Counted, cycles_table, largest_text, write_counted
    from reports.tables import csv_text
    from reports.writing import write_text
    from spectra.units import to_si

    _check(flights, spike, omit, clip_below, clip_above)
    with progress("reading") as tell:
        read = spectra.read_recording(file, column, _factors(channels), time, tell)
    recording = read.repaired(repair, spike)
    found = None
    if ground_below is not None:
        found = recording.flights(spectra.GroundRule(ground_below, least_flight, least_ground))
    number = flights if flights is not None else float(len(found)) if found is not None else 1.0
    with progress("counting") as tell:
        counted = spectra.count_long(recording.values, not open_, on_progress=tell)
    factor = to_si(1.0, recording.unit)
    before = counted.cycles.scaled(factor).per_flight(number)
    edits = _edited(before, omit, clip_below, clip_above, factor)
    cycles = edits[-1].after if edits else before

    click.echo(
        f"{plain(file.name)}, {plain(column)}: {recording.values.size:,} values, "
        f"{before.total * number:,.10g} cycles in {number:,g} flights"
    )
    for note in (*recording.notes, *counted.notes, *_flight_notes(found, recording)):
        click.echo(f"  {plain(note)}")
    damage, by = _judge(case, before, file.name)
    for edit in edits:
        click.echo(f"  {plain(edit.note(damage, by))}")
    if len(cycles):
        click.echo("Largest ranges, per flight:")
        click.echo(largest_text(cycles, inch))
    else:
        click.echo("No cycles: the history is constant.")
    if out is not None and out.suffix == ".csv":
        write_text(out, csv_text(cycles_table(cycles, inch)))
        click.echo(f"Written: {plain(str(out))}")
    elif out is not None:
        shown = Counted(read, read.defects(spike), found, cycles, before if edits else None)
        written = write_counted(shown, out, inch)
        click.echo(f"Written to {plain(str(out))}: {', '.join(path.name for path in written)}")


def _check(
    flights: float | None, spike: float | None, omit: float | None, low: float | None, high: float | None
) -> None:
    faults = [
        Fault(name, f"{value:g} must be greater than 0.")
        for name, value in (("--flights", flights), ("--spike", spike), ("--omit", omit))
        if value is not None and not value > 0
    ]
    if low is not None and high is not None and not low < high:
        faults.append(Fault("--clip-below", f"{low:g} must be below --clip-above {high:g}."))
    if faults:
        raise InputFaults("faying count", faults)


def _factors(channels: tuple[str, ...]) -> dict[str, float] | None:
    """Read NAME=FACTOR options."""
    factors, faults = {}, []
    for text in channels:
        name, equals, factor = text.rpartition("=")
        try:
            factors[name] = float(factor)
        except ValueError:
            equals = ""
        if not equals or not name:
            faults.append(Fault("--channel", f"{show(text)} is not NAME=FACTOR.", "Write pressure_kPa=1.46, say."))
    if faults:
        raise InputFaults("faying count", faults)
    return factors or None


def _edited(cycles: Cycles, omit: float | None, bottom: float | None, top: float | None, factor: float) -> list[Edited]:
    """Clip, then leave out what is small, each where asked for."""
    from spectra.edits import clip, omit_small

    edits: list[Edited] = []
    if bottom is not None or top is not None:
        ends = (-float("inf") if bottom is None else bottom, float("inf") if top is None else top)
        edits.append(clip(cycles, ends[0] * factor, ends[1] * factor))
    if omit is not None:
        edits.append(omit_small(edits[-1].after if edits else cycles, omit * factor))
    return edits


def _flight_notes(found: Any, recording: Recording) -> list[str]:
    if found is None:
        return []
    shortest, longest = found.duration.min() / 60, found.duration.max() / 60
    return [
        f"{len(found)} flights found, of {shortest:.0f} to {longest:.0f} minutes, "
        f"up to {found.high.min():.4g} to {found.high.max():.4g} {recording.unit}"
    ]


def _judge(case: Path | None, cycles: Cycles, name: str) -> tuple[Callable[[Cycles], float] | None, str]:
    """Return how to reckon damage, and what to call it: at a case's worst hole, or by the reference law."""
    from reports.loads import REFERENCE

    if case is None:
        return None, REFERENCE
    import fatigue
    from fatigue.cycle_damage import cycle_damage
    from fatigue.loads import CountedLoads

    estimate = fatigue.estimate(fatigue.read_case(case), CountedLoads(name, cycles, None))
    worst = estimate.rows.iloc[0]
    click.echo(
        f"  in {plain(case.name)}: row {plain(str(worst['row']))}, {plain(str(worst['sheet']))} is worst, "
        f"{worst['life_flights']:,.4g} flights"
    )
    return lambda table: float(cycle_damage(estimate, table).sum()), f"row {worst['row']}, {worst['sheet']}"

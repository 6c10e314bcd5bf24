"""`faying hole`."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any, Literal

import click

from reports.commands.common import plain, taught
from spectra.faults import Fault, InputFaults
from spectra.units import pair_of

QUANTITIES = {
    "hole": ("mm", "Hole diameter."),
    "pitch": ("mm", "Spacing of the holes of a row, or width of the strip."),
    "end": ("mm", "Hole's centre to the sheet's end on the pin-load side; none near if left out."),
    "bypass": ("MPa", "Gross stress that passes the hole by."),
    "bearing": ("MPa", "Pin load over diameter and thickness."),
    "bend": ("MPa", "Bending stress at the surface."),
    "modulus": ("MPa", "Sheet's modulus; 72 000 MPa if left out."),
    "pin-modulus": ("MPa", "Pin's modulus; the sheet's if left out."),
    "yield": ("MPa", "Sheet's yield stress: follow the hole's making, which may yield it; elastic if left out."),
}
"""Name, SI unit and help of every option that comes in two units."""
USUAL_MODULUS = 72e3


def in_either_unit(function: Callable[..., Any]) -> Callable[..., Any]:
    """Add both options of every dimensional quantity."""
    for name, (unit, words) in reversed(QUANTITIES.items()):
        inch = pair_of(unit).inch
        for suffix, text in ((inch, f"The same in {inch}."), (unit, words)):
            variable = f"{name.replace('-', '_')}_{suffix}"
            function = click.option(f"--{name}-{suffix}", variable, type=float, help=text)(function)
    return function


@click.command()
@in_either_unit
@click.option(
    "--edge",
    type=click.Choice(["row", "strip", "wide"]),
    default="row",
    show_default=True,
    help="Neighbours in a row, a strip of its own, or neither.",
)
@click.option(
    "--fit-percent",
    type=float,
    default=0.0,
    show_default=True,
    help="Diametral interference, % of the hole; negative is clearance.",
)
@click.option(
    "--cold-expansion-percent",
    "cold_expansion",
    type=float,
    default=0.0,
    show_default=True,
    help="Mandrel expansion before the pin goes in; needs the yield stress.",
)
@click.option("--poisson", type=float, default=0.33, show_default=True, help="Sheet's Poisson ratio.")
@click.option("--pin-poisson", type=float, default=0.33, show_default=True, help="Pin's Poisson ratio.")
@click.option("--friction", type=float, default=0.0, show_default=True, help="Coefficient, as a stated multiplier.")
@click.option(
    "--format",
    "form",
    type=click.Choice(["table", "csv", "json"]),
    default="table",
    show_default=True,
    help="What to print.",
)
@click.option("--out", "out", type=click.Path(path_type=Path), default=None, help="Also draw both figures into here.")
@taught
def hole(
    edge: Literal["row", "strip", "wide"],
    fit_percent: float,
    cold_expansion: float,
    poisson: float,
    pin_poisson: float,
    friction: float,
    form: str,
    out: Path | None,
    **given: float | None,
) -> None:
    """Solve one hole: peak stress, range factor and contact under bypass, bearing and bending."""
    from fatigue.hole.concentration import bending_thin_sheet
    from fatigue.hole.summary import OneHole, hole_faults, hole_summary
    from reports.holes import as_csv, as_json, as_table, make_hole, write_figures

    value = _in_si(given, needed=("hole",) if edge == "wide" else ("hole", "pitch"))
    diameter, modulus = value["hole"] or 0.0, value["modulus"] or USUAL_MODULUS
    one = OneHole(
        diameter=diameter,
        width=diameter * 1e3 if value["pitch"] is None else value["pitch"],
        bypass=value["bypass"] or 0.0,
        bearing=value["bearing"] or 0.0,
        bend=value["bend"] or 0.0,
        fit=fit_percent / 100,
        edge=edge,
        end=float("inf") if value["end"] is None else value["end"],
        modulus=modulus if value["modulus"] is None else value["modulus"],
        poisson=poisson,
        pin_modulus=modulus if value["pin-modulus"] is None else value["pin-modulus"],
        pin_poisson=pin_poisson,
        friction=friction,
        k_bend=float(bending_thin_sheet(poisson)),
    )
    faults = [Fault(f"--{fault.where.replace('_', '-')}", fault.problem, fault.remedy) for fault in hole_faults(one)]
    if not (one.bypass or one.bearing or one.bend or one.fit):
        faults.append(Fault("", "no load and no fit: nothing happens.", "Give --bypass-MPa, --bearing-MPa or both."))
    if not 0 <= cold_expansion <= 10:
        faults.append(Fault("--cold-expansion-percent", f"{cold_expansion:g} given; allowed is 0 to 10.", ""))
    elif cold_expansion > 0 and value["yield"] is None:
        faults.append(Fault("--yield", "is missing: expansion yields the hole.", "Give --yield-MPa or --yield-ksi."))
    if value["yield"] is not None and not value["yield"] > 0:
        faults.append(Fault("--yield", f"{value['yield']:g} given; it must be above 0.", ""))
    if faults:
        raise InputFaults("faying hole", faults)
    making = None
    if value["yield"] is not None:
        making = make_hole(one, value["yield"], cold_expansion / 100)
        one = replace(one, fit=making.installed.fit)
    summary = hole_summary(one)
    click.echo({"table": as_table, "csv": as_csv, "json": as_json}[form](one, summary, making).rstrip("\n"))
    if out is not None:
        written = write_figures(one, summary, out, making)
        names = ", ".join(path.name for path in written)
        click.echo(f"Written to {plain(str(out))}: {names}", err=form != "table")


def _in_si(given: dict[str, float | None], needed: tuple[str, ...]) -> dict[str, float | None]:
    """Return every quantity in SI, None where it was not given."""
    values: dict[str, float | None] = {}
    faults = []
    for name, (unit, _) in QUANTITIES.items():
        pair, key = pair_of(unit), name.replace("-", "_")
        si, inch = given[f"{key}_{pair.si}"], given[f"{key}_{pair.inch}"]
        if si is not None and inch is not None:
            faults.append(Fault(f"--{name}", f"is given in {pair.si} and in {pair.inch}.", "Give one of the two."))
        values[name] = si if inch is None else inch * pair.factor
        if name in needed and values[name] is None:
            faults.append(Fault(f"--{name}", "is missing.", f"Give --{name}-{pair.si} or --{name}-{pair.inch}."))
    if faults:
        raise InputFaults("faying hole", faults)
    return values

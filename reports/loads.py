"""What `faying count` and `faying spectrum` print and draw."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np
import pandas as pd
from matplotlib.figure import Figure

from reports.figures.cycles import draw_by_phase, draw_range_mean, draw_ranges
from reports.figures.history import draw_flown, draw_history
from reports.figures.loads import draw_exceedances
from reports.figures.style import new_figure, save, styled
from reports.tables import csv_text, in_unit
from reports.writing import write_files
from spectra import Cycles, Recording, Spectrum
from spectra.defects import Defects
from spectra.flights import Flights
from spectra.grid import POWER, power_damage
from spectra.phases import cycles_by_phase
from spectra.units import from_si, to_si

REFERENCE = f"power {POWER:g} of range x maximum"
LINES = 12


@dataclass(frozen=True, eq=False)
class Counted:
    """A recording counted for the terminal and for files.

    Parameters
    ----------
    recording : Recording
        As it was read, defects and all.
    defects : tuple of Defects
    flights : Flights or None
        As found by a ground level.
    cycles : Cycles
        Per flight [MPa].
    before : Cycles or None
        The same before edits, where there were any.
    """

    recording: Recording
    defects: tuple[Defects, ...]
    flights: Flights | None
    cycles: Cycles
    before: Cycles | None = None


def cycles_table(cycles: Cycles, inch: bool = False) -> pd.DataFrame:
    """Return a counted table with its units in the names of its columns."""
    return in_unit(pd.DataFrame({"min_MPa": cycles.low, "max_MPa": cycles.high, "count": cycles.count}), inch)


def flights_table(flights: Flights, unit: str, inch: bool = False) -> pd.DataFrame:
    """Return the flights found, one a line."""
    return in_unit(
        pd.DataFrame(
            {
                "flight": np.arange(1, len(flights) + 1),
                "begin_s": flights.begin,
                "duration_s": flights.duration,
                "min_MPa": flights.low * to_si(1.0, unit),
                "max_MPa": flights.high * to_si(1.0, unit),
            }
        ),
        inch,
    )


def largest_text(cycles: Cycles, inch: bool = False) -> str:
    """Return the largest ranges of a counted table, for a terminal."""
    frame = cycles_table(cycles, inch)
    return frame.head(LINES).to_string(index=False, float_format=lambda v: f"{v:.5g}")


def write_counted(counted: Counted, folder: Path, inch: bool = False) -> list[Path]:
    """Write the counted table, the flights and the figure."""
    tables = {"cycles.csv": cycles_table(counted.cycles, inch)}
    if counted.flights is not None:
        tables["flights.csv"] = flights_table(counted.flights, counted.recording.unit, inch)
    return _write(tables, {"history": counted_figure(counted, inch)}, folder)


def counted_figure(counted: Counted, inch: bool = False) -> Figure:
    """Return the history, the map of its cycles, its level crossings and its ranges."""
    recording, unit, tables = counted.recording, _unit(inch), {"counted": counted.cycles}
    if counted.before is not None:
        tables = {"before": counted.before, "after": counted.cycles}
    with styled():
        figure = new_figure(9.4, 6.6)
        grid = figure.add_gridspec(2, 3, height_ratios=[1.0, 1.25])
        top = figure.add_subplot(grid[0, :])
        whole = counted.cycles if counted.before is None else counted.before
        factor = from_si(1.0, recording.unit)
        limits = (float(whole.low.min()) * factor, float(whole.high.max()) * factor) if len(whole) else None
        draw_history(top, recording.values, recording.time, counted.flights, counted.defects, recording.unit, limits)
        top.set_title(f"{recording.file.path.name}, {recording.column}")
        axes = [figure.add_subplot(grid[1, i]) for i in range(3)]
        draw_range_mean(axes[0], _in(counted.cycles, inch), unit)
        draw_exceedances(axes[1], _in(counted.cycles, inch), unit)
        draw_ranges(axes[2], {name: _in(cycles, inch) for name, cycles in tables.items()}, unit)
        for ax, title in zip(axes, ("Cycles counted", "Levels crossed", "Ranges reached"), strict=True):
            ax.set_title(title)
    return figure


def spectrum_text(
    spectrum: Spectrum,
    factors: Mapping[str, float],
    cycles: Cycles,
    parts: Mapping[str, Cycles],
    damage: Mapping[str, float],
    law: str,
    inch: bool,
) -> str:
    """Return a spectrum's flights and phases and what its cycles are, for a terminal."""
    points = spectrum.sequence().ends
    total = max(sum(damage.values()), 1e-300)
    unit = _unit(inch)
    lines = [spectrum.title, *(f"  {note}" for note in spectrum.notes), f"  seed {spectrum.seed}", ""]
    lines.append(f"Block of {sum(spectrum.flights.values()):,} flights, {points[-1]:,} turning points")
    for kind, number in spectrum.flights.items():
        severity = f", severity {spectrum.severity[kind]:g}" if kind in spectrum.severity else ""
        lines.append(f"  {kind:<12} {number:>9,}{severity}")
    wide = max(len(name) for name in parts)
    lines += ["", "Cycles of a flight by the phase that holds them"]
    lines.append(f"  {'':{wide}}  {'steady ' + unit:>11}  {'cycles':>10}  {'range to':>9}  {'damage':>8}")
    steady = _steady(spectrum, spectrum.channels | dict(factors))
    for name, own in parts.items():
        level = f"{from_si(steady[name], unit):.1f}" if name in steady else ""
        largest = f"{from_si(float(own.range.max()), unit):.1f}" if len(own) else "-"
        share = f"{100 * damage[name] / total:.1f} %"
        lines.append(f"  {name:{wide}}  {level:>11}  {own.total:>10.4g}  {largest:>9}  {share:>8}")
    lines.append(f"  damage by {law}")
    low, high = (from_si(float(value), unit) for value in (cycles.low.min(), cycles.high.max()))
    lines += ["", f"Remote stress {low:.1f} to {high:.1f} {unit}; {cycles.total:,.6g} cycles a flight"]
    return "\n".join(lines)


def write_spectrum(
    spectrum: Spectrum,
    factors: dict[str, float],
    cycles: Cycles,
    damage: Mapping[str, float],
    law: str,
    folder: Path,
    inch: bool = False,
) -> list[Path]:
    """Write a spectrum's counted table and its figure."""
    figures = {"spectrum": spectrum_figure(spectrum, factors, cycles, damage, law, inch)}
    return _write({"cycles.csv": cycles_table(cycles, inch)}, figures, folder)


def spectrum_figure(
    spectrum: Spectrum,
    factors: dict[str, float],
    cycles: Cycles,
    damage: Mapping[str, float],
    law: str,
    inch: bool = False,
) -> Figure:
    """Return the flight of the largest load, the map of the cycles, the levels crossed and the damage by phase."""
    flown, unit = spectrum.sequence(factors), _unit(inch)
    here = int(np.searchsorted(flown.ends, int(np.argmax(flown.values)), side="right"))
    own = slice(int(flown.ends[here - 1]) if here else 0, int(flown.ends[here]))
    with styled():
        figure = new_figure(9.4, 6.6)
        grid = figure.add_gridspec(2, 3, height_ratios=[1.0, 1.25])
        top = figure.add_subplot(grid[0, :])
        values = flown.values[own] * from_si(1.0, unit)
        draw_flown(top, values, flown.phase[own], [phase.name for phase in spectrum.phases], unit)
        top.set_title(f"Flight {here + 1:,} of {flown.ends.size:,}, the one with the largest load", pad=16)
        axes = [figure.add_subplot(grid[1, i]) for i in range(3)]
        draw_range_mean(axes[0], _in(cycles, inch), unit)
        draw_exceedances(axes[1], _in(cycles, inch), unit)
        draw_by_phase(axes[2], damage, law)
        for ax, title in zip(axes, ("Cycles counted", "Levels crossed", "Damage by phase"), strict=True):
            ax.set_title(title)
    return figure


def damage_by_phase(
    spectrum: Spectrum, factors: dict[str, float], damage: Callable[[Cycles], float] = power_damage
) -> tuple[dict[str, Cycles], dict[str, float]]:
    """Return a flight's cycles by phase, and the damage of each part."""
    parts = cycles_by_phase(spectrum, factors)
    return parts, {name: damage(own) for name, own in parts.items()}


def _steady(spectrum: Spectrum, stress_per: Mapping[str, float]) -> dict[str, float]:
    return {
        phase.name: sum(stress_per[name] * value for name, value in phase.steady.items()) for phase in spectrum.phases
    }


def _unit(inch: bool) -> str:
    return "ksi" if inch else "MPa"


def _in(cycles: Cycles, inch: bool) -> Cycles:
    return cycles.scaled(from_si(1.0, _unit(inch)))


def _write(tables: Mapping[str, pd.DataFrame], figures: Mapping[str, Figure], folder: Path) -> list[Path]:
    def fill(place: Path) -> None:
        for name, table in tables.items():
            (place / name).write_text(csv_text(table), encoding="utf-8")
        for name, figure in figures.items():
            for suffix in (".svg", ".png"):
                save(figure, place / f"{name}{suffix}")

    return write_files(folder, fill)


__all__: Sequence[str] = (
    "Counted",
    "counted_figure",
    "cycles_table",
    "damage_by_phase",
    "flights_table",
    "largest_text",
    "spectrum_figure",
    "spectrum_text",
    "write_counted",
    "write_spectrum",
)

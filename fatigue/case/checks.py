"""What no single table can see: names that must exist, geometry that must be possible."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from itertools import pairwise
from pathlib import Path

import spectra
from fatigue.case import schema
from fatigue.case.reader import Tables
from fatigue.material import library
from spectra.faults import Fault, InputFaults, did_you_mean, listed

MOST_HOLE = 0.8
"""Largest hole over pitch that is taken at all; from 0.5 on a location is flagged."""
RAREST = 1e-9
"""Fewest cycles of a block in a flight."""
ROLES = {"one-strap": ("main", "strap"), "two-strap": ("main", "strap"), "doubler": ("skin", "doubler")}


def cross_checks(tables: Tables, folder: Path) -> Iterator[Fault]:
    """Yield every fault that involves more than one key."""
    yield from _loads(tables.loads, folder)
    yield from _names(tables)
    yield from _stack(tables)
    yield from _positions(tables)
    for position, row in enumerate(tables.rows, start=1):
        if row is not None:
            yield from _row(row, f'row[{position}] "{row.name}"', tables)
    for position, sheet in enumerate(tables.sheets, start=1):
        if sheet is not None:
            yield from _sheet(sheet, f'sheet[{position}] "{sheet.name}"', tables, folder)
    for name, hole in tables.holes.items():
        if hole is not None and hole.squeeze_ratio is not None and hole.squeeze_force_N is not None:
            yield Fault(f"hole.{name}", "squeeze_ratio and squeeze_force_N are both given.", "Give one of the two.")
    for name, material in tables.materials.items():
        if material is not None:
            yield from _curve(material.curve, f"material.{name}.curve", folder)
            if material.strain_life is not None:
                known = list(library.strain_lives())
                yield from _known(material.strain_life, known, f"material.{name}.strain_life", "set of constants")
            if material.ultimate_MPa is not None and material.ultimate_MPa < material.yield_MPa:
                yield Fault(
                    f"material.{name}.ultimate_MPa",
                    f"{material.ultimate_MPa:g} MPa is below the yield stress of {material.yield_MPa:g} MPa.",
                    "Swap them, or leave ultimate_MPa out.",
                )


def _loads(loads: schema.LoadsTable | None, folder: Path) -> Iterator[Fault]:
    if loads is None:
        return
    given = [key for key in ("spectrum", "history", "blocks") if getattr(loads, key) is not None]
    if len(given) != 1:
        problem = f"{listed(given, 'and')} are given." if given else "no loads are given."
        yield Fault("loads", problem, "Give exactly one of spectrum, history and blocks.")
    for position, block in enumerate(loads.blocks or [], start=1):
        if block.min_MPa > block.max_MPa:
            yield Fault(
                f"loads.blocks[{position}]",
                f"min_MPa {block.min_MPa:g} is above max_MPa {block.max_MPa:g}.",
                "Swap them.",
            )
        elif block.min_MPa == block.max_MPa:
            yield Fault(
                f"loads.blocks[{position}]",
                f"max_MPa and min_MPa are both {block.max_MPa:g}: that is no cycle.",
                "Give two different stresses or leave the block out.",
            )
        if block.cycles < RAREST:
            yield Fault(
                f"loads.blocks[{position}].cycles",
                f"{block.cycles:g} a flight is less than one in {1 / RAREST:g} flights.",
                "Leave the block out.",
            )
    own = loads.spectrum is not None and loads.spectrum not in spectra.shipped()
    if loads.spectrum is not None and own and not (folder / loads.spectrum).is_file():
        yield Fault(
            "loads.spectrum",
            f'"{loads.spectrum}" is neither a shipped spectrum nor a file.',
            did_you_mean(loads.spectrum, spectra.shipped()),
        )
    elif loads.spectrum is not None:
        yield from _spectrum(loads, folder / loads.spectrum if own else loads.spectrum)
    if loads.factors and loads.spectrum is None:
        yield Fault("loads.factors", "factors combine the channels of a spectrum.", "Leave them out here.")
    if loads.history is not None and loads.history.flights is None and loads.history.ground_below_MPa is None:
        yield Fault(
            "loads.history.flights",
            "is missing: how many flights the recording covers.",
            "Give flights, or ground_below_MPa and time to find them by.",
        )
    if loads.history is not None and loads.history.ground_below_MPa is not None and loads.history.time is None:
        yield Fault("loads.history.time", "is missing: a ground level needs times.", "Name the column of times.")
    if loads.history is not None and not (folder / loads.history.file).exists():
        yield Fault(
            "loads.history.file",
            f'there is no file "{loads.history.file}".',
            "Paths are taken from the folder of the case file.",
        )


def _spectrum(loads: schema.LoadsTable, name: str | Path) -> Iterator[Fault]:
    try:
        channels = spectra.read_spectrum(name).channels
    except InputFaults as error:
        yield from (
            Fault(f"{error.source} {fault.where}".rstrip(), fault.problem, fault.remedy) for fault in error.faults
        )
        return
    for channel in loads.factors:
        yield from _known(channel, channels, f"loads.factors.{channel}", "channel")


def _names(tables: Tables) -> Iterator[Fault]:
    for kind, items in (("sheet", tables.sheets), ("row", tables.rows)):
        seen: set[str] = set()
        for position, item in enumerate(items, start=1):
            if item is not None and item.name in seen:
                yield Fault(
                    f"{kind}[{position}].name", f'"{item.name}" is used twice.', f"Give each {kind} its own name."
                )
            if item is not None:
                seen.add(item.name)


def _stack(tables: Tables) -> Iterator[Fault]:
    splice = tables.splice
    if len(tables.sheets) < 2:
        yield Fault(
            "sheet", f"{len(tables.sheets)} given: a splice joins at least two sheets.", "Add [[sheet]] tables."
        )
    if not tables.rows:
        yield Fault("row", "no rows are given.", "Add at least one [[row]].")
    if splice is None:
        return
    roles = ROLES.get(splice.kind)
    given: list[str | None] = [sheet.role for sheet in tables.sheets if sheet is not None]
    if roles is None:
        if splice.to_centre_mm is not None:
            yield Fault("splice.to_centre_mm", "a lap has no line of symmetry.", "Leave it out.")
        for position, role in enumerate(given, start=1):
            if role is not None:
                yield Fault(f"sheet[{position}].role", "the sheets of a lap have no role.", "Leave it out.")
        return
    if splice.to_centre_mm is None:
        yield Fault(
            "splice.to_centre_mm",
            f"is missing: a {splice.kind} is modelled up to its line of symmetry.",
            "Give the distance from the inner row to it, to_centre_mm or to_centre_in.",
        )
    for position, role in enumerate(given, start=1):
        if role not in roles:
            yield Fault(
                f"sheet[{position}].role",
                f"{role or 'none'} given: the sheets of a {splice.kind} are {listed(roles)}.",
                f'Write role = "{roles[0]}" or role = "{roles[1]}".',
            )
    if len(given) == len(tables.sheets) and all(role in roles for role in given):
        if given.count(roles[0]) != 1:
            yield Fault(
                "sheet", f'{given.count(roles[0])} sheets have role "{roles[0]}".', "Exactly one carries the load in."
            )
        elif splice.kind == "two-strap" and not 0 < given.index("main") < len(given) - 1:
            yield Fault("sheet", "a two-strap butt has its main sheet between straps.", "Order: strap, main, strap.")


def _positions(tables: Tables) -> Iterator[Fault]:
    splice, rows = tables.splice, tables.rows
    if splice is None or len(rows) < 2 or any(row is None for row in rows):
        return
    named = [row for row in rows if row is not None]
    placed = [row for row in named if row.at_mm is not None]
    if placed and splice.row_spacing_mm is not None:
        yield Fault("splice.row_spacing_mm", "rows have at_mm as well.", "Give one or the other.")
    elif not placed and splice.row_spacing_mm is None:
        yield Fault(
            "splice.row_spacing_mm", "is missing.", "Give row_spacing_mm or row_spacing_in, or at_mm in each row."
        )
    elif placed and len(placed) < len(named):
        missing = [row.name for row in named if row.at_mm is None]
        yield Fault("row", f"{listed(missing, 'and')} lack at_mm.", "Give it in every row or in none.")
    elif placed:
        for first, second in pairwise(placed):
            if (second.at_mm or 0.0) <= (first.at_mm or 0.0):
                yield Fault(
                    f'row "{second.name}".at_mm',
                    f"{second.at_mm:g} is not beyond row {first.name} at {first.at_mm:g}.",
                    "Rows stand in order along the load.",
                )
            elif second.at_mm - first.at_mm <= (first.hole_mm + second.hole_mm) / 2:  # type: ignore[operator]
                yield _overlap(first.name, second.name)
    elif splice.row_spacing_mm is not None:
        for first, second in pairwise(named):
            if splice.row_spacing_mm <= (first.hole_mm + second.hole_mm) / 2:
                yield _overlap(first.name, second.name)


def _overlap(first: str, second: str) -> Fault:
    return Fault("row", f"the holes of rows {first} and {second} run into each other.", "Space the rows further apart.")


def _row(row: schema.RowTable, where: str, tables: Tables) -> Iterator[Fault]:
    pitch = row.pitch_mm or (tables.splice.pitch_mm if tables.splice else None)
    if pitch is not None and row.hole_mm >= pitch:
        yield Fault(
            f"{where}.hole_mm",
            f"{row.hole_mm:g} mm is not less than the pitch of {pitch:g} mm.",
            "Use a smaller hole or a larger pitch.",
        )
    elif pitch is not None and row.hole_mm > MOST_HOLE * pitch:
        left = 100 * (1 - row.hole_mm / pitch)
        yield Fault(
            f"{where}.hole_mm",
            f"{row.hole_mm:g} mm leaves {left:.0f} % of the pitch of {pitch:g} mm between holes.",
            f"Nothing is solved here above a hole of {MOST_HOLE:g} of the pitch.",
        )
    for name, edge in (("row", row.edge_mm), ("splice", tables.splice.edge_mm if tables.splice else None)):
        if edge is not None and edge <= row.hole_mm / 2:
            yield Fault(
                f"{where if name == 'row' else name}.edge_mm",
                f"{edge:g} mm puts the hole of row {row.name} outside the sheet.",
                "The distance from the hole's centre to the free end must exceed its radius.",
            )
    yield from _known(row.fastener, [*tables.fasteners, *library.fasteners()], f"{where}.fastener", "fastener")
    own = tables.fasteners.get(row.fastener)
    kind = own.kind if own else library.fastener(row.fastener).kind if row.fastener in library.fasteners() else ""
    if row.friction_share > 0.0 and kind in ("solid-rivet", "blind-rivet"):
        yield Fault(
            f"{where}.friction_share",
            f"{row.friction_share:g} given for a {kind}, which clamps too little and too unsurely to carry load so.",
            "Leave it out, or name a bolt or pin.",
        )
    yield from _known(row.hole, list(tables.holes), f"{where}.hole", "hole table")
    if row.driven_head is not None:
        names = [sheet.name for sheet in tables.sheets if sheet is not None]
        yield from _known(row.driven_head, names, f"{where}.driven_head", "sheet")
    if row.countersink is not None:
        sink = row.countersink
        names = [sheet.name for sheet in tables.sheets if sheet is not None]
        yield from _known(sink.sheet, names, f"{where}.countersink.sheet", "sheet")
        sheet = next((s for s in tables.sheets if s is not None and s.name == sink.sheet), None)
        order = [r.name for r in tables.rows if r is not None]
        if sheet is not None and not _spans(sheet, row.name, order):
            yield Fault(f"{where}.countersink.sheet", f'"{sheet.name}" has no hole in this row.', "")
        if sheet is not None:
            thickness = min([sheet.thickness_mm, *(s.thickness_mm for s in sheet.steps)])
            if sink.depth_mm >= thickness:
                yield Fault(
                    f"{where}.countersink.depth_mm",
                    f"{sink.depth_mm:g} mm goes through {sheet.name}, {thickness:g} mm thick.",
                    "Keep the countersink within the sheet, best within two thirds of it.",
                )


def _spans(sheet: schema.SheetTable, row: str, order: list[str]) -> bool:
    try:
        first = order.index(sheet.from_row) if sheet.from_row else 0
        last = order.index(sheet.to_row) if sheet.to_row else len(order) - 1
        return first <= order.index(row) <= last
    except ValueError:
        return True  # a misspelt row is reported by its own check


def _sheet(sheet: schema.SheetTable, where: str, tables: Tables, folder: Path) -> Iterator[Fault]:
    yield from _known(sheet.material, [*tables.materials, *library.materials()], f"{where}.material", "material")
    order = [row.name for row in tables.rows if row is not None]
    if len(order) < len(tables.rows):
        return
    unknown = False
    ends = [
        ("from_row", sheet.from_row),
        ("to_row", sheet.to_row),
        *(("steps", step.after_row) for step in sheet.steps),
    ]
    for key, name in ends:
        if name is not None and name not in order:
            unknown = True
            yield Fault(f"{where}.{key}", f'there is no row "{name}".', did_you_mean(name, order))
    if unknown or not order:
        return
    first = order.index(sheet.from_row) if sheet.from_row else 0
    last = order.index(sheet.to_row) if sheet.to_row else len(order) - 1
    if first > last:
        yield Fault(f"{where}.from_row", f"row {order[first]} comes after to_row {order[last]}.", "Swap them.")
    places = [order.index(step.after_row) for step in sheet.steps]
    for place in places:
        if not first - 1 <= place <= last:
            yield Fault(
                f"{where}.steps",
                f"a step after row {order[place]} lies outside the sheet: it spans {order[first]} to {order[last]}.",
                "Move the step or the sheet's ends.",
            )
    if places != sorted(set(places)):
        yield Fault(f"{where}.steps", "steps must follow the rows, one at most in each bay.", "Put them in order.")


def _curve(name: str, where: str, folder: Path) -> Iterator[Fault]:
    if name not in library.families() and not (folder / name).is_file():
        yield Fault(
            where, f'"{name}" is neither a shipped S-N family nor a file.', did_you_mean(name, library.families())
        )


def _known(name: str, known: Iterable[str], where: str, what: str) -> Iterator[Fault]:
    known = list(known)
    if name not in known:
        yield Fault(where, f'there is no {what} "{name}".', did_you_mean(name, known) or f"There is no {what} at all.")

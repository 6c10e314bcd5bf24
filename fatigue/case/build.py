"""From checked tables to the records the engine reads."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Any

from fatigue.case import schema
from fatigue.case.checks import cross_checks
from fatigue.case.reader import Tables, digest, parse_tables, parse_toml, read_text
from fatigue.hole.practice import practice_factors
from fatigue.hole.squeeze import head_ratio_of_force
from fatigue.joint import joint_faults
from fatigue.material import library
from fatigue.material.curves import CurveFamily
from fatigue.material.records import Fastener, Material
from fatigue.splice import Countersink, End, HoleCondition, Practice, Row, Sheet, Splice, Start, Step
from spectra.faults import Fault, InputFaults, listed


@dataclass(frozen=True, eq=False)
class Case:
    """Everything a case file says, checked and resolved.

    Parameters
    ----------
    title : str
    source : str
        Name of the file, as given.
    folder : Path
        Paths in the case are taken from here.
    digest : str
        SHA-256 of the file's text.
    loads, life, inspection
        Tables of the file with their defaults filled in.
    splice : Splice
    families : dict
        S-N family of each material, by the material's name.
    echo : dict
        The file's tables in SI keys, to be repeated in the report.
    """

    title: str
    source: str
    folder: Path
    digest: str
    loads: schema.LoadsTable
    life: schema.LifeTable
    inspection: schema.InspectionTable
    splice: Splice
    families: dict[str, CurveFamily]
    echo: dict[str, Any]


def read_case(path: str | Path) -> Case:
    """Read and check a case file.

    Parameters
    ----------
    path : str or Path

    Returns
    -------
    Case

    Raises
    ------
    InputFaults
        With every fault found, each with its path, what was given, what is allowed and what to do.

    Examples
    --------
    >>> import fatigue
    >>> case = fatigue.read_case(fatigue.demo_case())
    >>> case.splice.kind
    'lap'
    """
    path = Path(path)
    return parse_case(read_text(path), str(path), path.resolve().parent)


def parse_case(text: str, source: str, folder: Path) -> Case:
    """Read and check the text of a case file; relative paths in it are taken from `folder`."""
    faults: list[Fault] = []
    tables = parse_tables(parse_toml(text, source), faults)
    faults += cross_checks(tables, folder)
    if faults:
        raise InputFaults(source, faults)
    # nothing is None from here on: a table with faults of its own has been reported
    assert tables.loads is not None
    assert tables.splice is not None
    assert tables.life is not None
    assert tables.inspection is not None
    splice = _splice(tables, tables.splice)
    faults += joint_faults(splice)
    if tables.life.curve == "local-strain":
        faults += _no_strain_life(splice)
    families: dict[str, CurveFamily] = {}
    for sheet in splice.sheets:
        try:
            families[sheet.material.name] = library.family(sheet.material.curve, folder)
        except InputFaults as error:
            where = f'"{sheet.material.name}": {error.source}'.removesuffix(" ")
            faults += (Fault(f"{where} {fault.where}".strip(), fault.problem, fault.remedy) for fault in error.faults)
    if faults:
        raise InputFaults(source, dict.fromkeys(faults))
    return Case(
        title=tables.title,
        source=source,
        folder=folder,
        digest=digest(text),
        loads=tables.loads,
        life=tables.life,
        inspection=tables.inspection,
        splice=splice,
        families=families,
        echo=tables.echo,
    )


def _no_strain_life(splice: Splice) -> list[Fault]:
    known = f"Use a material that has them, or name them in [material]: {listed(library.strain_lives())}."
    wanting = dict.fromkeys(sheet.material.name for sheet in splice.sheets if not sheet.material.strain_life)
    return [Fault("life.curve", f'"{name}" has no strain-life constants.', known) for name in wanting]


def _splice(tables: Tables, table: schema.SpliceTable) -> Splice:
    rows = [row for row in tables.rows if row is not None]
    sheets = [sheet for sheet in tables.sheets if sheet is not None]
    row_names = [row.name for row in rows]
    sheet_names = [sheet.name for sheet in sheets]
    materials = {name: _material(name, item) for name, item in tables.materials.items() if item is not None}
    fasteners = {name: _fastener(name, item) for name, item in tables.fasteners.items() if item is not None}
    start = rows[0].at_mm or 0.0
    edge_default = table.edge_mm

    def build_sheet(index: int, sheet: schema.SheetTable) -> Sheet:
        first = row_names.index(sheet.from_row) if sheet.from_row else 0
        last = row_names.index(sheet.to_row) if sheet.to_row else len(rows) - 1
        comes_in, goes_on = _ends(table.kind, sheet.role, index, len(sheets))
        end_row = rows[first] if goes_on != "free" else rows[last]
        # where nothing else is said, a butted sheet runs up to the butt line
        butted = table.to_centre_mm if goes_on == "free" and comes_in == "loaded" else None
        return Sheet(
            name=sheet.name,
            material=materials.get(sheet.material) or library.material(sheet.material),
            thickness=sheet.thickness_mm,
            first_row=first,
            last_row=last,
            start=comes_in,
            end=goes_on,
            role=sheet.role or "",
            edge=sheet.edge_mm or end_row.edge_mm or edge_default or butted or 2.0 * end_row.hole_mm,
            steps=tuple(Step(row_names.index(step.after_row), step.thickness_mm) for step in sheet.steps),
        )

    def build_row(index: int, row: schema.RowTable) -> Row:
        spacing = table.row_spacing_mm or 0.0
        fastener = fasteners.get(row.fastener) or library.fastener(row.fastener)
        hole = tables.holes[row.hole]
        assert hole is not None
        sink = row.countersink
        return Row(
            name=row.name,
            position=row.at_mm - start if row.at_mm is not None else index * spacing,
            hole_diameter=row.hole_mm,
            pitch=row.pitch_mm or table.pitch_mm,
            fastener=fastener,
            hole=_hole(row.hole, hole, fastener, row.hole_mm),
            countersink=Countersink(sheet_names.index(sink.sheet), sink.depth_mm) if sink else None,
            flexibility=row.flexibility_mm_per_N or table.flexibility_mm_per_N,
            head_fixity=row.head_fixity,
            slack=row.slack_mm,
            friction_share=row.friction_share,
            driven_sheet=sheet_names.index(row.driven_head) if row.driven_head else None,
        )

    return Splice(
        kind=table.kind,
        sheets=tuple(build_sheet(index, sheet) for index, sheet in enumerate(sheets)),
        rows=tuple(build_row(index, row) for index, row in enumerate(rows)),
        width=table.pitch_mm,
        free_length=table.free_length_mm,
        to_centre=table.to_centre_mm or 0.0,
        flexibility=table.flexibility,
        bending=table.bending,
        ends=table.ends,
        edge=table.concentration,
        staggered=table.staggered,
    )


def _ends(kind: str, role: str | None, index: int, sheets: int) -> tuple[Start, End]:
    """Say where the load comes into a sheet and where the sheet goes on beyond the rows."""
    if kind == "lap":
        return ("loaded" if index == 0 else "free"), ("out" if index == sheets - 1 else "free")
    if role == "main":
        return "loaded", "free"
    if role == "skin":
        return "loaded", "centre"
    return "free", "centre"


def _material(name: str, table: schema.MaterialTable) -> Material:
    return Material(
        name=name,
        modulus=table.modulus_MPa,
        poisson=table.poisson,
        yield_stress=table.yield_MPa,
        ultimate=table.ultimate_MPa or table.yield_MPa,
        curve=table.curve,
        strain_life=table.strain_life or "",
        source="the case file",
        how="given by the user",
    )


def _fastener(name: str, table: schema.FastenerTable) -> Fastener:
    return Fastener(
        name=name,
        kind=table.kind,
        modulus=table.modulus_MPa,
        poisson=table.poisson,
        source="the case file",
        how="given by the user",
    )


def _hole(name: str, table: schema.HoleTable, fastener: Fastener, diameter: float) -> HoleCondition:
    usual = practice_factors(fastener.kind, table.cold_expansion_percent > 0.0)
    given = table.practice
    own = given.hole is not None or given.filling is not None
    force = table.squeeze_force_N
    ratio = table.squeeze_ratio if force is None else head_ratio_of_force(force, diameter)
    return HoleCondition(
        name=name,
        fit_percent=table.fit_percent,
        cold_expansion_percent=table.cold_expansion_percent,
        squeeze_ratio=ratio,
        friction=table.friction,
        practice=Practice(
            hole=given.hole if given.hole is not None else usual.hole,
            filling=given.filling if given.filling is not None else usual.filling,
            source="the case file" if own else usual.source,
        ),
    )

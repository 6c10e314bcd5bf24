"""The report page: one self-contained file that prints well."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from jinja2 import Environment, PackageLoader, StrictUndefined
from markupsafe import Markup

from fatigue.cautions import CAUTIONS
from fatigue.life import Estimate
from fatigue.references import methods, references
from reports.beside import Beside
from reports.figures.style import life_text
from reports.fit_words import fit_story
from reports.tables import answer, in_unit, share_text, threshold_text, versions
from reports.why import why_first

LABELS = {
    "critical_row": "Section through the splice and stress make-up by location",
    "loads": "Exceedances of the remote stress and damage by stress range",
    "curve": "S-N family with the governing location's cycles",
    "life_against_fit": "Life of every row against the fit of its holes",
}
"""What each figure shows, for who cannot see it."""
ENVIRONMENT = Environment(loader=PackageLoader("reports"), autoescape=True, undefined=StrictUndefined)
ENVIRONMENT.filters.update(life=life_text, share=share_text)


def inline(svg: str, label: str) -> Markup:
    """Return an SVG document for use within the page, with a label for who cannot see it."""
    body = svg[svg.index("<svg") + len("<svg") :]
    return Markup('<svg role="img" aria-label="{}"').format(label) + Markup(body)


def report_html(estimate: Estimate, beside: Beside, drawings: Mapping[str, str], inch: bool = False) -> str:
    """Return the whole report as HTML.

    Parameters
    ----------
    estimate : Estimate
    beside : Beside
        What stands beside the estimate.
    drawings : mapping
        The figures of `case_figures` as SVG.
    inch : bool
        Stresses in ksi.
    """
    shown = in_unit(estimate.rows, inch)
    names = dict(zip(estimate.rows.columns, shown.columns, strict=True))
    conditions, formulas = in_unit(beside.conditions, inch), in_unit(beside.formulas, inch)
    flagged: dict[str, list[str]] = {}
    for _, line in estimate.rows.iterrows():
        for flag in filter(None, str(line["flags"]).split("; ")):
            flagged.setdefault(flag, []).append(f"{line['row']} {line['sheet']}")
    return ENVIRONMENT.get_template("report.html").render(
        title=estimate.case.title,
        answer=answer(estimate),
        threshold=threshold_text(estimate),
        rows=shown.to_dict(orient="records"),
        col=names,
        stress="ksi" if inch else "MPa",
        digits=1 if inch else 0,
        route=estimate.case.life.credit,
        figure={name: inline(drawings[name], label) for name, label in LABELS.items()},
        why=why_first(estimate),
        parted=[estimate.opinion.parted[i] for i in estimate.order],
        story=fit_story(estimate, beside.fits),
        conditions=conditions.to_dict(orient="records"),
        con=dict(zip(beside.conditions.columns, conditions.columns, strict=True)),
        formulas=formulas.to_dict(orient="records"),
        fcol=dict(zip(beside.formulas.columns, formulas.columns, strict=True)),
        free_body=estimate.joint.free_body,
        compressive=bool(estimate.local.levels[0] < 0.0),
        load_name=estimate.loads.name,
        load_notes=estimate.loads.notes,
        cycles=estimate.loads.cycles.total,
        inputs=_input_rows(estimate.case.echo),
        methods=methods(),
        references=references(),
        cautions=CAUTIONS,
        flags=flagged,
        residual=estimate.joint.equilibrium_residual,
        remote=[
            (sheet.name, stress * max(float(estimate.local.levels[-1]), 0.0))
            for sheet, stress in zip(estimate.case.splice.sheets, estimate.joint.remote_per_stress, strict=True)
        ],
        materials=_materials(estimate),
        versions=versions(),
        digest=estimate.case.digest,
        source=Path(estimate.case.source).name,
    )


def _input_rows(echo: dict[str, Any], where: str = "") -> list[tuple[str, str]]:
    """Return the case file's keys and values as flat lines."""
    lines: list[tuple[str, str]] = []
    for key, value in echo.items():
        path = f"{where}.{key}" if where else key
        if isinstance(value, dict) and value:
            lines += _input_rows(value, path)
        elif isinstance(value, list) and value and isinstance(value[0], dict):
            for position, item in enumerate(value, start=1):
                lines += _input_rows(item, f"{path}[{position}]")
        elif value not in ({}, [], None):
            lines.append((path, f"{value:g}" if isinstance(value, float) else str(value)))
    return lines


def _materials(estimate: Estimate) -> list[tuple[str, str, str]]:
    """Return each material, family and fastener with its source and how it was obtained."""
    splice = estimate.case.splice
    found = {(s.material.name, s.material.source, s.material.how): None for s in splice.sheets}
    for family in estimate.case.families.values():
        found[f"S-N family {family.name}", family.source, family.how] = None
    for row in splice.rows:
        found[row.fastener.name, row.fastener.source, row.fastener.how] = None
        practice = row.hole.practice
        found[
            f"practice factors of hole {row.hole.name}", f"{practice.hole:g} x {practice.filling:g}", practice.source
        ] = None
    return list(found)

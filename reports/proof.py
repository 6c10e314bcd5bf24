"""The evidence as text, table and page."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from pathlib import Path

import pandas as pd

from fatigue.references import references
from reports.comparison import aligned
from reports.evidence.check import KINDS, Outcome
from reports.figures.evidence import evidence_figures
from reports.figures.style import svg_text
from reports.page import ENVIRONMENT, inline
from reports.tables import csv_text, versions
from reports.writing import write_files


def source_text(key: str) -> str:
    """Return a source in full, words as they are."""
    known = references()
    return str(known[key]) if key in known else key


def evidence_frame(outcomes: Sequence[Outcome]) -> pd.DataFrame:
    """Return one line per check."""
    return pd.DataFrame(
        {
            "subject": [o.check.subject for o in outcomes],
            "check": [o.check.what for o in outcomes],
            "source": [source_text(o.check.source) for o in outcomes],
            "how_obtained": [o.check.how for o in outcomes],
            "printed": [printed(o) for o in outcomes],
            "computed": [o.computed for o in outcomes],
            "unit": [o.check.unit for o in outcomes],
            "difference": [o.difference for o in outcomes],
            "allowed": [o.check.tolerance for o in outcomes],
            "why_so_wide": [o.check.reason for o in outcomes],
            "verdict": ["holds" if o.holds else "FAILS" for o in outcomes],
        }
    )


def printed(outcome: Outcome) -> str:
    """Return what was printed, a range as such."""
    check = outcome.check
    return f"{check.printed} to {check.upto}" if check.upto else check.printed


def summary_text(outcomes: Sequence[Outcome]) -> str:
    """Return the count of checks, of each kind and of failures, in a sentence."""
    kinds = Counter(o.check.how for o in outcomes)
    parts = ", ".join(f"{number} {kind}" for kind, number in sorted(kinds.items(), key=lambda item: -item[1]))
    failed = sum(not o.holds for o in outcomes)
    verdict = "all hold" if not failed else f"{failed} FAIL"
    return f"{len(outcomes)} checks: {parts}; {verdict}."


def evidence_text(outcomes: Sequence[Outcome]) -> str:
    """Return the evidence as a table for the terminal."""
    lines = []
    for subject in dict.fromkeys(o.check.subject for o in outcomes):
        own = [o for o in outcomes if o.check.subject == subject]
        cells = [
            (
                o.check.what,
                printed(o),
                f"{o.computed:.7g}",
                o.check.unit,
                f"{o.difference:+.1e}",
                f"{o.check.tolerance:.1e}",
                o.check.how,
                "holds" if o.holds else "FAILS",
            )
            for o in own
        ]
        heads = (subject, "printed", "computed", "unit", "difference", "allowed", "how obtained", "verdict")
        lines += [*aligned(heads, cells, left=(0, 3, 6, 7)), ""]
    return "\n".join([*lines, summary_text(outcomes)])


def evidence_html(outcomes: Sequence[Outcome]) -> str:
    """Return the evidence as a self-contained page."""
    subjects: dict[str, list[Outcome]] = {}
    for outcome in outcomes:
        subjects.setdefault(outcome.check.subject, []).append(outcome)
    drawings = {
        label: inline(svg_text(figure), label)
        for label, (subject, figure) in evidence_figures().items()
        if subject in subjects
    }
    return ENVIRONMENT.get_template("evidence.html").render(
        summary=summary_text(outcomes),
        subjects=subjects,
        printed=printed,
        source=source_text,
        kinds=KINDS,
        drawings=drawings,
        versions=versions(),
    )


def write_evidence(outcomes: Sequence[Outcome], folder: Path) -> list[Path]:
    """Write `evidence.csv` and `evidence.html`."""
    texts = {"evidence.csv": csv_text(evidence_frame(outcomes)), "evidence.html": evidence_html(outcomes)}

    def fill(place: Path) -> None:
        for name, text in texts.items():
            (place / name).write_text(text, encoding="utf-8")

    return write_files(folder, fill)

"""What makes a splice impossible as a mechanism, in words."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from fatigue.joint.flexibility import SINGLE_SHEAR_ONLY
from fatigue.joint.layout import arrays_of, layout_of
from fatigue.joint.slack import follow_slack
from fatigue.splice import Row, Sheet, Splice
from spectra.faults import Fault, listed


def joint_faults(splice: Splice) -> list[Fault]:
    """Return what makes a splice impossible as a mechanism, everything at once.

    Parameters
    ----------
    splice : Splice

    Returns
    -------
    list of Fault
        Each with the names of the rows and sheets concerned; empty for a sound splice.
    """
    faults = [*_ends(splice), *_stacks(splice)]
    for row in splice.rows:
        faults += _row(row)
    for sheet in splice.sheets:
        faults += _sheet(splice, sheet)
    if not faults:
        faults += _disconnected(splice)
    if not faults:
        faults += _double_shear(splice)
    if not faults:
        faults += _never_closed(splice)
    return faults


def _ends(splice: Splice) -> Iterator[Fault]:
    starts = [sheet.name for sheet in splice.sheets if sheet.start == "loaded"]
    if len(starts) != 1:
        given = f"comes in by {listed(starts, 'and')}" if starts else "comes in by no sheet"
        yield Fault("sheet", f"the load {given}.", "Exactly one sheet brings it in.")
    ends = {sheet.end for sheet in splice.sheets} - {"free"}
    if not ends:
        yield Fault("sheet", "no sheet goes on beyond the last row.", "One must take the load out, or to the centre.")
    if "centre" in ends and splice.to_centre <= 0.0:
        yield Fault(
            "splice.to_centre",
            f"{splice.to_centre:g} mm given: the line of symmetry lies on the inner row or before it.",
            "Give the distance from the inner row to it.",
        )
    if "out" in ends and splice.to_centre > 0.0:
        yield Fault("splice.to_centre", "a lap has no line of symmetry.", "Leave it out.")


def _stacks(splice: Splice) -> Iterator[Fault]:
    for r, row in enumerate(splice.rows):
        stack = [sheet.name for sheet in splice.sheets if sheet.spans(r)]
        if len(stack) < 2:
            where = f"only {stack[0]}" if stack else "no sheet"
            yield Fault(
                f'row "{row.name}"',
                f"has its holes in {where}.",
                "A row joins two sheets at least: extend a sheet to it, or leave it out.",
            )


def _row(row: Row) -> Iterator[Fault]:
    where = f'row "{row.name}"'
    if row.flexibility is not None and not (np.isfinite(row.flexibility) and row.flexibility > 0.0):
        yield Fault(
            f"{where}.flexibility",
            f"{row.flexibility:g} mm/N given: a fastener gives way under load, so it must be above 0.",
            "Give slip per load of one fastener, or leave it to the formula.",
        )
    if not (np.isfinite(row.slack) and row.slack >= 0.0):
        yield Fault(f"{where}.slack", f"{row.slack:g} mm given: it must be 0 or more.", "0 is a tight row.")
    if not 0.0 <= row.friction_share < 1.0:
        yield Fault(
            f"{where}.friction_share",
            f"{row.friction_share:g} given: it must be at least 0 and below 1.",
            "Give the share of the row's load that the clamped faces carry.",
        )


def _sheet(splice: Splice, sheet: Sheet) -> Iterator[Fault]:
    where, names = f'sheet "{sheet.name}"', [row.name for row in splice.rows]
    last = len(names) - 1
    if not 0 <= sheet.first_row <= sheet.last_row <= last:
        yield Fault(
            where,
            f"is given from row {sheet.first_row + 1} to row {sheet.last_row + 1} of {last + 1}.",
            "Its first row must not come after its last one.",
        )
        return
    first_name, last_name = names[sheet.first_row], names[sheet.last_row]
    if sheet.start == "loaded" and sheet.first_row > 0:
        passed = listed(names[: sheet.first_row], "and")
        yield Fault(
            where,
            f"comes in past {passed} without a hole there: its first row is {first_name}.",
            "Let it start with the first row.",
        )
    if sheet.end != "free" and sheet.last_row < last:
        passed = listed(names[sheet.last_row + 1 :], "and")
        reach = "the line of symmetry" if sheet.end == "centre" else "the far side"
        yield Fault(
            where,
            f"is shorter than its rows: it goes on to {reach}, but its holes end at row {last_name}, before {passed}.",
            f"Let it take in row {names[-1]} too.",
        )
    for step in sheet.steps:
        if not sheet.first_row - 1 <= step.after_row <= sheet.last_row:
            row = names[step.after_row] if 0 <= step.after_row <= last else f"number {step.after_row + 1}"
            yield Fault(
                f"{where}.steps",
                f"a step after row {row} lies outside the sheet, which spans {first_name} to {last_name}.",
                "Move the step or the sheet's ends.",
            )


def _disconnected(splice: Splice) -> Iterator[Fault]:
    """Yield a fault for every sheet that no chain of fasteners ties to the one the load comes in by."""
    loaded = splice.first_loaded
    reached = {loaded}
    stacks = [{s for s, sheet in enumerate(splice.sheets) if sheet.spans(r)} for r in range(len(splice.rows))]
    while new := {s for stack in stacks if stack & reached for s in stack} - reached:
        reached |= new
    carrying = listed([splice.sheets[s].name for s in sorted(reached)], "and")
    for s, sheet in enumerate(splice.sheets):
        if s not in reached:
            rows = listed([splice.rows[r].name for r in range(sheet.first_row, sheet.last_row + 1)], "and")
            yield Fault(
                f'sheet "{sheet.name}"',
                f"does not overlap the sheets that carry the load: its rows {rows} hold nothing of {carrying}.",
                "Give them a row in common.",
            )


def _double_shear(splice: Splice) -> Iterator[Fault]:
    if splice.flexibility not in SINGLE_SHEAR_ONLY:
        return
    layout = layout_of(splice)
    rows = dict.fromkeys(layout.interface_row[layout.planes == 2].tolist())
    wanting = [splice.rows[r].name for r in rows if splice.rows[r].flexibility is None]
    if wanting:
        plural = len(wanting) > 1
        yield Fault(
            "splice.flexibility",
            f'"{splice.flexibility}" is a single-shear formula and row{"s" * plural} {listed(wanting, "and")} '
            f"{'are' if plural else 'is'} in double shear.",
            'Use "huth" or "tate-rosenfeld", or give a measured flexibility.',
        )


def _never_closed(splice: Splice) -> Iterator[Fault]:
    """Yield a fault for every row whose clearance the sheet's own strength is too small to close."""
    if not any(row.slack > 0.0 for row in splice.rows):
        return
    layout = layout_of(splice)
    closing = follow_slack(layout, arrays_of(splice)).closing
    first = splice.sheets[splice.first_loaded]
    for r, row in enumerate(splice.rows):
        needed = float(closing[layout.interface_row == r].min())
        if needed > first.material.ultimate:
            when = "no load closes it" if np.isinf(needed) else f"it closes at {needed:.0f} MPa remote stress"
            yield Fault(
                f'row "{row.name}".slack',
                f"a clearance of {row.slack:g} mm is larger than the load can close: {when}, and {first.name} has a "
                f"strength of {first.material.ultimate:.0f} MPa.",
                "Its fasteners carry nothing: reduce the clearance or leave the row out.",
            )

"""What cannot be a joint, in words, with the names of rows and sheets."""

from dataclasses import replace

import pytest

from fatigue.joint import joint_faults
from fatigue.splice import Sheet, Step
from tests.support import ALUMINIUM, make_doubler, make_lap, make_one_strap, make_two_strap


def sheets(splice, **changes):
    """Change sheets by position: first=..., second=..."""
    order = {"first": 0, "second": 1, "third": 2}
    made = list(splice.sheets)
    for name, change in changes.items():
        made[order[name]] = replace(made[order[name]], **change)
    return replace(splice, sheets=tuple(made))


def first_row(splice, **change):
    return replace(splice, rows=(replace(splice.rows[0], **change), *splice.rows[1:]))


def apart():
    """A main sheet and a strap with rows of their own, each with a filler."""
    splice = make_one_strap(rows=4)
    main, strap = splice.sheets
    fillers = tuple(Sheet(f"filler {i}", ALUMINIUM, 1.0, 2 * i, 2 * i + 1) for i in range(2))
    return replace(splice, sheets=(replace(main, last_row=1), *fillers, replace(strap, first_row=2)))


CASES = {
    "holes in one sheet": (
        sheets(make_one_strap(rows=3), second={"first_row": 1}),
        'row "r0": has its holes in only main. A row joins two sheets at least: extend a sheet to it, or leave it out.',
    ),
    "holes in no sheet": (
        sheets(make_doubler(rows=3), first={"first_row": 1}, second={"first_row": 1}),
        'row "r0": has its holes in no sheet.',
    ),
    "a strap too short": (
        sheets(make_one_strap(rows=3), second={"last_row": 1}),
        'sheet "strap": is shorter than its rows: it goes on to the line of symmetry, but its holes end at row r1, '
        "before r2. Let it take in row r2 too.",
    ),
    "a sheet that comes in late": (
        sheets(make_lap(), first={"first_row": 1}),
        'sheet "upper": comes in past r0 without a hole there: its first row is r1.',
    ),
    "a stack apart": (
        apart(),
        'sheet "strap": does not overlap the sheets that carry the load: its rows r2 and r3 hold nothing of main and '
        "filler 0. Give them a row in common.",
    ),
    "no way out": (sheets(make_lap(), second={"end": "free"}), "no sheet goes on beyond the last row."),
    "two ways in": (
        sheets(make_lap(), second={"start": "loaded"}),
        "the load comes in by upper and lower. Exactly one sheet brings it in.",
    ),
    "no way in": (sheets(make_lap(), first={"start": "free"}), "the load comes in by no sheet."),
    "a step outside": (
        sheets(make_one_strap(rows=3), second={"steps": (Step(7, 1.0),)}),
        'sheet "strap".steps: a step after row number 8 lies outside the sheet, which spans r0 to r2.',
    ),
    "flexibility of nothing": (
        first_row(make_lap(), flexibility=0.0),
        'row "r0".flexibility: 0 mm/N given: a fastener gives way under load, so it must be above 0.',
    ),
    "flexibility below nothing": (
        first_row(make_lap(), flexibility=-1e-5),
        'row "r0".flexibility: -1e-05 mm/N given: a fastener gives way under load, so it must be above 0.',
    ),
    "slack below nothing": (first_row(make_lap(), slack=-0.1), 'row "r0".slack: -0.1 mm given: it must be 0 or more.'),
    "all by friction": (
        first_row(make_lap(), friction_share=1.0),
        'row "r0".friction_share: 1 given: it must be at least 0 and below 1.',
    ),
    "slack that never closes": (
        first_row(make_lap(), slack=3.0),
        'row "r0".slack: a clearance of 3 mm is larger than the load can close: it closes at',
    ),
    "single shear only": (
        replace(make_two_strap(), flexibility="swift"),
        'splice.flexibility: "swift" is a single-shear formula and rows r0, r1 and r2 are in double shear.',
    ),
    "centre on the row": (
        replace(make_doubler(), to_centre=0.0),
        "splice.to_centre: 0 mm given: the line of symmetry lies on the inner row or before it.",
    ),
    "centre of a lap": (replace(make_lap(), to_centre=5.0), "splice.to_centre: a lap has no line of symmetry."),
}


@pytest.mark.parametrize("name", CASES)
def test_message(name):
    splice, words = CASES[name]
    assert any(words in str(fault) for fault in joint_faults(splice)), [str(f) for f in joint_faults(splice)]


@pytest.mark.parametrize("make", [make_lap, make_one_strap, make_two_strap, make_doubler])
def test_a_sound_splice_has_none(make):
    assert joint_faults(make()) == []


def test_everything_wrong_is_told_at_once():
    splice = first_row(sheets(make_one_strap(rows=3), second={"last_row": 1}), flexibility=0.0, slack=-1.0)
    assert len(joint_faults(splice)) >= 3

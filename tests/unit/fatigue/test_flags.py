"""What is flagged, and where."""

import pytest

import fatigue

ROW = 'name = "A"'
UPPER = 'name = "upper"'
FITS = "practice = { hole = 1.0, filling = 0.75 }"


def flags(lap_text, folder, *edits):
    text = lap_text
    for old, new in edits:
        assert old in text
        text = text.replace(old, new, 1)
    rows = fatigue.estimate(fatigue.parse_case(text, "lap.toml", folder)).rows
    return {(line.row, line.sheet): line.flags for line in rows.itertuples()}


@pytest.mark.parametrize(
    ("edit", "place", "words"),
    [
        (("max_MPa = 95.0", "max_MPa = 500.0"), ("A", "upper"), "above the sheet's strength"),
        (("max_MPa = 95.0", "max_MPa = 300.0"), ("A", "upper"), "above yield"),
        (("min_MPa = 0.0", "min_MPa = -30.0"), ("A", "upper"), "bending in compression held at its light-load arm"),
        (("min_MPa = 0.0", "min_MPa = -30.0"), ("A", "lower"), "map not monotone, no history to count anew"),
        ((ROW, f'{ROW}\ncountersink = {{ sheet = "upper", depth_mm = 1.0 }}'), ("A", "upper"), "knife edge"),
        ((ROW, f"{ROW}\nedge_mm = 6.0"), ("A", "lower"), "edge distance 1.5 d is under 2 d"),
        (("pitch_mm = 20.0", "pitch_mm = 7.0"), ("B", "upper"), "d/pitch 0.57 is beyond the 0.5 computed"),
        (("max_MPa = 95.0", "max_MPa = 1e-300"), ("A", "upper"), "no damage: no cycle reaches the curve"),
        (("max_MPa = 95.0", "max_MPa = 60.0"), ("B", "upper"), "of the damage beyond the last tested life"),
        ((FITS, "friction = 0.2"), ("B", "upper"), "friction as a stated multiplier, not solved"),
        ((FITS, "fit_percent = 3.0"), ("B", "upper"), "fit 3 % outside"),
    ],
)
def test_flag_where_it_belongs(lap_text, tmp_path, edit, place, words):
    assert words in flags(lap_text, tmp_path, edit)[place]


@pytest.mark.parametrize(
    ("edit", "place", "words"),
    [
        ((ROW, f'{ROW}\ncountersink = {{ sheet = "upper", depth_mm = 1.0 }}'), ("A", "lower"), "knife edge"),
        ((ROW, f"{ROW}\nedge_mm = 6.0"), ("A", "upper"), "edge distance"),
        (("max_MPa = 95.0", "max_MPa = 95.0"), ("A", "upper"), "above yield"),
        (("max_MPa = 95.0", "max_MPa = 95.0"), ("A", "lower"), "not monotone"),
        (("max_MPa = 95.0", "max_MPa = 95.0"), ("A", "upper"), "in compression"),
    ],
)
def test_no_flag_elsewhere(lap_text, tmp_path, edit, place, words):
    assert words not in flags(lap_text, tmp_path, edit)[place]

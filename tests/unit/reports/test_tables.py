"""Tables and files of numbers."""

import io
import json

import numpy as np
import pandas as pd
import pytest

import fatigue
from reports.tables import csv_text, cycles_frame, in_unit, ranked_text, result_json


@pytest.fixture
def estimate(lap):
    return fatigue.estimate(lap)


@pytest.fixture
def no_damage(lap_text, tmp_path):
    text = lap_text.replace("max_MPa = 95.0", "max_MPa = 1.0").replace("[life]", '[life]\ntail = "limit"')
    return fatigue.estimate(fatigue.parse_case(text, "lap.toml", tmp_path))


def test_formulas_are_disarmed():
    frame = pd.DataFrame({"row": ["=1+1", "+A", "-B", "@C", "\tD", "E", "F-1"], "life": [-1.0] * 7})
    back = pd.read_csv(io.StringIO(csv_text(frame)))
    assert back["row"].tolist() == ["'=1+1", "'+A", "'-B", "'@C", "'\tD", "E", "F-1"]
    assert back["life"].tolist() == [-1.0] * 7


def test_commas_quotes_and_line_ends_survive():
    names = ['a, "b"', "c\nd", "é;"]
    assert pd.read_csv(io.StringIO(csv_text(pd.DataFrame({"row": names}))))["row"].tolist() == names


def test_figures_kept():
    assert csv_text(pd.DataFrame({"x_MPa": [123456.789, 1e-9]})) == "x_MPa\n123457\n1e-09\n"


def test_inch_converts_every_dimensional_column(estimate):
    rows = in_unit(estimate.rows, inch=True)
    assert not [name for name in rows.columns if name.endswith(("_MPa", "_mm", "_N"))]
    assert rows["bypass_ksi"].tolist() == pytest.approx((estimate.rows["bypass_MPa"] / 6.894757293168361).tolist())
    pd.testing.assert_series_equal(rows["life_flights"], estimate.rows["life_flights"])
    assert len(rows.columns) == len(estimate.rows.columns)
    assert in_unit(estimate.rows, inch=False) is estimate.rows


def test_cycles_frame(estimate):
    assert cycles_frame(estimate).to_dict("list") == {"min_MPa": [0.0], "max_MPa": [95.0], "count": [1.0]}


def test_rows_are_ranked_worst_first(estimate):
    rows = estimate.rows
    assert rows["rank"].tolist() == list(range(1, 7))
    # twins of a symmetric lap may differ by rounding
    assert (rows["life_flights"].pct_change().dropna() > -1e-9).all()
    assert sorted(rows["priority"]) == list(range(1, 7))
    np.testing.assert_array_equal(rows["life_flights"], rows["life_practice_flights"])


def refuse(constant):
    raise AssertionError(f"{constant} is not JSON")


@pytest.mark.parametrize("which", ["estimate", "no_damage"])
def test_result_is_strict_json(which, request):
    given = request.getfixturevalue(which)
    result = json.loads(result_json(given), parse_constant=refuse)
    assert len(result["rows"]) == 6
    assert result["case_sha256"] == given.case.digest
    lives = [row["life_flights"] for row in result["rows"]]
    if which == "no_damage":
        assert lives == [None] * 6
    else:
        assert lives == pytest.approx(given.rows["life_flights"].tolist(), rel=1e-12)
    assert result["methods"]
    assert all(method["sources"] for method in result["methods"])
    assert abs(result["equilibrium_residual"]) < 1e-9


def test_result_in_inches(estimate):
    row = json.loads(result_json(estimate, inch=True))["rows"][0]
    assert "peak_max_ksi" in row
    assert "peak_max_MPa" not in row


def test_no_damage_is_told(no_damage):
    text = ranked_text(no_damage)
    assert "no damage" in text
    assert " inf" not in text
    assert "nan" not in text


def test_ranked_text_names_the_first_row_and_the_credit(estimate):
    text, first = ranked_text(estimate), estimate.rows.iloc[0]
    assert f"Row {first['row']}, {first['sheet']}, goes first" in text
    ratio = first["life_flights"] / first["life_no_credit_flights"]
    assert f"the credit is worth {ratio:.1f} times" in text
    assert "not a damage-tolerance threshold" in text
    assert "[MPa]" not in ranked_text(estimate, inch=True)

"""What the page shows is what `faying life` writes for the saved case, digit for digit."""

import json
import tomllib

import pytest
from click.testing import CliRunner

import fatigue
from fatigue.case.shipped import demo_case, demo_names
from fatigue.fits import fit_curves
from reports.command import main
from reports.live.answer import LIVE_FITS, MOST_LOCATIONS, answer, fits, report, save, shared_count


def tables(name="crown-lap"):
    return tomllib.loads(demo_case(name).read_text(encoding="utf-8"))


@pytest.mark.parametrize("name", demo_names())
def test_answers_equal_faying_life_on_the_saved_case(name, tmp_path):
    document = tables(name)
    document["row"][0]["hole_mm"] *= 1.07
    first = answer(document, tmp_path)
    assert save(document, tmp_path, "kept", replace=False) == {"saved": "kept.toml"}
    assert (tmp_path / "kept.toml").read_text(encoding="utf-8") == first["toml"]
    done = CliRunner().invoke(main, ["life", str(tmp_path / "kept.toml"), "--out", str(tmp_path / "out")])
    assert done.exit_code == 0, done.output
    written = json.loads((tmp_path / "out" / "result.json").read_text(encoding="utf-8"))["rows"]
    # through JSON, as the page gets them
    shown = json.loads(json.dumps(first["rows"], allow_nan=False))
    assert [{key: value for key, value in row.items() if key != "shown"} for row in shown] == written
    for row in shown:
        assert row["shown"]["life_flights"] in done.output


def test_faults_are_those_of_the_case_file(tmp_path):
    document = tables()
    document["row"][1]["hole_mm"] = -4
    document["splice"]["knid"] = "lap"
    found = answer(document, tmp_path)
    with pytest.raises(fatigue.InputFaults) as caught:
        fatigue.parse_case(found["toml"], "case.toml", tmp_path)
    assert found["faults"] == [vars(fault) for fault in caught.value.faults]
    assert {fault["where"] for fault in found["faults"]} == {'row[2] "B".hole_mm', "splice.knid"}
    assert "rows" not in found


def test_live_fits_are_those_of_the_report(tmp_path):
    document = tables()
    found = fits(document, tmp_path)
    estimate = fatigue.estimate(fatigue.parse_case(answer(document, tmp_path)["toml"], "x", tmp_path))
    curves = fit_curves(estimate, steps=LIVE_FITS)
    assert [line["life"] for line in found["lines"]] == curves.life.T.tolist()
    assert fits({"title": "nothing"}, tmp_path) == {"lines": []}


def test_loads_are_counted_once_for_one_content(tmp_path):
    history = tmp_path / "own.csv"

    def counted(peak, **loads):
        history.write_text("\n".join(["stress_MPa", "0", peak, "0", "50", "0"]), encoding="utf-8")
        own = tables() | {"loads": {"history": {"file": "own.csv", "column": "stress_MPa", "flights": 1.0}, **loads}}
        return shared_count(fatigue.parse_case(answer(own, tmp_path)["toml"], "x", tmp_path))

    first = counted("90")
    assert counted("90", flown_flights=7.0) is first
    assert counted("95").cycles.high.max() == 95.0
    assert counted("90", scale=2.0).cycles.high.max() == 180.0


def test_paths_out_of_the_folder_are_refused_with_their_key(tmp_path):
    inner = tmp_path / "inner"
    inner.mkdir()
    (tmp_path / "secret.toml").write_text("x = 1", encoding="utf-8")
    (inner / "link.toml").symlink_to(tmp_path / "secret.toml")
    for path in ("../secret.toml", str(tmp_path / "secret.toml"), "link.toml", "a\0b"):
        document = tables() | {"loads": {"spectrum": path}}
        assert [fault["where"] for fault in answer(document, inner)["faults"]] == ["loads.spectrum"]
    document = tables() | {"loads": {"history": {"file": "../secret.toml", "column": "x", "flights": 1.0}}}
    assert [fault["where"] for fault in answer(document, inner)["faults"]] == ["loads.history.file"]
    document = tables()
    document["material"] = {"own": {"modulus_MPa": 7e4, "poisson": 0.3, "yield_MPa": 300, "curve": "../secret.toml"}}
    assert [fault["where"] for fault in answer(document, inner)["faults"]] == ["material.own.curve"]


def test_too_large_a_joint_is_refused(tmp_path):
    document = tables()
    document["row"] = [{**document["row"][0], "name": f"R{i}"} for i in range(MOST_LOCATIONS)]
    assert [fault["where"] for fault in answer(document, tmp_path)["faults"]] == ["row"]


def test_saving_replaces_only_when_told_and_never_through_a_link(tmp_path):
    document, other = tables(), tables("unequal-lap")
    assert save(document, tmp_path, "a", replace=False) == {"saved": "a.toml"}
    before = (tmp_path / "a.toml").read_text(encoding="utf-8")
    assert save(other, tmp_path, "a", replace=False) == {"exists": "a.toml"}
    assert (tmp_path / "a.toml").read_text(encoding="utf-8") == before
    assert save(other, tmp_path, "a", replace=True) == {"saved": "a.toml"}
    assert (tmp_path / "a.toml").read_text(encoding="utf-8") != before
    aim = tmp_path / "aim"
    (tmp_path / "b.toml").symlink_to(aim)
    assert save(document, tmp_path, "b", replace=True) == {"exists": "b.toml"}
    assert not aim.exists()
    broken = tables()
    broken["row"][0]["hole_mm"] = 0
    assert "faults" in save(broken, tmp_path, "c", replace=False)
    assert not (tmp_path / "c.toml").exists()


def test_report_is_that_of_faying_life(tmp_path):
    made = report(tables(), tmp_path, "one")
    assert made["folder"] == "one report"
    out = tmp_path / "again"
    assert (
        CliRunner().invoke(main, ["life", str(tmp_path / "one report" / "case.toml"), "--out", str(out)]).exit_code == 0
    )
    for name in ("report.html", "result.json", "rows.csv", "critical_row.svg"):
        assert (tmp_path / "one report" / name).read_bytes() == (out / name).read_bytes()
    (tmp_path / "two report").symlink_to(tmp_path)
    assert "faults" in report(tables(), tmp_path, "two")

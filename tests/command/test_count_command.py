"""`faying count` and `faying spectrum`, run in this process: what they print, write and refuse."""

from importlib import resources

import pandas as pd
import pytest
from click.testing import CliRunner

from reports.command import main

RECORDING = str(resources.files("spectra.library") / "recorded-six-flights.csv")
GAUGE = ["count", RECORDING, "--column", "skin_stress_MPa"]
REPAIRED = [*GAUGE, "--repair", "missing", "--repair", "spikes", "--repair", "drop-outs"]


def run(*arguments):
    return CliRunner().invoke(main, list(map(str, arguments)))


def test_nothing_is_repaired_unasked():
    result = run(*GAUGE)
    assert result.exit_code == 1
    assert "skin_stress_MPa: 8 missing values: line 3505 and 6 after it, line 5028 ('ERR')" in result.output


def test_flights_are_found_and_defects_listed(tmp_path):
    result = run(*REPAIRED, "--time", "time_s", "--ground-below", 15, "--omit", 4, "--out", tmp_path)
    assert result.exit_code == 0, result.output
    for line in (
        "7,066 values, 1,977 cycles in 6 flights",
        "left out 8 missing values: line 3505 and 6 after it, line 5028 ('ERR')",
        "left out 1 spike: line 1310 (812.4)",
        "left out 12 values in drop-outs: line 2215 and 11 after it (0)",
        "ranges below 4 left out: 310 of 329.5 cycles go",
    ):
        assert line in result.output
    assert sorted(path.name for path in tmp_path.iterdir()) == [
        "cycles.csv",
        "flights.csv",
        "history.png",
        "history.svg",
    ]
    assert pd.read_csv(tmp_path / "cycles.csv")["count"].sum() == pytest.approx(19.5, rel=1e-4)
    assert len(pd.read_csv(tmp_path / "flights.csv")) == 6


def test_a_sum_of_channels():
    result = run("count", RECORDING, "--column", "made_MPa", "--channel", "cabin_kPa=1.4", "--channel", "nz_g=9")
    assert result.exit_code == 0, result.output
    assert "7,087 values, 1,929 cycles in 1 flights" in result.output


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ([*GAUGE, "--channel", "cabin"], "--channel: 'cabin' is not NAME=FACTOR. Write pressure_kPa=1.46, say."),
        ([*GAUGE, "--flights", "0"], "--flights: 0 must be greater than 0."),
        ([*GAUGE, "--omit", "-1"], "--omit: -1 must be greater than 0."),
        ([*GAUGE, "--clip-below", "9", "--clip-above", "3"], "--clip-below: 9 must be below --clip-above 3."),
        ([*REPAIRED, "--ground-below", "15"], "time: a ground level needs times. Name the column of times."),
        ([*REPAIRED, "--time", "time_s", "--ground-below", "500"], "stays above 500 MPa: no flight found."),
        ([*GAUGE, "--time", "tim_s"], "tim_s: there is no such column. Did you mean time_s?"),
        (["spectrum", "shrt-hops"], "there is no such spectrum. Did you mean short-hops or island-hops?"),
        (["spectrum", "short-hops", "--factor", "gst=3"], '--factor: there is no channel "gst". Did you mean gust?'),
        (["spectrum", "short-hops", "--factor", "gust"], "--factor: 'gust' is not CHANNEL=MPA. Write gust=12, say."),
    ],
)
def test_what_is_refused(arguments, message):
    result = run(*arguments)
    assert result.exit_code == 1
    assert message in result.output


def test_spectra_are_listed():
    assert "island-hops" in run("spectrum").output


def test_a_spectrum_is_shown(tmp_path):
    result = run("spectrum", "ten-flight-gust-programme", "--factor", "load=80", "--out", tmp_path)
    assert result.exit_code == 0, result.output
    flight = next(line for line in result.output.splitlines() if line.startswith("  flight "))
    assert flight.split()[1] == "80.0"
    assert "Block of 4,000 flights, 801,330 turning points" in result.output
    assert sorted(path.name for path in tmp_path.iterdir()) == ["cycles.csv", "spectrum.png", "spectrum.svg"]

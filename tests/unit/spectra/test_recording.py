"""Recorded histories: files of all kinds, defects, flights."""

import gzip
from importlib import resources

import numpy as np
import pandas as pd
import pytest

import spectra
from spectra import store
from spectra.defects import find_defects, usual_prominence
from spectra.flights import GroundRule, find_flights
from spectra.recording import read_recording
from tests.unit.spectra.recorded_six_flights import NAME, recording_text

VALUES = [0.0, 50.5, 10.25, 90.0, -3.5]


def write(folder, text, name="tail.csv"):
    path = folder / name
    path.write_text(text, encoding="utf-8")
    return path


def read(path, column="stress_MPa", **options):
    return read_recording(path, column, **options).values.tolist()


class TestCsv:
    @pytest.mark.parametrize("delimiter", [",", ";", "\t", "|"])
    def test_delimiters(self, tmp_path, delimiter):
        lines = [delimiter.join(["t_s", "stress_MPa"])] + [
            delimiter.join([str(i), str(v)]) for i, v in enumerate(VALUES)
        ]
        assert read(write(tmp_path, "\n".join(lines))) == VALUES

    @pytest.mark.parametrize("delimiter", [";", "\t"])
    def test_decimal_comma(self, tmp_path, delimiter):
        lines = [f"t_s{delimiter}stress_MPa"] + [
            f"{i}{delimiter}{str(v).replace('.', ',')}" for i, v in enumerate(VALUES)
        ]
        assert read(write(tmp_path, "\n".join(lines))) == VALUES

    def test_text_among_decimal_commas(self, tmp_path):
        recording = read_recording(
            write(tmp_path, "t;stress_MPa\n0,5;1,25\n1,5;ERR\n2,5;3,5\n"), "stress_MPa", time="t"
        )
        assert recording.values.tolist()[::2] == [1.25, 3.5]
        assert recording.seen == {1: "'ERR'"}
        assert recording.time.tolist() == [0.5, 1.5, 2.5]

    def test_one_column(self, tmp_path):
        assert read(write(tmp_path, "stress_MPa\n" + "\n".join(map(str, VALUES)))) == VALUES

    def test_rows_before_the_header_and_a_row_of_units(self, tmp_path):
        text = "recorder 4;made up\nrate;8 Hz\n\nt;stress_MPa\ns;MPa\n" + "\n".join(
            f"{i};{v}" for i, v in enumerate(VALUES)
        )
        path = write(tmp_path, text)
        assert read(path) == VALUES
        assert read_recording(path, "stress_MPa").file.place(0) == "line 6"

    def test_byte_order_mark_quotes_and_spaces(self, tmp_path):
        assert read(write(tmp_path, '\ufeff"t", "stress_MPa"\n0, 1.5\n1, 2.5\n')) == [1.5, 2.5]

    @pytest.mark.parametrize("suffix", [".gz", ".bz2", ".xz"])
    def test_compressed(self, tmp_path, suffix):
        path = tmp_path / f"tail.csv{suffix}"
        pd.DataFrame({"stress_MPa": VALUES}).to_csv(path, index=False)
        assert read(path) == VALUES

    def test_many_rows_are_read_in_blocks(self, tmp_path, monkeypatch):
        from spectra import csv_file

        monkeypatch.setattr(csv_file, "ROWS", 7)
        values = np.random.default_rng(1).normal(size=100).round(6)
        assert read(write(tmp_path, "stress_MPa\n" + "\n".join(map(str, values)))) == values.tolist()

    def test_ksi_is_converted(self, tmp_path):
        path = write(tmp_path, "stress_ksi\n0\n10\n")
        history = spectra.read_history(path, "stress_ksi", 1)
        assert history.values[1] == pytest.approx(68.94757, abs=1e-5)


class TestOtherFiles:
    def test_numpy_is_mapped(self, tmp_path):
        np.save(tmp_path / "tail.npy", np.array(VALUES))
        recording = read_recording(tmp_path / "tail.npy", "stress_MPa")
        assert isinstance(recording.values, np.memmap)
        assert recording.values.tolist() == VALUES

    def test_numpy_records(self, tmp_path):
        data = np.array([(i, v) for i, v in enumerate(VALUES)], dtype=[("t", "i4"), ("stress_MPa", "f4")])
        np.save(tmp_path / "tail.npy", data)
        assert read(tmp_path / "tail.npy") == VALUES
        assert read_recording(tmp_path / "tail.npy", "stress_MPa", time="t").time.tolist() == [0, 1, 2, 3, 4]

    def test_parquet(self, tmp_path):
        pytest.importorskip("pyarrow")
        frame = pd.DataFrame({"t": pd.date_range("2026-01-01", periods=5, freq="2s"), "stress_MPa": VALUES})
        frame.to_parquet(tmp_path / "tail.parquet")
        recording = read_recording(tmp_path / "tail.parquet", "stress_MPa", time="t")
        assert recording.values.tolist() == VALUES
        assert np.diff(recording.time).tolist() == [2.0] * 4

    def test_a_sum_of_channels(self, tmp_path):
        text = "p_kPa,bending,stress_MPa\n10,1,7\n20,-2,7\n"
        path = write(tmp_path, text)
        assert read(path, channels={"p_kPa": 1.5, "bending": 2.0}) == [17.0, 26.0]

    def test_many_values_go_through_a_temporary_file(self, tmp_path, monkeypatch):
        monkeypatch.setattr(store, "MOST_IN_MEMORY", 50)
        from spectra import csv_file

        monkeypatch.setattr(csv_file, "ROWS", 20)
        values = np.arange(100.0)
        recording = read_recording(write(tmp_path, "stress_MPa\n" + "\n".join(map(str, values))), "stress_MPa")
        assert isinstance(recording.values, np.memmap)
        assert recording.values.tolist() == values.tolist()


def test_the_shipped_recording_is_made_as_said():
    text = (resources.files("spectra.library") / NAME).read_text(encoding="utf-8")
    assert text == recording_text()


def noisy(size=5000, seed=3):
    return np.random.default_rng(seed).normal(60.0, 5.0, size).round(2)


class TestDefects:
    def test_none_in_a_plain_history(self):
        assert find_defects(noisy()) == ()

    def test_none_in_the_shipped_spectra(self):
        for name in spectra.shipped():
            assert find_defects(spectra.read_spectrum(name).history().values) == ()

    def test_missing_spikes_and_drop_outs_are_found(self):
        x = noisy()
        x[100:103] = np.nan
        x[4000] = np.inf
        x[2000] = 900.0
        x[3000:3020] = -400.0
        missing, spikes, dropouts = find_defects(x)
        assert (missing.start.tolist(), missing.stop.tolist()) == ([100, 4000], [103, 4001])
        assert (spikes.start.tolist(), spikes.values.tolist()) == ([2000], [900.0])
        assert (dropouts.start.tolist(), dropouts.stop.tolist()) == ([3000], [3020])
        assert (missing.number, spikes.number, dropouts.number) == (4, 1, 20)

    def test_a_threshold_may_be_given(self):
        x = noisy()
        x[2000] = 110.0
        assert usual_prominence(x) > 60
        assert find_defects(x) == ()
        assert [d.start.tolist() for d in find_defects(x, threshold=40.0)] == [[2000]]

    def test_a_long_plateau_is_a_steady_state(self):
        x = np.concatenate([noisy(), np.full(1500, -400.0), noisy()])
        assert find_defects(x) == ()

    @pytest.mark.parametrize("at", [15, 16, 17, 31, 32])
    def test_blocks_change_nothing(self, at, monkeypatch):
        x = noisy(100)
        x[at], x[70:73] = 900.0, -500.0
        whole = find_defects(x, 100.0)
        monkeypatch.setattr("spectra.defects.blocks", lambda v, overlap=0: store.blocks(v, 16, overlap))
        for one, other in zip(whole, find_defects(x, 100.0), strict=True):
            assert (one.start.tolist(), one.stop.tolist()) == (other.start.tolist(), other.stop.tolist())

    def test_repair_is_counted_as_straight_lines(self, tmp_path):
        x = noisy()
        x[100:103] = np.nan
        x[2000], x[3000:3020] = 900.0, -400.0
        np.save(tmp_path / "tail.npy", x)
        recording = read_recording(tmp_path / "tail.npy", "stress_MPa")
        mended = recording.repaired(["missing", "spikes", "drop-outs"])
        good = np.isfinite(x) & (x != 900.0) & (x != -400.0)
        line = np.interp(np.arange(x.size), np.flatnonzero(good), x[good])
        assert mended.values.tolist() == x[good].tolist()
        assert sorted(spectra.count(line).range) == sorted(spectra.count(mended.values).range)
        assert mended.notes == (
            "left out 3 missing values: value 101 and 2 after it",
            "left out 1 spike: value 2,001 (900)",
            "left out 20 values in drop-outs: value 3,001 and 19 after it (-400)",
        )

    def test_what_is_not_repaired_is_told(self, tmp_path):
        x = noisy()
        x[2000] = 900.0
        np.save(tmp_path / "tail.npy", x)
        history = spectra.read_history(tmp_path / "tail.npy", "stress_MPa", 1)
        assert history.notes == ("kept 1 spike: value 2,001 (900)",)
        assert history.values.max() == 900.0

    def test_a_value_without_a_number_is_shown_as_written(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\nn/a!\n3\n")
        with pytest.raises(spectra.InputFaults) as caught:
            spectra.read_history(path, "stress_MPa", 1)
        assert str(caught.value) == (
            f"{path}: one fault\n  stress_MPa: 1 missing value: line 3 ('n/a!'): not finite numbers. "
            "Mend the file, or leave them out and have them listed with --repair missing."
        )


class TestFlights:
    TIME = np.arange(12) * 100.0
    VALUES = np.array([0, 5, 80, 70, 5, 0, 3, 90, 0, 85, 80, 0], dtype=float)

    def test_flights(self):
        found = find_flights(self.VALUES, self.TIME, GroundRule(10.0, least_flight=50.0, least_ground=60.0))
        assert found.start.tolist() == [2, 9]
        assert found.stop.tolist() == [4, 11]
        assert found.duration.tolist() == [100.0, 100.0]
        assert (found.low.tolist(), found.high.tolist()) == ([70.0, 80.0], [80.0, 85.0])

    def test_a_short_touch_does_not_end_a_flight(self):
        found = find_flights(self.VALUES, self.TIME, GroundRule(10.0, least_flight=50.0, least_ground=250.0))
        assert (found.start.tolist(), found.stop.tolist()) == ([2, 7], [4, 11])

    def test_a_recording_may_begin_and_end_in_flight(self):
        found = find_flights(self.VALUES[2:11], self.TIME[2:11], GroundRule(10.0, least_flight=50.0))
        assert (found.start.tolist(), found.stop.tolist()) == ([0, 7], [2, 9])

    @pytest.mark.parametrize("size", [1, 2, 3, 5])
    def test_blocks_change_nothing(self, size, monkeypatch):
        rule = GroundRule(10.0, least_flight=0.0)
        whole = find_flights(self.VALUES, self.TIME, rule)
        monkeypatch.setattr("spectra.flights.blocks", lambda v: store.blocks(v, size))
        assert find_flights(self.VALUES, self.TIME, rule).start.tolist() == whole.start.tolist() == [2, 7, 9]

    def test_none(self):
        assert len(find_flights(self.VALUES, self.TIME, GroundRule(500.0))) == 0

    def test_a_history_may_find_its_flights(self, tmp_path):
        text = "t,stress_MPa\n" + "\n".join(f"{t},{v}" for t, v in zip(self.TIME, self.VALUES, strict=True))
        history = spectra.read_history(
            write(tmp_path, text), "stress_MPa", time="t", ground=GroundRule(10.0, least_flight=50.0)
        )
        assert history.flights == 2.0
        assert "2 flights found above 10 MPa" in history.notes

    def test_gaps_in_time_are_told(self, tmp_path):
        time = np.concatenate([np.arange(50.0), 500 + np.arange(50.0)])
        text = "t,stress_MPa\n" + "\n".join(f"{t},{i % 7}" for i, t in enumerate(time))
        recording = read_recording(write(tmp_path, text), "stress_MPa", time="t")
        assert recording.notes == ("1 gap in time: 451 s after line 51; usual step 1 s",)


def gz(path, text):
    with gzip.open(path, "wt") as file:
        file.write(text)
    return path


CASES = {
    "empty": ("", {}, "the file is empty."),
    "blank lines": ("\n\n\n", {}, "the file is empty."),
    "header only": ("stress_MPa\n", {}, "stress_MPa: the column has no values. Give at least two."),
    "no such column": (
        "t,gross_MPa\n0,1\n",
        {},
        "stress_MPa: there is no such column. Did you mean gross_MPa? The columns are t and gross_MPa.",
    ),
    "near column": (
        "t,strss_MPa\n0,1\n",
        {},
        "stress_MPa: there is no such column. Did you mean strss_MPa? The columns are t and strss_MPa.",
    ),
    "column twice": (
        "stress_MPa,stress_MPa\n0,1\n",
        {},
        "stress_MPa: names more than one column. Rename all but one.",
    ),
    "unknown channel": (
        "t,p_kPa\n0,1\n",
        {"channels": {"p_psi": 1.0}},
        "p_psi: there is no such column. Did you mean p_kPa? The columns are t and p_kPa.",
    ),
    "zero factor": (
        "t,p_kPa\n0,1\n",
        {"channels": {"p_kPa": 0.0}},
        "channel p_kPa: 0.0 must be a finite factor other than 0.",
    ),
    "mixed units": (
        "t;stress_MPa\ns;ksi\n0;1\n1;2\n",
        {},
        "stress_MPa: the name says MPa, the row of units under it says ksi. Make them agree.",
    ),
    "changing columns": (
        "t,stress_MPa\n0,1\n1,2,3\n",
        {},
        "line 3: has 3 fields where the header has 2. Columns must not change: split the file there, or mend the line.",
    ),
    "decimal comma among commas": (
        "t,stress_MPa\n0,1,5\n1,2,5\n",
        {},
        "the first row of values has more fields than the header. "
        "A decimal comma in a file that commas separate? Separate it by semicolons.",
    ),
    "time backwards": (
        "t,stress_MPa\n0,1\n2,5\n1,2\n0.5,3\n",
        {"time": "t"},
        "t: time runs backwards at line 4: from 2 to 1 s, and 1 times more. Put the rows in order, or split the file.",
    ),
    "time missing": (
        "t,stress_MPa\n0,1\n,5\n1,2\n",
        {"time": "t"},
        "t: line 3 has no time. Every value needs one.",
    ),
}


class TestBadRecordings:
    """One message each, whole."""

    @pytest.mark.parametrize("name", CASES)
    def test_text(self, tmp_path, name):
        text, options, message = CASES[name]
        path = write(tmp_path, text)
        with pytest.raises(spectra.InputFaults) as caught:
            read_recording(path, "stress_MPa", **options)
        assert str(caught.value) == f"{path}: one fault\n  {message}"

    def fault(self, path, column="stress_MPa", **options):
        with pytest.raises(spectra.InputFaults) as caught:
            read_recording(path, column, **options)
        return str(caught.value).split("\n  ", 1)[1]

    def test_no_unit(self, tmp_path):
        path = write(tmp_path, "stress\n1\n")
        assert self.fault(path, "stress") == "stress: the column's name has no stress unit. End it in _MPa or _ksi."

    def test_a_length_is_no_stress(self, tmp_path):
        path = write(tmp_path, "gap_mm\n1\n")
        assert self.fault(path, "gap_mm") == "gap_mm: the column's name has no stress unit. End it in _MPa or _ksi."

    def test_no_file(self, tmp_path):
        for name in ("no.csv", "no.npy"):
            assert self.fault(tmp_path / name) == "there is no such file."

    def test_folder(self, tmp_path):
        assert self.fault(tmp_path) == "this is a folder, not a file of values."

    def test_not_utf8(self, tmp_path):
        path = tmp_path / "tail.csv"
        path.write_bytes(b"stress_MPa\n1\n\xb5\n")
        assert self.fault(path) == "byte 13 is not UTF-8 text: save the file as UTF-8."

    def test_damaged_gzip(self, tmp_path):
        path = gz(tmp_path / "tail.csv.gz", "stress_MPa\n" + "1.0\n2.0\n" * 50_000)
        path.write_bytes(path.read_bytes()[:-40])
        assert self.fault(path).startswith("the compressed file is damaged or cut short")
        assert self.fault(path).endswith("Copy it again.")

    def test_no_gzip(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\n", "tail.csv.gz")
        assert self.fault(path).startswith('the compressed file is damaged or cut short ("Not a gzipped file')

    def test_not_parquet(self, tmp_path):
        pytest.importorskip("pyarrow")
        path = write(tmp_path, "stress_MPa\n1\n", "tail.parquet")
        assert self.fault(path).startswith("not a readable Parquet file (")

    def test_no_parquet_reader(self, tmp_path, monkeypatch):
        monkeypatch.setitem(__import__("sys").modules, "pyarrow", None)
        assert self.fault(tmp_path / "tail.parquet") == (
            "reading Parquet needs the package pyarrow. Install it: pip install 'faying[parquet]'."
        )

    def test_not_numpy(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\n", "tail.npy")
        assert self.fault(path).startswith("not a readable NumPy file (")

    @pytest.mark.parametrize(
        ("array", "message"),
        [
            (np.zeros((4, 2)), "the array has the shape (4, 2); one row of values is needed. Save one column,"),
            (np.array(["a", "b"]), "the array holds '<U1'; real numbers are needed."),
            (np.zeros(3, dtype=complex), "the array holds 'complex128'; real numbers are needed."),
            (np.zeros(0), "stress_MPa: the column has no values. Give at least two."),
        ],
    )
    def test_wrong_arrays(self, tmp_path, array, message):
        np.save(tmp_path / "tail.npy", array)
        assert self.fault(tmp_path / "tail.npy").startswith(message)

    def test_a_plain_array_has_no_time(self, tmp_path):
        np.save(tmp_path / "tail.npy", np.zeros(3))
        assert self.fault(tmp_path / "tail.npy", time="t") == (
            "the array is one row of values and has no named columns. Name one column, or save a structured array."
        )

    def test_unknown_repair(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\n2\n")
        with pytest.raises(spectra.InputFaults, match=r'repair: "spike" cannot be left out\. Did you mean spikes\?'):
            spectra.read_history(path, "stress_MPa", 1, repair=["spike"])

    def test_nothing_left(self, tmp_path):
        path = write(tmp_path, "stress_MPa\nx\ny\n")
        with pytest.raises(spectra.InputFaults, match=r"nothing is left without 2 missing values: line 2 \('x'\)"):
            spectra.read_history(path, "stress_MPa", 1, repair=["missing"])

    @pytest.mark.parametrize("flights", [0, -3, np.nan, np.inf])
    def test_impossible_flights(self, tmp_path, flights):
        path = write(tmp_path, "stress_MPa\n1\n2\n")
        with pytest.raises(spectra.InputFaults, match=r"flights: .* must be greater than 0"):
            spectra.read_history(path, "stress_MPa", flights)

    def test_no_flights(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\n2\n")
        with pytest.raises(spectra.InputFaults, match=r"flights: are not given\. Give their number, or a ground level"):
            spectra.read_history(path, "stress_MPa")

    def test_a_ground_level_needs_times(self, tmp_path):
        path = write(tmp_path, "stress_MPa\n1\n2\n")
        with pytest.raises(spectra.InputFaults, match=r"time: a ground level needs times\. Name the column of times\."):
            spectra.read_history(path, "stress_MPa", ground=GroundRule(0.5))

    def test_a_rule_that_finds_no_flight(self, tmp_path):
        path = write(tmp_path, "t,stress_MPa\n0,0\n100,80\n200,0\n")
        with pytest.raises(spectra.InputFaults) as caught:
            spectra.read_history(path, "stress_MPa", time="t", ground=GroundRule(10.0))
        assert str(caught.value) == (
            f"{path}: one fault\n  ground level: no stretch of 300 s stays above 10 MPa: no flight found. "
            "The values go from 0 to 80 over 200 s. Give another ground level, or a shorter flight."
        )

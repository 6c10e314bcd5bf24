"""Bad cases: each a small edit of a good one, with the message it earns."""

import re

import numpy as np
import pytest

import fatigue

BLOCKS = "blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]"
PRACTICE = "practice = { hole = 1.0, filling = 0.75 }"
ROW_A = 'name = "A"'
UPPER = 'name = "upper"'
PITCH = "pitch_mm = 20.0"
SPACING = "row_spacing_mm = 20.0"
KIND = 'kind = "lap"'
MATERIAL = '2024-T3 bare sheet"\nthickness_mm = 1.2\n[[row]]'
"""The material of the second sheet."""
OWN = """[material.mine]
modulus_MPa = 72000
poisson = 0.3
yield_MPa = 300
curve = "2024-T3 sheet"
[life]"""


def history(file="recording.csv", column="stress_MPa", more=", flights = 1"):
    return f'history = {{ file = "{file}", column = "{column}"{more} }}'


def faults_of(text, folder):
    with pytest.raises(fatigue.InputFaults) as caught:
        fatigue.estimate(fatigue.parse_case(text, "case.toml", folder))
    return caught.value


def edited(text, old, new):
    assert old in text, f"the good case has no {old!r}"
    return text.replace(old, new, 1)


KEYS = [
    (PITCH, "ptich_mm = 20.0", "splice.ptich_mm: is not a key of this table. Did you mean pitch_mm?"),
    (PITCH, "ptich_in = 0.8", "splice.ptich_in: is not a key of this table. Did you mean pitch_in?"),
    (PITCH, "pitch = 20.0", "splice.pitch: 20.0 has no unit. Write pitch_mm or pitch_in."),
    (PITCH, "pitch_cm = 2.0", "splice.pitch_cm: is not a key of this table. Did you mean pitch_mm?"),
    (PITCH, "", "splice.pitch_mm: is missing. Give pitch_mm or pitch_in."),
    (PITCH, f"{PITCH}\npitch_in = 0.8", "splice.pitch_in: pitch is given in both units. Keep one of them."),
    (ROW_A, f"{ROW_A}\nhole_in = 0.2", 'row[1] "A".hole_mm: hole is given in both units. Keep one of them.'),
    ("max_MPa = 95.0", "max = 95.0", "loads.blocks[1].max: 95.0 has no unit. Write max_MPa or max_ksi."),
    ("max_MPa = 95.0, ", "", "loads.blocks[1].max_MPa: is missing. Give max_MPa or max_ksi."),
    ("cycles = 1", "cycels = 1", "loads.blocks[1].cycels: is not a key of this table. Did you mean cycles?"),
    (PRACTICE, PRACTICE.replace("filling", "filing"), "hole.driven.practice.filing: is not a key of this table. Did "),
    (PRACTICE, "fit = 0.3", "hole.driven.fit: is not a key of this table. Known: fit_percent, "),
    ("[life]", "[lief]", "lief: is not a table of a case file. Did you mean life or splice?"),
    ("[loads]", "[load]", "load: is not a table of a case file. Did you mean loads?"),
    ('title = "three-row lap"', "", 'title: is missing. Add title = "..."; `faying new` writes a starter with all'),
]

VALUES = [
    (PITCH, 'pitch_mm = "20"', "splice.pitch_mm: '20' must be a number, written without quotes."),
    (PITCH, "pitch_mm = true", "splice.pitch_mm: true must be a number, written without quotes."),
    (PITCH, "pitch_mm = nan", "splice.pitch_mm: nan must be a finite number: NaN and infinity are not allowed."),
    (PITCH, "pitch_in = -inf", "splice.pitch_in: -inf must be a finite number: NaN and infinity are not allowed."),
    (PITCH, "pitch_mm = [ 20.0 ]", "splice.pitch_mm: [20.0] must be a number, written without quotes."),
    ("thickness_mm = 1.2", "thickness_mm = -1.2", 'sheet[1] "upper".thickness_mm: -1.2 must be '),
    ("thickness_mm = 1.2", "thickness_mm = 0", 'sheet[1] "upper".thickness_mm: 0 must be '),
    ("thickness_mm = 1.2", "thickness_in = -0.05", 'sheet[1] "upper".thickness_in: -0.05 must be '),
    (
        "free_length_mm = 150.0",
        "free_length_in = 1e9",
        "splice.free_length_in: 1000000000.0 must be at most 3937.01 in.",
    ),
    ("max_MPa = 95.0", "max_ksi = 2e3", "loads.blocks[1].max_ksi: 2000.0 must be at most 1450.38 ksi."),
    ('title = "three-row lap"', "title = 3", 'title: 3 must be text on one line, written "like this", and not empty.'),
    (
        'title = "three-row lap"',
        'title = " "',
        "title: ' ' must be text on one line, written \"like this\", and not empty.",
    ),
    (ROW_A, 'name = ""', "row[1] \"\".name: '' must not be empty."),
    (ROW_A, "name = 1", 'row[1].name: 1 must be text, written "like this".'),
    (ROW_A, f"{ROW_A}\nhead_fixity = 2", 'row[1] "A".head_fixity: 2 must be at most 1.'),
    (ROW_A, f"{ROW_A}\ncountersink = 0.5", 'row[1] "A".countersink: 0.5 must be a table, written { key = value }.'),
    (UPPER, f"{UPPER}\nsteps = 3", 'sheet[1] "upper".steps: 3 must be a list, written [ ... ].'),
    (
        KIND,
        'kind = "lpa"',
        "splice.kind: 'lpa' is not allowed: it is one of lap, one-strap, two-strap or doubler. Did ",
    ),
    (KIND, f'{KIND}\nflexibility = "hath"', "splice.flexibility: 'hath' is not allowed: it is one of huth, swift or"),
    (KIND, f"{KIND}\nflexibility_mm_per_N = -1", "splice.flexibility_mm_per_N: -1 must be at least 1e-10 mm/N."),
    ('"practice"', '"practise"', "life.credit: 'practise' is not allowed: it is one of none, practice or contact. Did"),
    (
        "[life]",
        '[life]\ntail = "long"',
        "life.tail: 'long' is not allowed: it is one of limit, continued or shallower.",
    ),
    ("[life]", "[life]\ndamage_sum = 0", "life.damage_sum: 0 must be greater than 0."),
    ("flown_flights = 10000", "flown_flights = -1", "loads.flown_flights: -1 must be at least 0."),
    (PRACTICE, "fit_percent = 30", "hole.driven.fit_percent: 30 must be at most 5."),
    (PRACTICE, "squeeze_ratio = 0.5", "hole.driven.squeeze_ratio: 0.5 must be at least 1."),
    ("[life]", "[inspection]\ntests = 1.5\n[life]", "inspection.tests: 1.5 must be a whole number."),
    ("[life]", "[inspection]\nreliability = 95\n[life]", "inspection.reliability: 95 must be less than 1."),
    ("[life]", '[inspection]\nuse_credit = "yes"\n[life]', "inspection.use_credit: 'yes' must be true or false."),
    ('title = "three-row lap"', 'title = "a\\nb"', "title: 'a\\nb' must be text on one line"),
    (ROW_A, 'name = "\\u001b[31m"', "must be without control characters, on one line."),
    (ROW_A, f'name = "{41 * "A"}"', "is too long: 40 characters are the most."),
    ("hole_mm = 4.0", "hole_mm = 1e-6", 'row[1] "A".hole_mm: 1e-06 must be at least 0.01 mm.'),
    ("[life]", OWN.replace("72000", "72"), "material.mine.modulus_MPa: 72 must be at least 1000 MPa."),
    ("[splice]", "[[splice]]", "must be a table. Write [splice] and its keys."),
]

NAMES = [
    (
        MATERIAL,
        MATERIAL.replace("bare", "bear"),
        'sheet[2] "lower".material: there is no material "2024-T3 bear sheet". Did you mean 2024-T3 bare sheet',
    ),
    (
        "solid-rivet-2117",
        "solid-rivet-2171",
        'row[1] "A".fastener: there is no fastener "solid-rivet-2171". Did you mean solid-rivet-2117',
    ),
    ('hole = "driven"', 'hole = "drivn"', 'row[1] "A".hole: there is no hole table "drivn". Did you mean driven?'),
    (ROW_A, f'{ROW_A}\ndriven_head = "lowr"', 'row[1] "A".driven_head: there is no sheet "lowr". Did you mean lower?'),
    (
        ROW_A,
        f'{ROW_A}\ncountersink = {{ sheet = "uper", depth_mm = 0.5 }}',
        'there is no sheet "uper". Did you mean upper?',
    ),
    (UPPER, f'{UPPER}\nfrom_row = "Z"', 'sheet[1] "upper".from_row: there is no row "Z". Known: A, B or C.'),
    (
        UPPER,
        f'{UPPER}\nsteps = [ {{ after_row = "X", thickness_mm = 1.0 }} ]',
        'steps: there is no row "X". Known: A, B',
    ),
    ('name = "B"', 'name = "A"', 'row[2].name: "A" is used twice. Give each row its own name.'),
    ('name = "lower"', 'name = "upper"', 'sheet[2].name: "upper" is used twice. Give each sheet its own name.'),
    (
        "[life]",
        OWN.replace("2024-T3 sheet", "2024-T3 shet"),
        'material.mine.curve: "2024-T3 shet" is neither a shipped S-N family nor a file. Did you mean 2024-T3 sheet',
    ),
    (
        "[life]",
        '[fastener.mine]\nkind = "rivet"\nmodulus_MPa = 7e4\n[life]',
        "fastener.mine.kind: 'rivet' is not allowed: ",
    ),
    (
        BLOCKS,
        'spectrum = "short-hop"',
        'loads.spectrum: "short-hop" is neither a shipped spectrum nor a file. Did you mean short-hops?',
    ),
    (
        BLOCKS,
        'spectrum = "short-hops"\nfactors = { presure = 0.1 }',
        'loads.factors.presure: there is no channel "presure". Did you mean pressure?',
    ),
]

GEOMETRY = [
    (PITCH, "pitch_mm = 4.2", 'row[1] "A".hole_mm: 4 mm leaves 5 % of the pitch of 4.2 mm between holes. Nothing is'),
    (
        PITCH,
        "pitch_mm = 3.5",
        'row[1] "A".hole_mm: 4 mm is not less than the pitch of 3.5 mm. Use a smaller hole or a larger pitch.',
    ),
    (ROW_A, f"{ROW_A}\npitch_mm = 4.0", 'row[1] "A".hole_mm: 4 mm is not less than the pitch of 4 mm.'),
    (
        ROW_A,
        f'{ROW_A}\ncountersink = {{ sheet = "upper", depth_mm = 1.2 }}',
        'row[1] "A".countersink.depth_mm: 1.2 mm goes '
        "through upper, 1.2 mm thick. Keep the countersink within the sheet, best within two thirds of it.",
    ),
    (SPACING, "", "splice.row_spacing_mm: is missing. Give row_spacing_mm or row_spacing_in, or at_mm in each row."),
    (
        SPACING,
        "row_spacing_mm = 4.0",
        "row: the holes of rows A and B run into each other. Space the rows further apart.",
    ),
    (ROW_A, f"{ROW_A}\nat_mm = 3", "splice.row_spacing_mm: rows have at_mm as well. Give one or the other."),
    (ROW_A, f"{ROW_A}\nedge_mm = 1.0", 'row[1] "A".edge_mm: 1 mm puts the hole of row A outside the sheet.'),
    (
        UPPER,
        f'{UPPER}\nfrom_row = "C"\nto_row = "A"',
        'sheet[1] "upper".from_row: row C comes after to_row A. Swap them.',
    ),
    (
        UPPER,
        f'{UPPER}\nsteps = [ {{ after_row = "B", thickness_mm = 1.0 }}, {{ after_row = "A", thickness_mm = 0.9 }} ]',
        "steps must follow the rows, one at most in each bay. Put them in order.",
    ),
    (UPPER, f'{UPPER}\nrole = "main"', "sheet[1].role: the sheets of a lap have no role. Leave it out."),
    (KIND, f"{KIND}\nto_centre_mm = 20", "splice.to_centre_mm: a lap has no line of symmetry. Leave it out."),
    (
        KIND,
        'kind = "one-strap"',
        "splice.to_centre_mm: is missing: a one-strap is modelled up to its line of symmetry.",
    ),
    (KIND, 'kind = "doubler"', "sheet[1].role: none given: the sheets of a doubler are skin or doubler."),
    ('name = "lower"', 'name = "lower"\nfrom_row = "C"', 'row "A": has its holes in only upper.'),
    (
        PRACTICE,
        "squeeze_ratio = 1.5\nsqueeze_force_N = 1e4",
        "squeeze_ratio and squeeze_force_N are both given. Give one",
    ),
    (
        "[life]",
        OWN.replace("curve", "ultimate_MPa = 200\ncurve"),
        "material.mine.ultimate_MPa: 200 MPa is below the yield stress of 300 MPa.",
    ),
]

LOADS = [
    (BLOCKS, "", "loads: no loads are given. Give exactly one of spectrum, history and blocks."),
    (
        BLOCKS,
        f'{BLOCKS}\nspectrum = "short-hops"',
        "loads: spectrum and blocks are given. Give exactly one of spectrum, ",
    ),
    (BLOCKS, "blocks = []", "loads.blocks: [] must not be empty."),
    (BLOCKS, "blocks = 3", "loads.blocks: 3 must be a list, written [ ... ]."),
    (BLOCKS, 'history = "a.csv"', "loads.history: 'a.csv' must be a table, written { key = value }."),
    (
        "max_MPa = 95.0, min_MPa = 0.0",
        "max_MPa = 0.0, min_MPa = 95.0",
        "loads.blocks[1]: min_MPa 95 is above max_MPa 0. Swap them.",
    ),
    ("min_MPa = 0.0", "min_MPa = 95.0", "loads.blocks[1]: max_MPa and min_MPa are both 95: that is no cycle."),
    ("cycles = 1", "cycles = 1e-12", "loads.blocks[1].cycles: 1e-12 a flight is less than one in 1e+09 flights. Leave"),
    ("cycles = 1", "cycles = 0", "loads.blocks[1].cycles: 0 must be greater than 0."),
    ("flown_flights = 10000", "scale = 0", "loads.scale: 0 must be greater than 0."),
    (
        "flown_flights = 10000",
        "factors = { pressure = 0.1 }",
        "loads.factors: factors combine the channels of a spectrum.",
    ),
    (BLOCKS, history(more=", flights = 0"), "loads.history.flights: 0 must be greater than 0."),
    (
        BLOCKS,
        history("none.csv"),
        'loads.history.file: there is no file "none.csv". Paths are taken from the folder of ',
    ),
    (BLOCKS, history("folder"), "this is a folder, not a file of values."),
    (BLOCKS, history("empty.csv"), "the file is empty."),
    (BLOCKS, history("header.csv"), "stress_MPa: the column has no values. Give at least two."),
    (BLOCKS, history("gaps.csv"), "stress_MPa: 3 missing values: line 3, line 5"),
    (BLOCKS, history("infinite.csv"), "stress_MPa: 1 missing value: line 3: not finite numbers."),
    (BLOCKS, history("latin.csv"), "byte 14 is not UTF-8 text: save the file as UTF-8."),
    (
        BLOCKS,
        history(column="stres_MPa"),
        "stres_MPa: there is no such column. Did you mean stress_MPa? The columns are time and stress_MPa.",
    ),
    (BLOCKS, history(column="load_ksi"), "load_ksi: there is no such column. The columns are time or stress_MPa."),
    (BLOCKS, history(column="time"), "time: the column's name has no stress unit. End it in _MPa or _ksi."),
    (BLOCKS, 'spectrum = "bad-spectrum.toml"', "channel: is missing. Give at least one [channel.NAME]."),
    (BLOCKS, 'spectrum = "broken.toml"', "not valid TOML: Invalid value (at line 1, column 5)."),
]

EVERY = [*KEYS, *VALUES, *NAMES, *GEOMETRY, *LOADS]


@pytest.fixture
def folder(tmp_path):
    files = {
        "recording.csv": "time,stress_MPa\n0,0\n1,90\n2,0\n3,95\n4,0\n",
        "empty.csv": "",
        "header.csv": "stress_MPa\n",
        "gaps.csv": "time,stress_MPa\n0,1\n1,nan\n2,5\n3,\n4,x\n",
        "infinite.csv": "stress_MPa\n0\ninf\n1\n",
        "constant.csv": "stress_MPa\n50\n50\n50\n",
        "two.csv": "stress_MPa\n0\n95\n",
        "bad-spectrum.toml": "title = 'x'",
        "broken.toml": "a = = 1",
    }
    for name, text in files.items():
        (tmp_path / name).write_text(text, encoding="utf-8")
    (tmp_path / "latin.csv").write_bytes("stress_MPa,café\n1,2\n".encode("latin-1"))
    (tmp_path / "folder").mkdir()
    return tmp_path


@pytest.mark.parametrize(("old", "new", "message"), EVERY, ids=[case[2][:60] for case in EVERY])
def test_bad_case_teaches(lap_text, folder, old, new, message):
    faults = faults_of(edited(lap_text, old, new), folder)
    assert message in str(faults)


@pytest.mark.parametrize(("old", "new"), [case[:2] for case in [*KEYS, *VALUES] if case[0] != "[loads]"])
def test_one_slip_is_one_fault(lap_text, folder, old, new):
    assert len(faults_of(edited(lap_text, old, new), folder).faults) == 1


def test_there_are_forty_bad_cases_at_least():
    assert len({(old, new) for old, new, _ in EVERY}) >= 40


def test_several_faults_are_reported_together(lap_text, folder):
    text = lap_text
    for old, new in [
        (PITCH, "pitch = 20.0"),
        ("thickness_mm = 1.2", "thickness_mm = -1"),
        ("solid-rivet-2117", "solid-rivet-2171"),
        ('credit = "practice"', 'credit = "practise"'),
        ("cycles = 1", "cycles = nan"),
    ]:
        text = edited(text, old, new)
    faults = faults_of(text, folder)
    places = {fault.where for fault in faults.faults}
    assert places == {
        "splice.pitch",
        'sheet[1] "upper".thickness_mm',
        'row[1] "A".fastener',
        "life.credit",
        "loads.blocks[1].cycles",
    }
    assert str(faults).startswith("case.toml: 5 faults\n")


def test_no_rows_and_no_sheets(lap_text, folder):
    start = lap_text.index("[[row]]")
    text = lap_text[:start] + lap_text[lap_text.index("[hole.driven]") :]
    assert str(faults_of(text, folder)) == "case.toml: one fault\n  row: no rows are given. Add at least one [[row]]."
    assert "sheet: 0 given: a splice joins at least two sheets. Add [[sheet]] tables." in str(faults_of("", folder))
    assert "row: must be an array of tables. Write [[row]] with two brackets." in str(faults_of("row = 1", folder))


def test_two_hundred_rows_work(lap_text, folder):
    row = '[[row]]\nname = "{}"\nhole_mm = 4.0\nfastener = "solid-rivet-2117"\nhole = "driven"\n'
    start, end = lap_text.index("[[row]]"), lap_text.index("[hole.driven]")
    text = lap_text[:start] + "".join(row.format(f"R{i}") for i in range(200)) + lap_text[end:]
    rows = fatigue.estimate(fatigue.parse_case(text, "case.toml", folder)).rows
    assert len(rows) == 400
    assert set(rows["row"].iloc[:2]) == {"R0", "R199"}
    upper = rows["transfer_fraction"][rows["sheet"] == "upper"]
    assert upper.sum() == pytest.approx(1.0, rel=1e-9)


def test_constant_history_has_no_damage_and_says_so(lap_text, folder):
    estimate = fatigue.estimate(
        fatigue.parse_case(edited(lap_text, BLOCKS, history("constant.csv")), "case.toml", folder)
    )
    assert estimate.loads.notes == ("the history is constant: it has no cycles",)
    assert np.isinf(estimate.rows["life_flights"]).all()
    assert estimate.rows["flags"].str.contains("no damage: no cycle reaches the curve").all()


def test_two_points_are_one_cycle(lap, lap_text, folder):
    two = fatigue.estimate(fatigue.parse_case(edited(lap_text, BLOCKS, history("two.csv")), "case.toml", folder))
    assert two.loads.cycles.count.tolist() == [1.0]
    np.testing.assert_allclose(two.rows["life_flights"], fatigue.estimate(lap).rows["life_flights"], rtol=1e-12)


def test_stress_above_strength_is_flagged_not_refused(lap_text, folder):
    text = edited(lap_text, "max_MPa = 95.0", "max_MPa = 500.0")
    first = fatigue.estimate(fatigue.parse_case(text, "case.toml", folder)).rows.iloc[0]
    assert "net section 625 MPa above the sheet's strength" in first["flags"]
    assert 0 < first["life_flights"] < 1e4


class TestFiles:
    def read(self, path):
        with pytest.raises(fatigue.InputFaults) as caught:
            fatigue.read_case(path)
        return str(caught.value)

    def test_not_there(self, tmp_path):
        words = "there is no such file. Check the name, or write a starter with `faying new`."
        assert words in self.read(tmp_path / "none.toml")

    def test_folder(self, tmp_path):
        assert "this is a folder, not a case file. Name the .toml file in it." in self.read(tmp_path)

    def test_wrong_encoding(self, tmp_path):
        (tmp_path / "case.toml").write_bytes('title = "é"'.encode("latin-1"))
        assert "byte 9 is not UTF-8 text. Save the file as UTF-8." in self.read(tmp_path / "case.toml")

    def test_a_file_as_folder(self, tmp_path):
        (tmp_path / "case.toml").write_text("", encoding="utf-8")
        assert "the file cannot be read (Not a directory)" in self.read(tmp_path / "case.toml" / "case.toml")

    def test_not_readable(self, tmp_path, monkeypatch):
        def refuse(self):
            raise PermissionError(13, "Permission denied")

        monkeypatch.setattr("pathlib.Path.read_bytes", refuse)
        assert "the file may not be read. Check its permissions." in self.read(tmp_path / "case.toml")

    def test_binary(self, tmp_path):
        (tmp_path / "case.toml").write_bytes(bytes(range(32)))
        assert "not valid TOML" in self.read(tmp_path / "case.toml")


@pytest.mark.parametrize(
    ("old", "new", "line", "column"),
    [(PITCH, "pitch_mm = = 20.0", 8, 12), (PITCH, f"{PITCH}\n{PITCH}", 9, 16), ("[splice]", "[splice", 6, 8)],
)
def test_toml_syntax_has_line_and_column(lap_text, folder, old, new, line, column):
    message = str(faults_of(edited(lap_text, old, new), folder))
    assert re.search(rf"not valid TOML: .* \(at line {line}, column {column}\)", message)
    assert "Mend the syntax there; nothing else was checked." in message


def test_deep_nesting_is_no_traceback(folder):
    assert "nested too deeply to be a case file." in str(faults_of("x = " + "[" * 5000, folder))

"""A recorded history in a case: channels, flights found, faults left out on request."""

import pytest

import fatigue
from spectra.faults import InputFaults
from spectra.library import recorded_text

WHOLE = 'file = "tail.csv", column = "skin_stress_MPa", time = "time_s", ground_below_MPa = 8.0'
REPAIRED = f'{WHOLE}, repair = ["missing", "spikes", "drop-outs"]'


@pytest.fixture
def read(lap_text, tmp_path):
    (tmp_path / "tail.csv").write_text(recorded_text(), encoding="utf-8")

    def run(table):
        old = "blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]"
        assert old in lap_text
        text = lap_text.replace(old, f"history = {{ {table} }}")
        return fatigue.estimate(fatigue.parse_case(text, "case.toml", tmp_path))

    return run


def test_flights_found_and_faults_left_out(read):
    one = read(REPAIRED)
    assert one.loads.history.flights == 6
    told = " ".join(one.loads.notes)
    for words in (
        "left out 8 missing values",
        "left out 1 spike",
        "left out 12 values in drop-outs",
        "6 flights found",
    ):
        assert words in told
    assert 80 < one.loads.cycles.high.max() < 90


def test_the_same_flights_by_number(read):
    named = read(REPAIRED.replace('time = "time_s", ground_below_MPa = 8.0', "flights = 6"))
    assert named.rows["life_flights"].tolist() == read(REPAIRED).rows["life_flights"].tolist()


def test_channels_are_summed(read):
    one = read(
        'file = "tail.csv", column = "made_MPa", flights = 6, '
        'channels = [ { column = "cabin_kPa", factor = 1.4 }, { column = "nz_g", factor = 9.0 } ]'
    )
    assert one.loads.cycles.high.max() == pytest.approx(1.4 * 55 + 9.0, rel=0.1)


@pytest.mark.parametrize(
    ("table", "words"),
    [
        (WHOLE, "8 missing values: line 3505"),
        ('file = "tail.csv", column = "skin_stress_MPa"', "loads.history.flights: is missing: how many flights"),
        (
            'file = "tail.csv", column = "skin_stress_MPa", ground_below_MPa = 8.0',
            "loads.history.time: is missing: a ground level needs times.",
        ),
        (REPAIRED.replace("8.0", "90.0"), "no flight found"),
        (REPAIRED.replace("spikes", "spike"), "repair"),
        (REPAIRED.replace("skin_stress_MPa", "skin_MPa"), "there is no such column"),
    ],
)
def test_faults(read, table, words):
    with pytest.raises(InputFaults) as caught:
        read(table)
    assert words in str(caught.value)

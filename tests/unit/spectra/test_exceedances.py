"""Spectrum files whose loads are given by exceedances: what is flown, and what is refused."""

import numpy as np
import pytest

import spectra
from spectra.exceedance import ExceedanceTable, dealt, flown_levels

HEAD = """
title = "test"
seed = 7
[channel.gust]
MPa_per_unit = 10.0
[channel.level]
MPa_per_unit = 1.0
[[flight]]
name = "calm"
number = 90
[[flight]]
name = "gale"
number = 10
severity = 1.8
[[phase]]
name = "ground"
[[phase]]
name = "cruise"
steady = { level = 100.0 }
repeated = "gust"
"""
TABLE = "exceedances = { at = [0.2, 1.0, 3.0], per_block = [5000.0, 300.0, 1.0] }\nsmallest = 0.25\n"
GUST = "gust = { N0 = 500.0, P1 = 0.1, b1 = 1.0, P2 = 0.01, b2 = 3.0, A = 0.2, hours = 1.5 }\nsmallest = 0.25\n"


def write(folder, text, head=HEAD):
    path = folder / "own.toml"
    path.write_text(head + text, encoding="utf-8")
    return path


@pytest.fixture(params=[TABLE, GUST])
def spectrum(request, tmp_path):
    return spectra.read_spectrum(write(tmp_path, request.param))


def test_crossings_are_the_exceedances_asked_for(spectrum):
    exceeded = spectrum.phases[1].exceeded
    up, down, number = exceeded.flown()
    flown = spectrum.sequence()
    assert spectra.count(flown.values).exceedances(100 + 10 * up).tolist() == number.tolist()
    turned = -flown.values[flown.phase == 1]  # without the ground, which is below too
    assert spectra.count(turned).exceedances(10 * down - 100).tolist() == number.tolist()
    assert exceeded.up.number(up) == pytest.approx(number, rel=1e-9)
    assert number[0] == 1


def test_the_largest_load_comes_once_and_in_the_severest_flights(spectrum):
    up, _, number = spectrum.phases[1].exceeded.flown()
    counts = dealt(
        spectrum.phases[1].exceeded.up, up, number, np.array([1.0, 1.8]), np.array([90, 10]), np.random.default_rng(1)
    )
    assert counts.sum(axis=0).tolist() == np.diff(number, prepend=0).tolist()
    assert counts[:90, 0].sum() == 0
    assert counts[90:, 0].sum() == 1
    assert counts[90:].mean(axis=0)[1:] == pytest.approx(
        counts[90:].mean(axis=0)[1:].clip(counts[:90].mean(axis=0)[1:])
    )


def test_equal_flights_share_alike():
    table = ExceedanceTable(np.array([0.0, 2.0]), np.array([1e4, 1.0]))
    up, number = flown_levels(table, 0.5, 8)
    counts = dealt(table, up, number, np.ones(2), np.array([6, 4]), np.random.default_rng(1))
    assert counts.sum(axis=0).tolist() == np.diff(number, prepend=0).tolist()
    assert (np.ptp(counts, axis=0) <= 2).all()


def test_same_seed_same_sequence(tmp_path):
    one, other = (spectra.read_spectrum(write(tmp_path, TABLE)).history().values for _ in range(2))
    assert np.array_equal(one, other)
    reseeded = spectra.read_spectrum(write(tmp_path, TABLE, HEAD.replace("seed = 7", "seed = 8"))).history().values
    assert not np.array_equal(one, reseeded)
    assert np.array_equal(np.sort(one), np.sort(reseeded))


def test_down_may_differ_and_the_largest_may_be_cut(tmp_path):
    down = "exceedances_down = { at = [0.1, 1.0], per_block = [5000.0, 1.0] }\nlargest = 2.0\n"
    spectrum = spectra.read_spectrum(write(tmp_path, TABLE + down))
    flown = spectrum.sequence()
    cruise = flown.values[flown.phase == 1]
    assert (cruise.max(), cruise.min()) == (120.0, 90.0)


def test_table_in_a_file(tmp_path):
    (tmp_path / "gusts.csv").write_text("at;per_block\n0,2;5000\n1,0;300\n3,0;1\n")
    filed = spectra.read_spectrum(write(tmp_path, 'exceedances = { file = "gusts.csv" }\nsmallest = 0.25\n'))
    assert np.array_equal(filed.history().values, spectra.read_spectrum(write(tmp_path, TABLE)).history().values)


def test_phases_and_flights_of_the_sequence(spectrum):
    flown = spectrum.sequence()
    assert flown.ends.size == 100
    assert flown.ends[-1] == flown.values.size == flown.phase.size
    starts = np.concatenate([[0], flown.ends[:-1]])
    assert (flown.phase[starts] == 0).all()
    assert (flown.values[flown.phase == 0] == 0.0).all()
    assert (flown.phase == 0).sum() == 100


def edited(old, new, text=TABLE):
    assert old in text
    return text.replace(old, new)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (
            edited("300.0, 1.0", "6000.0, 1.0"),
            "phase[2].exceedances.per_block: rises or stays from 5000 at 0.2 to 6000 at 1: "
            "a higher level is exceeded less often.",
        ),
        (edited("300.0", "-300.0"), "phase[2].exceedances.per_block: -300 must be greater than 0."),
        (edited("1.0, 3.0", "3.0, 1.0"), "phase[2].exceedances.at: 1 follows 3: levels must rise."),
        (
            edited(", 1.0] }", ", 12.0] }"),
            "phase[2].exceedances: ends at 12 exceedances a block; the largest load comes once. "
            "Carry the table on to 1 or less.",
        ),
        (
            edited("[0.2, 1.0, 3.0]", "[0.2, 1.0]"),
            "phase[2].exceedances: at and per_block must be lists of numbers, equally long.",
        ),
        (
            edited("at = ", "levels = "),
            "phase[2].exceedances: {'levels': [0.2, 1.0, 3.0], 'per_block': [5000.0, 300.0, ... is no table. "
            "Write { at = [...], per_block = [...] } or { file = ... }.",
        ),
        (
            edited("smallest = 0.25", "smallest = 0.1"),
            "phase[2].smallest: 0.1 is below the exceedances table, which begins at 0.2. "
            "Raise it, or begin the table lower.",
        ),
        (
            edited("smallest = 0.25", "smallest = 2.95"),
            "phase[2].smallest: a block has 1.15 loads beyond 2.95 by exceedances; at least 2 are needed. "
            "Lower it, or put more flights in the block.",
        ),
        (edited("smallest = 0.25", ""), "phase[2].smallest: None must be a level greater than 0."),
        (TABLE + "levels = 1\n", "phase[2].levels: 1 must be a whole number from 2 to 100."),
        (TABLE + "largest = -1.0\n", "phase[2].largest: -1.0 must be a level greater than 0."),
        (TABLE + GUST.split("\n")[0], "phase[2]: has both exceedances and gust. Give one of the two."),
        ("smallest = 0.5\n", "phase[2]: has neither exceedances nor gust. Give one of the two."),
        (TABLE + "amplitude = [1.0]\n", "phase[2]: has cycles of given levels and exceedances. Keep one of the two."),
        (edited("P1 = 0.1", "P1 = 1.5", GUST), "phase[2].gust.P1: 1.5 must be a share of the time, from 0 to 1."),
        (
            edited("P1 = 0.1", "P1 = 1.0", GUST),
            "phase[2].gust: P1 + P2 is 1.01; shares of the time add up to at most 1.",
        ),
        (edited("b2 = 3.0", "b2 = 0.0", GUST), "phase[2].gust.b2: 0.0 must be greater than 0."),
        (edited("hours", "hour", GUST), "phase[2].gust.hour: is not a key of the gust form. Did you mean hours?"),
        (
            "gust = 3\nsmallest = 0.25\n",
            "phase[2].gust: 3 must be a table. Its keys are N0, P1, b1, P2, b2, A and hours.",
        ),
        (
            'exceedances = { file = "no.csv" }\nsmallest = 0.25\n',
            "phase[2].exceedances.file no.csv: there is no such file.",
        ),
    ],
)
def test_what_is_refused(tmp_path, text, message):
    with pytest.raises(spectra.InputFaults) as caught:
        spectra.read_spectrum(write(tmp_path, text))
    assert message in [str(fault) for fault in caught.value.faults]


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("seed = 7", "seed = -1", "seed: -1 must be a whole number from 0. It makes the sequence repeatable."),
        ("seed = 7", "seed = 9223372036854775807", None),
        ("seed = 7", "seed = 7.5", "seed: 7.5 must be a whole number from 0. It makes the sequence repeatable."),
        ("severity = 1.8", "severity = 0", "flight[2].severity: 0 must be from 0.1 to 10. 1 is the average flight."),
        ("severity = 1.8", "sevrity = 1.8", "flight[2].sevrity: is not a key of a flight. Did you mean severity?"),
        ("number = 10\n", "number = -10\n", "flight[2].number: -10 must be from 1 to 1e7 flights in a block."),
        ('repeated = "gust"', 'repeated = "gusts"', "phase[2].repeated: 'gusts' is not a channel. Did you mean gust?"),
        (
            'repeated = "gust"',
            "",
            "phase[2].repeated: is missing. Name the channel that the exceedances move.",
        ),
        ("steady = { level", "steady = { lvel", "phase[2].steady.lvel: is not a channel. Did you mean level?"),
    ],
)
def test_what_is_refused_around_them(tmp_path, old, new, message):
    assert old in HEAD
    path = write(tmp_path, TABLE, HEAD.replace(old, new))
    if message is None:
        assert spectra.read_spectrum(path).seed == 2**63 - 1
        return
    with pytest.raises(spectra.InputFaults) as caught:
        spectra.read_spectrum(path)
    assert [str(fault) for fault in caught.value.faults] == [message]


def test_too_many_loads_are_refused(tmp_path):
    with pytest.raises(spectra.InputFaults, match=r"flight: the block would have 1e\+09 points; 5e\+07 is the most"):
        spectra.read_spectrum(
            write(tmp_path, TABLE.replace("5000.0", "5e8").replace("smallest = 0.25", "smallest = 0.2"))
        )

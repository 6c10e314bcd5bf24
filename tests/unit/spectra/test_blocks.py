"""Blocks of one flight."""

import numpy as np
import pytest

import spectra


def table(blocks, **options):
    cycles = spectra.count_blocks(blocks, **options)
    return {(low, high): n for low, high, n in zip(cycles.low, cycles.high, cycles.count, strict=True)}


def test_one_block():
    assert table([(95.0, 0.0, 1.0)]) == {(0.0, 95.0): 1.0}


def test_a_listed_ground_air_ground_cycle_is_not_doubled():
    assert table([(90.0, 0.0, 1.0), (90.0, 50.0, 100.0)]) == {(0.0, 90.0): 1.0, (50.0, 90.0): 100.0}
    assert table([(90.0, 50.0, 100.0), (90.0, 0.0, 1.0)]) == {(0.0, 90.0): 1.0, (50.0, 90.0): 100.0}


def test_ground_air_ground_comes_out_of_counting():
    """Taxi at 0 to 3 and gusts at 50 to 90: one of the flight's cycles spans both."""
    assert table([(3.0, 0.0, 5.0), (90.0, 50.0, 100.0)]) == {(0.0, 90.0): 1.0, (50.0, 90.0): 100.0, (0.0, 3.0): 4.0}


@pytest.mark.parametrize("parts", [2, 3, 7])
def test_splitting_a_block_changes_nothing(parts):
    whole = table([(3.0, 0.0, 1.0), (90.0, 50.0, 1.0), (70.0, 10.0, 0.5)])
    split = table([(3.0, 0.0, 1.0)] + [(90.0, 50.0, 1.0 / parts)] * parts + [(70.0, 10.0, 0.25)] * 2)
    assert split.keys() == whole.keys()
    assert list(split.values()) == pytest.approx(list(whole.values()))


def test_a_million_cycles_are_not_expanded():
    assert table([(90.0, 0.0, 1.0), (80.0, 60.0, 1e6)]) == {(0.0, 90.0): 1.0, (60.0, 90.0): 1.0, (60.0, 80.0): 1e6 - 1}


def test_same_as_flying_the_sequence():
    blocks = [(5.0, -3.0, 2.0), (90.0, 40.0, 3.0), (70.0, 55.0, 0.25), (20.0, -8.0, 0.5)]
    points = []
    for flight in range(4):
        for high, low, number in blocks:
            times = int(np.floor((flight + 1) * number) - np.floor(flight * number))
            points += [high, low] * times + [high] * (times > 0)
    flown = spectra.count(points).merged().per_flight(4)
    assert table(blocks) == {(low, high): n for low, high, n in zip(flown.low, flown.high, flown.count, strict=True)}


def test_rare_blocks_are_counted_and_said():
    blocks = [(90.0, 0.0, 1.0), (120.0, 0.0, 1e-4)]
    assert table(blocks)[(0.0, 120.0)] == pytest.approx(1e-4)
    assert spectra.block_notes(blocks) == (
        "1 of the blocks comes less than once in 1000 flights: counted as listed, without what closes between such a "
        "block and the rest of its flight",
    )


@pytest.mark.parametrize(
    "block", [(0.0, 1.0, 1.0), (1.0, 0.0, 0.0), (1.0, 0.0, -1.0), (np.nan, 0.0, 1.0), (1.0, 0.0, np.inf)]
)
def test_what_is_no_block(block):
    with pytest.raises(ValueError, match="not a block"):
        spectra.count_blocks([block])

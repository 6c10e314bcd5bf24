"""ASTM E1049-85, the example history of section 5.4.4 (read second-hand); repeating block derived two ways."""

import numpy as np
import pytest

import spectra

HISTORY = [-2, 1, -3, 5, -1, 3, -4, 4, -2]


def by_range(cycles):
    table = {}
    for size, count in zip(cycles.range, cycles.count, strict=True):
        table[size] = table.get(size, 0.0) + count
    return table


def test_open_history_ranges():
    assert by_range(spectra.count(HISTORY, close=False)) == {3: 0.5, 4: 1.5, 6: 0.5, 8: 1.0, 9: 0.5}


def test_open_history_means():
    cycles = spectra.count(HISTORY, close=False)
    found = sorted(zip(cycles.range, cycles.mean, cycles.count, strict=True))
    assert found == [(3, -0.5, 0.5), (4, -1, 0.5), (4, 1, 1), (6, 1, 0.5), (8, 0, 0.5), (8, 1, 0.5), (9, 0.5, 0.5)]


def test_repeating_block():
    cycles = spectra.count(HISTORY)
    found = sorted(zip(cycles.range, cycles.mean, cycles.count, strict=True))
    assert found == [(3, -0.5, 1), (4, 1, 1), (7, 0.5, 1), (9, 0.5, 1)]


@pytest.mark.parametrize(("close", "total"), [(False, 67838), (True, 77123)])
def test_fifth_power_sum(close, total):
    cycles = spectra.count(HISTORY, close=close)
    assert np.sum(cycles.count * cycles.range**5) == pytest.approx(total, abs=0.5)

"""Smoke test: the counting benchmark runs, and all its ways give the same cycles."""

import numpy as np
import pytest

import spectra
from tests.benchmarks.counting_speed import adversaries, against_package, from_csv, from_map, walk


def test_it_runs(tmp_path):
    assert min(against_package(20_000, 5_000)) > 0
    assert from_map(tmp_path, 30_000, 10_000)[1] > 0
    assert min(from_csv(tmp_path, 5_000)) > 0


@pytest.mark.parametrize("name", [*adversaries(8), "walk"])
def test_long_and_short_counts_agree(name):
    values = walk(1501) if name == "walk" else adversaries(1501)[name]
    # few enough values to be kept pair by pair, in blocks all the same
    short, long = spectra.count(values).merged(), spectra.count_long(values, short=0, block=200).cycles
    np.testing.assert_array_equal(short.range, long.range)
    np.testing.assert_array_equal(short.count, long.count)

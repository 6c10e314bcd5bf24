"""Smoke test of the chain benchmark: same lives, and faster even with a tenth of the points."""

from tests.benchmarks.chain_speed import compare


def test_counting_once_is_the_same_and_faster():
    found = compare(repeats=3, locations=[0], points=28_000)
    assert found.points == 28_000
    assert found.difference < 1e-9
    assert found.ratio > 3

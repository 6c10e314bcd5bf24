"""Smoke test of the contact benchmark: it runs, and the contact is not slow by an order of magnitude."""

from tests.benchmarks.contact_speed import time_contact


def test_contact_is_not_slow():
    timing = time_contact(repeats=3, with_elements=False)
    assert timing.one_load < 15e-3
    assert timing.slowest_map < 150e-3

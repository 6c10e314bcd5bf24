"""Smoke test of the contact benchmark: it runs, and a map gives what its levels give one by one."""

import numpy as np
import pytest

from tests.benchmarks.contact_speed import LEVELS, make_hole, time_contact


def test_it_runs():
    timing = time_contact(repeats=1, with_elements=False)
    assert timing.one_load > 0
    assert timing.slowest_map >= timing.whole_map > 0


@pytest.mark.parametrize("fit", [-0.003, 0.0, 0.003])
def test_a_map_is_its_levels(fit):
    hole = make_hole()
    together = hole.solve(0.6 * LEVELS, 1.8 * LEVELS, fit).hoop
    alone = [hole.solve(0.6 * level, 1.8 * level, fit).hoop[0] for level in LEVELS[::8]]
    np.testing.assert_allclose(together[::8], alone, atol=1e-6)

"""De Jonge, Schuetz, Lowak and Schijve 1973 (NLR TR 73029, LBF FB-106), the flight table from memory.

The published totals per level close exactly on the table; the ground-air-ground sums are derived from it.
"""

import numpy as np
import pytest

import spectra

LEVELS = (1.60, 1.50, 1.30, 1.15, 0.995, 0.84, 0.685, 0.53, 0.375, 0.222)
TOTALS = (1, 2, 5, 18, 52, 152, 800, 4170, 34800, 358665)


@pytest.fixture(scope="module")
def spectrum():
    return spectra.read_spectrum("ten-flight-gust-programme")


@pytest.fixture(scope="module")
def history(spectrum):
    return spectrum.history({"load": 1.0})


def test_totals_per_level(spectrum):
    gusts = spectrum.phases[0]
    assert gusts.amplitude == LEVELS
    numbers = np.array([spectrum.flights[kind] * np.array(gusts.cycles[kind]) for kind in spectrum.flights])
    assert tuple(numbers.sum(axis=0)) == TOTALS
    assert sum(TOTALS) == 398_665
    assert sum(spectrum.flights.values()) == 4000


def test_points_and_cycles(history):
    assert history.values.size == 801_330
    assert spectra.count(history.values).total == 398_665


def test_ground_air_ground_appears_by_itself(history):
    """One cycle a flight starts at the ground; three gust lows reach it too (1 - 1.5 twice, 1 - 1.6 once)."""
    cycles = spectra.count(history.values)
    assert cycles.count[cycles.low <= -0.5].sum() == 4000 + 3


def test_largest_range(history):
    assert spectra.count(history.values).range.max() == pytest.approx(3.2)


@pytest.mark.parametrize(("power", "total"), [(3, 25308.185), (4, 47701.586), (5, 90982.343)])
def test_ground_air_ground_alone(spectrum, power, total):
    """Each flight's ground-air-ground cycle runs from -0.5 to 1 plus its largest gust."""
    gusts = spectrum.phases[0]
    tops = {kind: max(a for a, n in zip(LEVELS, gusts.cycles[kind], strict=True) if n) for kind in spectrum.flights}
    found = sum(n * (1.5 + tops[kind]) ** power for kind, n in spectrum.flights.items())
    assert found == pytest.approx(total, abs=5e-4)

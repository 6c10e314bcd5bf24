"""Shared by all tests: Hypothesis profiles and small cases."""

from __future__ import annotations

import os

for library in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ.setdefault(library, "1")  # two workers share the cores already

from pathlib import Path

import pytest
from hypothesis import HealthCheck, settings

import fatigue

settings.register_profile("default", deadline=None, max_examples=60, suppress_health_check=[HealthCheck.too_slow])
settings.register_profile("thorough", parent=settings.get_profile("default"), max_examples=2000)
settings.register_profile("ci", parent=settings.get_profile("default"), derandomize=True, print_blob=True)
settings.load_profile(os.environ.get("HYPOTHESIS_PROFILE", "ci" if os.environ.get("CI") else "default"))

LAP = """
title = "three-row lap"
[loads]
blocks = [ { max_MPa = 95.0, min_MPa = 0.0, cycles = 1 } ]
flown_flights = 10000
[splice]
kind = "lap"
pitch_mm = 20.0
row_spacing_mm = 20.0
free_length_mm = 150.0
[[sheet]]
name = "upper"
material = "2024-T3 bare sheet"
thickness_mm = 1.2
[[sheet]]
name = "lower"
material = "2024-T3 bare sheet"
thickness_mm = 1.2
[[row]]
name = "A"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[[row]]
name = "B"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[[row]]
name = "C"
hole_mm = 4.0
fastener = "solid-rivet-2117"
hole = "driven"
[hole.driven]
practice = { hole = 1.0, filling = 0.75 }
[life]
credit = "practice"
"""


@pytest.fixture
def lap_text() -> str:
    """Return a three-row lap at 0-95 MPa once a flight."""
    return LAP


@pytest.fixture
def lap(tmp_path: Path) -> fatigue.Case:
    """Return that lap, read."""
    return fatigue.parse_case(LAP, "lap.toml", tmp_path)

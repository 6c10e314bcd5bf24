"""Shared by all tests: Hypothesis profiles and small cases."""

from __future__ import annotations

import os

for library in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ.setdefault(library, "1")  # two workers share the cores already

from pathlib import Path

import pytest
from hypothesis import HealthCheck, settings

import fatigue
from reports.evidence.lives import LAP as PLAUSIBLE

settings.register_profile("default", deadline=None, max_examples=60, suppress_health_check=[HealthCheck.too_slow])
settings.register_profile("thorough", parent=settings.get_profile("default"), max_examples=2000)
settings.register_profile("ci", parent=settings.get_profile("default"), derandomize=True, print_blob=True)
settings.load_profile(os.environ.get("HYPOTHESIS_PROFILE", "ci" if os.environ.get("CI") else "default"))

LAP = (
    PLAUSIBLE.replace("plausibility lap (invented)", "three-row lap")
    .replace("fit_percent = 0.3\n", "")
    .replace("[splice]", "flown_flights = 10000\n[splice]", 1)
)
"""The evidence's three-row lap at 0-95 MPa once a flight, 10 000 flights flown, no fit given."""


@pytest.fixture
def lap_text() -> str:
    """Return a three-row lap at 0-95 MPa once a flight."""
    return LAP


@pytest.fixture
def lap(tmp_path: Path) -> fatigue.Case:
    """Return that lap, read."""
    return fatigue.parse_case(LAP, "lap.toml", tmp_path)

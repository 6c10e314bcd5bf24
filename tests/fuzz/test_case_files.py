"""No case file, however spoilt, makes more than a message: no traceback, no hang, no NaN, no infinity without a flag.

`FUZZ=100000 pytest tests/fuzz -n 2` draws that many; by default a few hundred.
"""

from __future__ import annotations

import json
import math
import os
from pathlib import Path

import numpy as np
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

import fatigue
from reports.tables import ranked_text, result_json
from spectra.faults import InputFaults
from tests.conftest import LAP
from tests.fuzz.mutations import spoilt

EXAMPLES = int(os.environ.get("FUZZ", "600"))
STARTS = [LAP, LAP.replace('"practice"', '"contact"'), fatigue.starter_text().replace('"short-hops"', '"long-range"')]
CHEAP = settings(max_examples=EXAMPLES, deadline=None, suppress_health_check=list(HealthCheck))
DEAR = settings(max_examples=max(EXAMPLES // 10, 50), deadline=None, suppress_health_check=list(HealthCheck))


def read(text):
    try:
        return fatigue.parse_case(text, "spoilt.toml", Path(__file__).parent)
    except InputFaults as error:
        faults = error
    assert str(faults).startswith("spoilt.toml")
    assert all(fault.problem for fault in faults.faults)
    return None


@CHEAP
@given(st.sampled_from(STARTS).flatmap(spoilt))
def test_reading(text):
    read(text)


@DEAR
@given(spoilt(LAP, most=2))
def test_estimating(text):
    case = read(text)
    if case is None:
        return
    try:
        found = fatigue.estimate(case)
    except InputFaults:
        return
    rows = found.rows
    numbers = rows.select_dtypes("number").drop(columns=["contact_from_deg", "contact_to_deg"])
    assert not numbers.isna().any().any(), numbers.columns[numbers.isna().any()].tolist()
    endless = np.isinf(rows["life_flights"])
    assert (rows.loc[endless, "flags"] != "").all()
    ranked_text(found)
    plain = json.loads(result_json(found), parse_constant=lambda word: math.nan)
    assert plain["rows"]

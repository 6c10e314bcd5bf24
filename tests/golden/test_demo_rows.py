"""Regression, not validation: the demo's numbers are those recorded from this code."""

import numpy as np
import pandas as pd

from tests.golden.record import RECORDED, rows_now

ANEW = "if meant, run: python -m tests.golden.record"
ROUNDING = 1e-9
"""Absolute, for stresses that are nought but for rounding [MPa]."""


def test_demo_rows():
    kept, now = pd.read_csv(RECORDED, keep_default_na=False, na_values=["nan"]), rows_now()
    assert list(kept.columns) == list(now.columns), ANEW
    for name in kept.columns:
        if pd.api.types.is_numeric_dtype(now[name]):
            near_nought = ROUNDING if name.endswith(("_MPa", "_deg")) else 0.0
            mine = pd.to_numeric(kept[name])
            np.testing.assert_allclose(now[name], mine, rtol=1e-6, atol=near_nought, err_msg=f"{name}: {ANEW}")
        else:
            assert now[name].astype(str).tolist() == kept[name].astype(str).tolist(), f"{name}: {ANEW}"


def test_every_life_is_recorded():
    kept = pd.read_csv(RECORDED)
    lives = kept.filter(regex="^life_.*flights$")
    assert lives.shape[0] == 6
    assert (lives > 0).all(axis=None)

"""The samples in the repository are what the code gives now."""

import numpy as np
import pandas as pd
import pytest

from reports.provenance import theory_text
from tests.golden.samples import SAMPLES, build, comparable

ANEW = "run: python -m tests.golden.samples"


@pytest.fixture(scope="module")
def built(tmp_path_factory):
    folder = tmp_path_factory.mktemp("samples")
    build(folder)
    return folder


def test_rows(built):
    kept, now = (pd.read_csv(folder / "rows.csv") for folder in (SAMPLES, built))
    assert list(kept.columns) == list(now.columns), ANEW
    for name in kept.columns:
        if pd.api.types.is_numeric_dtype(kept[name]):
            np.testing.assert_allclose(now[name], kept[name], rtol=1e-4, atol=1e-6, err_msg=f"{name}: {ANEW}")
        else:
            assert now[name].fillna("").tolist() == kept[name].fillna("").tolist(), f"{name}: {ANEW}"


def test_report(built):
    kept, now = (comparable((folder / "report.html").read_text(encoding="utf-8")) for folder in (SAMPLES, built))
    assert now.splitlines() == kept.splitlines(), ANEW


def test_the_picture_of_the_readme_is_there():
    assert (SAMPLES / "critical_row.png").read_bytes().startswith(b"\x89PNG")


def test_theory():
    assert (SAMPLES / "theory.md").read_text(encoding="utf-8") == theory_text(), ANEW

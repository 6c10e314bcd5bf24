"""A case written by the page reads back as the same tables."""

import tomllib

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fatigue.case.shipped import demo_case, demo_names
from reports.live.toml_text import toml_text

TEXT = st.text(st.characters(exclude_categories=["Cs"]), max_size=12)
VALUES = st.recursive(
    st.booleans() | st.integers(-(2**60), 2**60) | st.floats(allow_nan=False) | TEXT,
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(TEXT, inner, max_size=3),
    max_leaves=8,
)


@pytest.mark.parametrize("name", demo_names())
def test_shipped_cases_read_back(name):
    tables = tomllib.loads(demo_case(name).read_text(encoding="utf-8"))
    assert tomllib.loads(toml_text(tables)) == tables


@given(st.dictionaries(TEXT | st.sampled_from(["row", "hole", "loads"]), VALUES, max_size=4))
def test_any_tables_read_back(tables):
    assert tomllib.loads(toml_text(tables)) == tables


def test_left_out_values_are_not_written():
    assert toml_text({"loads": {"scale": None, "flown_flights": 3}}) == "[loads]\nflown_flights = 3\n"


@pytest.mark.parametrize("bad", [object(), [[[[[[[[[[[]]]]]]]]]]]])
def test_what_no_case_holds_is_refused(bad):
    with pytest.raises(ValueError, match=r"case file"):
        toml_text({"title": bad})

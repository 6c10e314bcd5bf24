"""Laws of route `contact` over the whole chain."""

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

import fatigue
from tests.conftest import LAP

FITS = st.floats(-0.6, 1.2)


def lives(fit, top=95.0, bottom=0.0, credit="contact", edits=()):
    text = LAP.replace("[hole.driven]", f"[hole.driven]\nfit_percent = {fit!r}").replace('"practice"', f'"{credit}"')
    text = text.replace("max_MPa = 95.0, min_MPa = 0.0", f"max_MPa = {top!r}, min_MPa = {bottom!r}")
    for old, new in edits:
        text = text.replace(old, new)
    return fatigue.estimate(fatigue.parse_case(text, "case.toml", None))


@settings(max_examples=25)
@given(fit=FITS, top=st.floats(40, 130), drop=st.floats(0.5, 0.97))
def test_a_lower_largest_load_never_shortens_the_life(fit, top, drop):
    worse, better = lives(fit, top), lives(fit, top * drop)
    assert better.rows["life_flights"].min() >= worse.rows["life_flights"].min() * (1 - 1e-9)


@settings(max_examples=25)
@given(fit=FITS, bottom=st.floats(0, 60), rise=st.floats(0.5, 30))
def test_a_smaller_range_under_the_same_maximum_never_shortens_the_life(fit, bottom, rise):
    worse, better = lives(fit, bottom=bottom), lives(fit, bottom=bottom + rise)
    assert better.rows["life_flights"].min() >= worse.rows["life_flights"].min() * (1 - 1e-9)


@settings(max_examples=15)
@given(fit=FITS, top=st.floats(40, 130))
def test_a_mirrored_lap_has_mirrored_lives(fit, top):
    life = lives(fit, top).routes["contact"].life
    np.testing.assert_allclose(life, life[::-1], rtol=1e-6)


@settings(max_examples=15)
@given(fit=FITS)
def test_no_credit_is_never_more_than_any_route(fit):
    one = lives(fit)
    bare = one.rows["life_no_credit_flights"]
    for route in ("none", "practice", "snug"):
        assert (bare <= one.rows[f"life_{route}_flights"] * (1 + 1e-12)).all()
    if fit <= 0:
        assert (bare <= one.rows["life_contact_flights"] * (1 + 1e-12)).all()

"""The second opinion in an estimate."""

import numpy as np
import pytest

import fatigue
from fatigue.material.library import strain_life
from fatigue.material.local_strain import local_strain_life
from fatigue.second import FAR_APART, LONGEST_COMPARED
from spectra.faults import InputFaults

OWN = """
[material."own sheet"]
modulus_MPa = 72000
poisson = 0.33
yield_MPa = 345
curve = "2024-T3 sheet"
"""


def run(text, *edits):
    for old, new in edits:
        assert old in text
        text = text.replace(old, new)
    return fatigue.estimate(fatigue.parse_case(text, "case.toml", None))


def test_it_is_the_local_strain_life_of_the_same_cycles(lap_text):
    one = run(lap_text)
    route = one.routes["practice"]
    direct = local_strain_life(route.low, route.high, one.loads.cycles.count, strain_life("2024-T351"))
    np.testing.assert_allclose(one.opinion.life, direct.life)
    np.testing.assert_allclose(one.rows["life_local_strain_flights"], direct.life[one.order])


def test_alone_by_choice(lap_text):
    usual = run(lap_text)
    alone = run(lap_text, ('credit = "practice"', 'credit = "practice"\ncurve = "local-strain"'))
    np.testing.assert_allclose(alone.rows["life_flights"], np.sort(usual.opinion.life))
    np.testing.assert_allclose(alone.rows["life_flights"], alone.rows["life_local_strain_flights"])
    assert (alone.rows["life_none_flights"] < alone.rows["life_practice_flights"]).all()
    assert not alone.rows["flags"].str.contains("local strain gives").any()


def test_a_material_without_constants_has_no_second_opinion(lap_text):
    text = lap_text.replace("2024-T3 bare sheet", "own sheet") + OWN
    one = run(text)
    assert one.rows["life_local_strain_flights"].isna().all()
    assert set(one.opinion.parted) == {""}
    named = run(text + 'strain_life = "2024-T351"\n')
    assert named.rows["life_local_strain_flights"].notna().all()


def test_alone_without_constants_is_a_fault(lap_text):
    text = lap_text.replace("2024-T3 bare sheet", "own sheet") + OWN
    text = text.replace('credit = "practice"', 'credit = "practice"\ncurve = "local-strain"')
    with pytest.raises(InputFaults) as caught:
        run(text)
    assert 'life.curve: "own sheet" has no strain-life constants. Use a material that has them' in str(caught.value)
    with pytest.raises(InputFaults) as caught:
        run(text + 'strain_life = "2024-T35"\n')
    assert 'there is no set of constants "2024-T35". Did you mean 2024-T351?' in str(caught.value)


def test_what_parts_them_is_said_only_where_they_are_far_apart(lap_text):
    one = run(lap_text, ("max_MPa = 95.0", "max_MPa = 120.0"))
    for notched, local, words in zip(one.route.life, one.opinion.life, one.opinion.parted, strict=True):
        far = max(notched, local) > FAR_APART * min(notched, local) and min(notched, local) < LONGEST_COMPARED
        assert bool(words) == far
        if far:
            assert ("shorter" if local < notched else "longer") in words


def test_the_residual_stress_is_given_once(lap_text):
    """Cold-expanded: the map holds what the first block left; the second opinion relaxes it by itself."""
    edits = [("[hole.driven]", "[hole.driven]\nfit_percent = 0.0\ncold_expansion_percent = 4.0")]
    edits += [('credit = "practice"', 'credit = "contact"')]
    one = run(lap_text, *edits)
    bare = run(lap_text, ("[hole.driven]", "[hole.driven]\nfit_percent = 0.0"), edits[1])
    assert (one.opinion.life > bare.opinion.life).all()
    assert (one.opinion.relaxed <= 1.0 + 1e-9).all()
    i = one.governing
    made = one.filled.making[i].residual_hoop
    left = one.rows.iloc[0]["residual_left_MPa"]
    direct = local_strain_life(
        one.route.low[[i]] - left, one.route.high[[i]] - left, one.loads.cycles.count, strain_life("2024-T351"),
        residual=[made],
    )  # fmt: skip
    assert one.opinion.life[i] == pytest.approx(direct.life[0], rel=1e-6)

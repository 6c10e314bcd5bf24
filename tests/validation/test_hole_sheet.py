"""The hole in a strip and in a row by collocation, against Howland 1930 (memory) and elements made for this project."""

import numpy as np
import pytest

from fatigue.hole.sheet import HARMONICS, sheet_edge, wide_sheet


@pytest.mark.parametrize(("x", "value"), [(0.1, 3.03), (0.2, 3.14), (0.3, 3.36), (0.5, 4.32)])
def test_howland_strip(x, value):
    """Within 0.7 %: Howland's values from memory; the elements below say they are that much low."""
    assert sheet_edge("strip", x, np.inf, 0.33).open_factor == pytest.approx(value, rel=0.007)


@pytest.mark.parametrize(("x", "value"), [(0.1, 3.0360), (0.2, 3.1525), (0.3, 3.3743), (0.5, 4.3477)])
def test_strip_against_elements(x, value):
    """Second-order elements, strip up to 8 widths long, made for this project; converged to the digits given."""
    assert sheet_edge("strip", x, np.inf, 0.33).open_factor == pytest.approx(value, abs=3e-4)


@pytest.mark.parametrize(("x", "value"), [(0.2, 3.011), (0.25, 3.021), (0.3, 3.039), (0.5, 3.249)])
def test_row_of_holes(x, value):
    """Within 0.3 %: the elements behind these held the sheet's contraction over a finite length."""
    assert sheet_edge("row", x, np.inf, 0.33).open_factor == pytest.approx(value, rel=0.003)


@pytest.mark.parametrize("edge", ["row", "strip"])
@pytest.mark.parametrize("x", [0.1, 0.2, 0.3, 0.5])
@pytest.mark.parametrize("end", [2.0, 3.0, np.inf])
def test_reciprocity(edge, x, end):
    """Work of one pressure on another's opening is the same both ways (Betti), though nothing forces it to be."""
    answers = sheet_edge(edge, x, end, 0.33).opening_pressure
    kept = np.array([n for n in range(HARMONICS) if n != 1])
    weight = np.where(kept == 0, 2.0, 1.0)[:, None]
    work = answers[np.ix_(kept, kept)] * weight
    np.testing.assert_allclose(work, work.T, atol=0.03 * np.abs(work).max() if x < 0.2 else 1e-3 * np.abs(work).max())


@pytest.mark.parametrize("edge", ["row", "strip"])
def test_wide_limit(edge):
    """Kirsch, and 8/pi^2 = 0.8106 for the cosine pressure, as the sides go away."""
    near, far = (sheet_edge(edge, x, np.inf, 0.33) for x in (0.1, 0.025))
    for name, limit in (("open_factor", 3.0), ("cosine_bearing_factor", 8 / np.pi**2)):
        assert abs(getattr(far, name) - limit) < abs(getattr(near, name) - limit)
    assert far.open_factor == pytest.approx(3.0, abs=0.003)
    assert far.cosine_bearing_factor == pytest.approx(8 / np.pi**2 + 0.025 / 2 * 3, abs=0.003)
    assert wide_sheet(0.33).cosine_bearing_factor == pytest.approx(0.8106, abs=5e-5)


@pytest.mark.parametrize("poisson", [0.25, 0.33])
def test_stress_of_balanced_loads_does_not_know_poisson(poisson):
    """Michell: tractions in balance on every edge give stresses free of elastic constants."""
    one, other = sheet_edge("strip", 0.3, 2.5, poisson), sheet_edge("strip", 0.3, 2.5, 0.4)
    balanced = [n for n in range(HARMONICS) if n != 1]
    np.testing.assert_allclose(one.hoop_remote, other.hoop_remote, atol=2e-3)
    np.testing.assert_allclose(one.hoop_pressure[:, balanced], other.hoop_pressure[:, balanced], atol=2e-3)


def test_near_end_in_a_wide_sheet_joins_smoothly():
    """Up to a fifth of the width away an end's effect comes from a narrower sheet; beyond, from the sheet itself."""
    ends = [(0.1, 1.999), (0.1, 2.001)]
    below, above = (sheet_edge("row", x, end, 0.33) for x, end in ends)
    assert below.open_factor == pytest.approx(above.open_factor, rel=2e-3)
    assert below.cosine_bearing_factor == pytest.approx(above.cosine_bearing_factor, rel=3e-3)


@pytest.mark.parametrize("edge", ["row", "strip"])
def test_held_on_net_section_beyond_what_is_solved(edge):
    """Continuous, and growing as the net section shrinks."""
    edges = [sheet_edge(edge, x, np.inf, 0.33).open_factor for x in (0.75, 0.7501, 0.95)]
    assert edges[1] == pytest.approx(edges[0], rel=1e-3)
    assert edges[2] == pytest.approx(5 * edges[0], rel=1e-9)


def test_impossible_geometry_is_refused():
    with pytest.raises(ValueError, match="width_ratio"):
        sheet_edge("row", 1.0, np.inf, 0.33)
    with pytest.raises(ValueError, match="end_ratio"):
        sheet_edge("row", 0.2, 0.5, 0.33)

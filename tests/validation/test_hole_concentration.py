"""Concentration factors: Kirsch 1898, Howland 1930 (memory), Heywood 1952, Reissner 1945, Goodier 1936; own elements.

The trade's "about 3 open" is common practice, no source.
"""

import numpy as np
import pytest

from fatigue.hole import concentration as k
from fatigue.hole.countersink import countersink_factor


def test_open_hole_in_a_wide_sheet():
    assert float(k.row_of_holes(0.0)) == 3.0
    assert float(k.isolated_strip(0.0)) == 3.0


@pytest.mark.parametrize(("x", "value"), [(0.1, 3.03), (0.2, 3.14), (0.3, 3.36), (0.5, 4.32)])
def test_howland_strip(x, value):
    assert float(k.isolated_strip(x)) == pytest.approx(value, rel=0.02)  # Heywood's form is within 2 %


@pytest.mark.parametrize(("x", "value"), [(0.2, 3.011), (0.25, 3.021), (0.3, 3.039), (0.5, 3.249)])
def test_row_of_holes(x, value):
    assert float(k.row_of_holes(x)) == pytest.approx(value, abs=5e-4)


def test_cosine_bearing_by_its_own_series():
    """Hoop at 90 deg in a wide sheet: 2 p0 - p(90) + (3 - nu)/2 p1 cos 90 for p = (4/pi) cos on half the edge.

    Of the cosine pressure only the mean p0 acts at 90 deg, where the pressure itself vanishes.
    """
    theta = np.linspace(-np.pi / 2, np.pi / 2, 200_001)
    peak = 4 / np.pi  # so that the resultant is F/(d t) = 1
    resultant = np.trapezoid(peak * np.cos(theta) ** 2, theta) / 2
    assert resultant == pytest.approx(1.0, rel=1e-9)
    mean = np.trapezoid(peak * np.cos(theta), theta) / (2 * np.pi)
    assert 2 * mean == pytest.approx(k.COSINE_BEARING, rel=1e-9)
    assert float(k.COSINE_BEARING) == pytest.approx(0.8106, abs=5e-5)


@pytest.mark.parametrize(("nu", "value"), [(0.33, 1.7988), (0.30, 1.7879)])
def test_thin_sheet_bending(nu, value):
    assert float(k.bending_thin_sheet(nu)) == pytest.approx(value, abs=5e-5)


def test_bending_rises_from_thin_to_thick():
    assert float(k.bending_any_sheet(0.3, 1e6)) == pytest.approx(1.7879, abs=5e-5)
    assert float(k.bending_any_sheet(0.3, 0.0)) == pytest.approx(3.0, abs=1e-6)


TABLE = {
    0.5: {0.25: 1.475, 0.50: 1.294, 0.75: 1.111},
    1.0: {0.25: 1.309, 0.50: 1.214, 0.75: 1.085},
    1.67: {0.25: 1.215, 0.50: 1.164, 0.75: 1.069},
    2.5: {0.25: 1.155, 0.50: 1.126, 0.75: 1.056},
}
"""Peak at a 100 deg countersunk hole over the plain one, by r/t and b/t: 20-node bricks made for this project."""


@pytest.mark.parametrize(("r_t", "b_t", "ratio"), [(r, b, v) for r, row in TABLE.items() for b, v in row.items()])
def test_countersink(r_t, b_t, ratio):
    assert float(countersink_factor(1 - b_t, 1.0, r_t)) == pytest.approx(
        ratio, rel=0.0205
    )  # the fit's own error, 2.03 % at worst

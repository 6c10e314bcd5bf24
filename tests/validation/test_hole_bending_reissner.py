"""Bending of a plate with a hole: Reissner 1945 (memory) solved here as a linear system, apart from the closed form.

Deflection and shear function outside a free hole of radius 1 in a plate of thickness h, bent by unit moment far away:
w = w0 + (B/r^2 + C) cos 2t, chi = F K2(k r) sin 2t, k = sqrt(10)/h; bending moment, twist and shear force vanish at the
edge. Moments with their shear terms (h^2/5) Q as the theory has them.
"""

import numpy as np
import pytest
from scipy.special import kv

from fatigue.hole.concentration import bending_any_sheet, bending_thin_sheet


def factor_by_linear_system(nu, diameter_ratio):
    h = 2 / diameter_ratio
    k = np.sqrt(10) / h
    shear = 1.0
    slope = -k * (kv(1, k) + kv(3, k)) / 2 / kv(2, k)
    curve = k * k * (kv(0, k) + 2 * kv(2, k) + kv(4, k)) / 4 / kv(2, k)
    far = 1 / (4 * (1 - nu))

    def edge(b, c, f, remote):
        w, w1, w2 = -far * remote + b + c, -2 * far * remote - 2 * b, -2 * far * remote + 6 * b
        lap, lap1, lap2 = -4 * c, 8 * c, -24 * c
        q_r, q_r1 = -lap1 + 2 * f * shear, -lap2 + 2 * f * (slope - shear)
        q_t, q_t1 = 2 * lap - f * slope, 2 * (lap1 - lap) - f * curve
        radial = -(w2 + nu * (w1 - 4 * w)) + h * h / 5 * q_r1
        twist = -(1 - nu) * (2 * w - 2 * w1) + h * h / 10 * (-2 * q_r + q_t1 - q_t)
        around = -(w1 - 4 * w + nu * w2) + h * h / 5 * (2 * q_t + q_r)
        return np.array([radial, twist, q_r]), around

    system = np.column_stack([edge(*unit, 0.0)[0] for unit in np.eye(3)])
    unknown = np.linalg.solve(system, -edge(0.0, 0.0, 0.0, 1.0)[0])
    return 1 - edge(*unknown, 1.0)[1]


@pytest.mark.parametrize("nu", [0.25, 0.30, 0.33])
@pytest.mark.parametrize("diameter_ratio", [0.05, 0.5, 1.0, 2.0, 3.33, 7.0, 20.0])
def test_closed_form(nu, diameter_ratio):
    assert float(bending_any_sheet(nu, diameter_ratio)) == pytest.approx(
        factor_by_linear_system(nu, diameter_ratio), rel=1e-6
    )


def test_limits():
    assert float(bending_any_sheet(0.33, 0.0)) == pytest.approx(3.0, abs=1e-6)
    assert float(bending_any_sheet(0.33, 1e7)) == pytest.approx(float(bending_thin_sheet(0.33)), abs=1e-6)
    ratios = np.geomspace(0.01, 100, 50)
    assert np.all(np.diff(bending_any_sheet(0.33, ratios)) < 0)

"""Huth 1986 and Swift 1971 as given in a public review (read), Tate and Rosenfeld 1946 NACA TN 1051 (memory).

Values derived from the formulas by hand, E = E_f = 72 000 MPa, nu 0.33, flexibility in 1e-6 mm/N.
"""

import pytest

from fatigue.joint.flexibility import huth_1986, swift_1971, tate_rosenfeld_1946

E = 72e3


@pytest.mark.parametrize(("t", "value"), [(1.2, 47.193), (1.6, 39.711)])
def test_huth_riveted(t, value):
    assert 1e6 * huth_1986(t, t, 4.0, E, E, E, riveted=True) == pytest.approx(value, abs=5e-4)


def test_huth_bolted_double_shear():
    found = huth_1986(2.0, 1.2, 4.7625, E, E, 205e3, riveted=False, shear_planes=2)
    assert 1e6 * found == pytest.approx(10.850, abs=5e-3)  # the printed value does not say E of the steel


def test_swift():
    assert 1e6 * swift_1971(1.2, 1.2, 4.0, E, E, E) == pytest.approx(35.880, abs=5e-4)


def test_tate_rosenfeld():
    assert 1e6 * tate_rosenfeld_1946(1.6, 1.6, 4.7625, E, E, E, 0.33) == pytest.approx(38.348, abs=5e-4)

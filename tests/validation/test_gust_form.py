"""Press and Steiner 1958 (NACA TN 4332, from memory): exceedances of continuous turbulence.

Derived again here: Rice's crossings exp(-y^2 / 2 A^2 s^2) of a Gaussian response, mixed over a half-normal intensity s
of scale b, integrate to exp(-y / A b).
"""

import numpy as np
import pytest
from scipy.integrate import quad

from spectra.exceedance import GustForm


def one_kind(b, A):
    return GustForm(N0=1.0, P1=1.0, b1=b, P2=0.0, b2=1.0, A=A, hours=1.0)


# the second was first printed as 0.3047653655, wrong from the seventh digit: exp(-25/21.04) is 0.30476541552
@pytest.mark.parametrize(("y", "A", "b", "printed"), [(10, 1, 3.27, 0.0469766798), (25, 2, 10.52, 0.3047654155)])
def test_closed_form(y, A, b, printed):
    assert one_kind(b, A).number(y) == pytest.approx(printed, abs=5e-11)


@pytest.mark.parametrize(("y", "A", "b"), [(10, 1, 3.27), (25, 2, 10.52), (1, 0.1, 2.0)])
def test_closed_form_is_the_mix_of_rices_crossings(y, A, b):
    def mixed(s):
        return np.exp(-(y**2) / (2 * A**2 * s**2)) * np.sqrt(2 / np.pi) / b * np.exp(-(s**2) / (2 * b**2))

    total, _ = quad(mixed, 0, 40 * b, epsabs=1e-13, limit=400)
    assert one_kind(b, A).number(y) == pytest.approx(total, rel=1e-9)


def test_two_kinds_add():
    both = GustForm(N0=900.0, P1=0.2, b1=1.0, P2=0.01, b2=3.0, A=0.1, hours=50.0)
    level = np.linspace(0.0, 3.0, 31)
    expected = 45e3 * (0.2 * np.exp(-level / 0.1) + 0.01 * np.exp(-level / 0.3))
    assert both.number(level) == pytest.approx(expected)


def test_level_is_the_inverse():
    both = GustForm(N0=900.0, P1=0.2, b1=1.0, P2=0.01, b2=3.0, A=0.1, hours=50.0)
    wanted = np.array([1.0, 3.0, 100.0, 9000.0])
    assert both.number(both.level(wanted)) == pytest.approx(wanted, rel=1e-12)

"""Route `none`: the elastic peak at the hole edge by superposition, no credit for what fills the hole."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class PeakParts:
    """What makes up the peak hoop stress, broadcast shape [MPa]."""

    bypass: Array
    bearing: Array
    bending: Array

    @property
    def total(self) -> Array:
        """The peak itself."""
        return np.asarray(self.bypass + self.bearing + self.bending)


def peak_parts(
    *,
    bypass: Array,
    transfer: Array,
    bearing: Array,
    bending: Array,
    k_bypass: Array,
    k_pressure: Array,
    k_bend: Array,
) -> PeakParts:
    """Superpose bypass, bearing and bending at the edge of a hole.

    peak = K_bypass (bypass + transfer/2) + K_pressure |bearing| + K_bend bend. Under reversed load the pin bears on
    the other side and still pushes: the pressure part stays tensile while the pin's reaction, which counts as remote
    stress, changes sign with the load.

    Parameters
    ----------
    bypass, transfer, bearing, bending : ndarray
        Bypass load/(W t), transferred load/(W t), F/(d t) and bending stress, signed by the load [MPa].
    k_bypass, k_pressure, k_bend : ndarray
        Factors; K_pressure is that of the bearing pressure alone, on F/(d t).

    Returns
    -------
    PeakParts
        The bearing part holds both the pressure and the reaction.

    References
    ----------
    Superposition of classical solutions; keys ``kirsch-1898``, ``cosine-bearing``.
    """
    return PeakParts(
        bypass=np.asarray(k_bypass * bypass),
        bearing=np.asarray(k_pressure * np.abs(bearing) + k_bypass * transfer / 2),
        bending=np.asarray(k_bend * bending),
    )

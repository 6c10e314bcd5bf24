"""From the sheets' loads to what every location carries: incoming, bypass and transferred load, and their stresses."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.layout import JointArrays, Layout

Array = NDArray[np.float64]

ROUNDING = 1e-12
"""Share of the remote load below which a bypass is rounding."""


@dataclass(frozen=True, eq=False)
class LocationLoads:
    """Loads of every location, shape (..., L), in the unit of the segment loads they were made from.

    Parameters
    ----------
    incoming, bypass : ndarray
        Load of the sheet on the more and on the less loaded side of the row, tension positive.
    transfer : ndarray
        What the fasteners of the row take out of the sheet or bring into it, at least 0.
    incoming_before : ndarray of bool
        Whether the more loaded side is the one before the row.
    """

    incoming: Array
    bypass: Array
    transfer: Array
    incoming_before: NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class LocationStress:
    """Stresses of every location, shape (..., L), per unit of remote stress or in MPa.

    Parameters
    ----------
    incoming, bypass, transfer : ndarray
        Gross: load/(W t).
    bearing : ndarray
        Load of one fastener/(d t), without the share that friction carries.
    """

    incoming: Array
    bypass: Array
    transfer: Array
    bearing: Array


def location_loads(layout: Layout, segment: Array, remote: float | Array = 1.0) -> LocationLoads:
    """Return incoming, bypass and transferred load of every location.

    Parameters
    ----------
    layout : Layout
    segment : ndarray, shape (..., R + 1, s)
        Load of every sheet in every segment.
    remote : float or ndarray, shape (...)
        Remote load, which says how small rounding is.
    """
    before = segment[..., layout.row, layout.sheet]
    after = segment[..., layout.row + 1, layout.sheet]
    from_before = np.abs(before) >= np.abs(after)
    incoming = np.where(from_before, before, after)
    bypass = np.where(from_before, after, before)
    small = ROUNDING * np.abs(np.asarray(remote, dtype=np.float64))[..., None]
    bypass = np.where(np.abs(bypass) < small, 0.0, bypass)
    return LocationLoads(incoming, bypass, np.abs(incoming - bypass), from_before)


def location_stress(layout: Layout, arrays: JointArrays, loads: LocationLoads) -> LocationStress:
    """Return the stresses that loads over the remote load make, per unit of remote stress.

    The bearing of a row follows its own pitch: the common width carries W/pitch fasteners.
    """
    thickness = arrays.at_holes[..., layout.row, layout.sheet]
    ratio = arrays.first_thickness(layout)[..., None] / thickness
    row = layout.row
    per_fastener = arrays.pitch[..., row] / arrays.diameter[..., row] * (1.0 - arrays.friction_share[..., row])
    return LocationStress(
        incoming=loads.incoming * ratio,
        bypass=loads.bypass * ratio,
        transfer=loads.transfer * ratio,
        bearing=loads.transfer * ratio * per_fastener,
    )

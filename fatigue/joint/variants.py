"""Any number of variants of a joint in one call."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.joint.beam import bending_stress, build_bender, face_sign
from fatigue.joint.layout import JointArrays, Layout
from fatigue.joint.locations import LocationLoads, LocationStress, location_loads, location_stress
from fatigue.joint.transfer import row_loads

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Variants:
    """Row loads and bending of variants; leading dimensions as in the arrays given, then the L locations.

    Parameters
    ----------
    loads : LocationLoads, shape (..., L)
        Over the remote load.
    per_stress : LocationStress, shape (..., L)
        Over the remote stress.
    bending : ndarray, shape (..., L, n)
        At each location's face in light-load tension [MPa].
    face : ndarray, shape (..., L)
        1 the upper face, -1 the lower one, 0 neither.
    flexibility : ndarray, shape (..., I)
        Per total fastener load [mm/N].
    residual : ndarray, shape (...)
        Equilibrium residual over the remote load.
    """

    loads: LocationLoads
    per_stress: LocationStress
    bending: Array
    face: Array
    flexibility: Array
    residual: Array


def solve_variants(layout: Layout, arrays: JointArrays, levels: ArrayLike) -> Variants:
    """Solve row loads and bending of every variant at every load level.

    Parameters
    ----------
    layout : Layout
    arrays : JointArrays
        With leading batch dimensions.
    levels : array_like, shape (n,)
        Remote gross stress [MPa].

    Returns
    -------
    Variants

    Raises
    ------
    ValueError
        If some sheet is held by nothing, or a row has slack: its loads are no longer in proportion.

    Examples
    --------
    >>> from dataclasses import replace
    >>> import fatigue
    >>> from fatigue.joint.layout import arrays_of, layout_of
    >>> splice = fatigue.read_case(fatigue.demo_case()).splice
    >>> layout, arrays = layout_of(splice), arrays_of(splice)
    >>> thinner = arrays.thickness * np.linspace(0.8, 1.0, 5)[:, None, None]
    >>> solve_variants(layout, replace(arrays, thickness=thinner), [50.0, 100.0]).bending.shape
    (5, 6, 2)
    """
    if (arrays.slack > 0.0).any():
        raise ValueError("variants with slack are solved one by one: their loads are not in proportion")
    chain = row_loads(layout, arrays)
    loads = location_loads(layout, chain.segment)
    bender = build_bender(layout, arrays)
    return Variants(
        loads=loads,
        per_stress=location_stress(layout, arrays, loads),
        bending=bending_stress(layout, bender, np.atleast_1d(np.asarray(levels, dtype=np.float64))),
        face=face_sign(bender.upper),
        flexibility=chain.flexibility,
        residual=chain.residual,
    )

"""The map S -> stress at the hole edge of every location, by route."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.hole import concentration, countersink
from fatigue.hole.superposition import PeakParts, peak_parts
from fatigue.joint import Joint
from fatigue.splice import Splice

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class HoleFactors:
    """Concentration factors of every location, shape (L,) each.

    Parameters
    ----------
    width_ratio : ndarray
        x = d / pitch.
    k_bypass, k_bearing, k_bend : ndarray
        On gross bypass stress, on bearing stress (tension, with the pin's reaction), on bending stress; countersink and
        head fixity included.
    sink, tilt : ndarray
        Countersink and head-fixity factors, 1 where there is nothing to say; both are in the ones above.
    practice : ndarray
        Product of the two practice factors.
    """

    width_ratio: Array
    k_bypass: Array
    k_bearing: Array
    k_bend: Array
    sink: Array
    tilt: Array
    practice: Array


@dataclass(frozen=True, eq=False)
class LocalStress:
    """Hole-edge stress of every location against the remote gross stress.

    Parameters
    ----------
    levels : ndarray, shape (n,)
        Remote gross stress S, ascending, zero among them [MPa].
    parts : PeakParts
        Bypass, bearing and bending parts of the untreated peak, shape (L, n) each [MPa].
    bending : ndarray, shape (L, n)
        Nominal bending stress at the governing face [MPa].
    peak : dict of ndarray, shape (L, n)
        Peak hoop stress by route [MPa].
    factors : HoleFactors
    net_per_stress : ndarray, shape (L,)
        Net-section stress over S.
    """

    levels: Array
    parts: PeakParts
    bending: Array
    peak: dict[str, Array]
    factors: HoleFactors
    net_per_stress: Array


def hole_factors(splice: Splice, joint: Joint) -> HoleFactors:
    """Return the concentration factors of every location."""
    rows = [splice.rows[r] for r in joint.row]
    sheets = [splice.sheets[s] for s in joint.sheet]
    diameter = np.array([row.hole_diameter for row in rows])
    pitch = np.array([row.pitch for row in rows])
    poisson = np.array([sheet.material.poisson for sheet in sheets])
    x = diameter / pitch
    hole_in = concentration.row_of_holes if splice.edge == "row" else concentration.isolated_strip
    sink = np.array(
        [
            countersink.countersink_factor(sink.depth, t, row.hole_diameter / 2)
            if (sink := row.countersink) is not None and sink.sheet == s
            else 1.0
            for row, s, t in zip(rows, joint.sheet, joint.thickness, strict=True)
        ]
    )
    tilt = np.array([concentration.head_fixity_factor(row.head_fixity) for row in rows])
    k_open = np.asarray(hole_in(x))
    return HoleFactors(
        width_ratio=x,
        k_bypass=sink * k_open,
        k_bearing=sink * (tilt * concentration.COSINE_BEARING + x / 2 * k_open),
        k_bend=concentration.bending_any_sheet(poisson, diameter / joint.thickness),
        sink=sink,
        tilt=tilt,
        practice=np.array([row.hole.practice.hole * row.hole.practice.filling for row in rows]),
    )


def local_stress(splice: Splice, joint: Joint, levels: Array) -> LocalStress:
    """Return the hole-edge stress of every location at the load levels.

    Parameters
    ----------
    splice : Splice
    joint : Joint
        Its row loads and bending.
    levels : ndarray, shape (n,)
        Remote gross stress [MPa].
    """
    factors = hole_factors(splice, joint)
    bending = joint.bending(levels)
    parts = peak_parts(
        bypass=joint.bypass_per_stress[:, None] * levels,
        transfer=joint.transfer_per_stress[:, None] * levels,
        bearing=joint.bearing_per_stress[:, None] * levels,
        bending=bending,
        k_bypass=factors.k_bypass[:, None],
        k_pressure=(factors.sink * factors.tilt * concentration.COSINE_BEARING)[:, None],
        k_bend=factors.k_bend[:, None],
    )
    untreated = parts.total
    incoming = joint.bypass_per_stress + joint.transfer_per_stress
    return LocalStress(
        levels=levels,
        parts=parts,
        bending=bending,
        peak={"none": untreated, "practice": untreated * factors.practice[:, None]},
        factors=factors,
        net_per_stress=incoming / (1.0 - factors.width_ratio),
    )

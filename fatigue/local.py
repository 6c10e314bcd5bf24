"""The map S -> stress at the hole edge of every location, by superposition and without credit for the fit."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.hole import concentration, countersink
from fatigue.hole.sheet import Edge, sheet_edge
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
    k_pressure : ndarray
        The part of `k_bearing` that the pin's pressure alone makes, which stays when the load reverses.
    """

    width_ratio: Array
    k_bypass: Array
    k_bearing: Array
    k_bend: Array
    sink: Array
    tilt: Array
    practice: Array
    k_pressure: Array


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
    factors : HoleFactors
    net : ndarray, shape (L, n)
        Net-section stress: incoming load/((W - d) t) [MPa].
    """

    levels: Array
    parts: PeakParts
    bending: Array
    factors: HoleFactors
    net: Array

    @property
    def untreated(self) -> Array:
        """Peak hoop stress with no credit, route `none`, shape (L, n) [MPa]."""
        return self.parts.total

    @property
    def practice(self) -> Array:
        """Peak hoop stress by route `practice`, shape (L, n) [MPa]."""
        return np.asarray(self.parts.total * self.factors.practice[:, None])


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
    edge: Edge = "row" if splice.edge == "row" else "strip"
    around = [sheet_edge(edge, *own) for own in zip(x, end_ratios(splice, joint), poisson, strict=True)]
    pressure = np.array([own.cosine_bearing_factor for own in around])
    pressure = pressure - x / 2 * np.array([own.open_factor for own in around])
    return HoleFactors(
        width_ratio=x,
        k_bypass=sink * k_open,
        k_pressure=sink * tilt * pressure,
        k_bearing=sink * (tilt * pressure + x / 2 * k_open),
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
    loads = joint.loads(levels)
    return LocalStress(
        levels=levels,
        parts=peak_parts(
            bypass=loads.bypass,
            transfer=loads.transfer,
            bearing=loads.bearing,
            bending=bending,
            k_bypass=factors.k_bypass[:, None],
            k_pressure=factors.k_pressure[:, None],
            k_bend=factors.k_bend[:, None],
        ),
        bending=bending,
        factors=factors,
        net=loads.incoming / (1.0 - factors.width_ratio)[:, None],
    )


def end_ratios(splice: Splice, joint: Joint) -> Array:
    """Return end distance over diameter where a sheet ends on its pin's side, infinite elsewhere, shape (L,)."""
    ratios = np.full(joint.row.size, np.inf)
    for i, (r, s) in enumerate(zip(joint.row, joint.sheet, strict=True)):
        sheet = splice.sheets[s]
        before, after = sheet.start == "free" and r == sheet.first_row, sheet.end == "free" and r == sheet.last_row
        if after if joint.incoming_before[i] else before:
            ratios[i] = sheet.edge / splice.rows[r].hole_diameter
    return ratios

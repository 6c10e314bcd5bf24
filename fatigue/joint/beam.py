"""A splice as a beam: the solid sections between its rows and the bending of every location."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.bending import lever_arms, section
from fatigue.splice import Splice

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Beam:
    """The segments of a splice in order along the load, per unit width.

    Parameters
    ----------
    length, neutral_height, stiffness : ndarray, shape (m,)
        [mm], [mm], [N mm].
    sheets : tuple of tuple of int
        Which sheets make up each segment.
    thickness : ndarray, shape (m, sheets)
        0 where a sheet is absent [mm].
    """

    length: Array
    neutral_height: Array
    stiffness: Array
    sheets: tuple[tuple[int, ...], ...]
    thickness: Array


def build_beam(splice: Splice) -> Beam:
    """Cut a splice into its free length, its bays and what lies beyond the last row.

    All sheets of a bay are taken as one solid beam. Heights count from the face of the first-loaded sheet that touches
    the next sheet down (or up, where it is the lowest); a step changes the far face of a sheet.
    """
    sheets, rows = splice.sheets, splice.rows
    bays = range(-1, len(rows))
    far = splice.to_centre if splice.to_centre > 0.0 else splice.free_length
    length = [splice.free_length, *(b.position - a.position for a, b in zip(rows, rows[1:], strict=False)), far]
    thickness = np.zeros((len(length), len(sheets)))
    for i, bay in enumerate(bays):
        for s, sheet in enumerate(sheets):
            inside = sheet.first_row <= bay < sheet.last_row
            coming = bay < sheet.first_row and sheet.start == "loaded"
            going = bay >= sheet.last_row and sheet.end != "free"
            if inside or coming or going:
                thickness[i, s] = sheet.thickness_after(bay)
    nominal = np.where(thickness > 0.0, thickness, [sheet.thickness for sheet in sheets])
    top = -np.cumsum(nominal, axis=1) + nominal
    reference = splice.first_loaded if splice.first_loaded < len(sheets) - 1 else splice.first_loaded - 1
    middle = top - nominal / 2
    middle = middle - (top - nominal)[:, [reference]]
    modulus = np.array([sheet.material.modulus for sheet in sheets])
    neutral, stiffness = section(np.broadcast_to(modulus, thickness.shape), thickness, middle)
    return Beam(
        length=np.array(length, dtype=np.float64),
        neutral_height=neutral,
        stiffness=stiffness,
        sheets=tuple(tuple(np.flatnonzero(t).tolist()) for t in thickness),
        thickness=thickness,
    )


@dataclass(frozen=True, eq=False)
class Curvature:
    """Bending of every location at load levels.

    Parameters
    ----------
    upper : ndarray, shape (L, n)
        Bending stress at the location's upper face, tension positive [MPa].
    segment : ndarray of int, shape (L,)
        The segment whose section was taken: the side of the row where the sheet bends harder.
    """

    upper: Array
    segment: NDArray[np.int64]


def bend(splice: Splice, beam: Beam, levels: Array) -> Curvature:
    """Return the bending stress at the upper face of every location.

    sigma = E (t/2) P u / (E I) of the segment, which is 6 P u / t^2 where the sheet stands alone. In compression the
    arm of a vanishing load is held, so that the stress stays proportional to the load.

    Parameters
    ----------
    splice : Splice
    beam : Beam
    levels : ndarray, shape (n,)
        Remote gross stress of the first-loaded sheet [MPa].
    """
    first = splice.sheets[splice.first_loaded]
    load = levels * first.thickness_after(first.first_row - 1)
    tension = np.maximum(load, 0.0)
    at_start, at_end = lever_arms(
        beam.length,
        beam.stiffness,
        beam.neutral_height,
        np.append(tension, 0.0),
        splice.ends,
        symmetric=splice.to_centre > 0.0,
    )
    upper = np.zeros((len(splice.locations), levels.size))
    segment = np.zeros(len(splice.locations), dtype=np.int64)
    for index, (r, s) in enumerate(splice.locations):
        modulus = splice.sheets[s].material.modulus
        sides = []
        for i, arm in ((r, at_end[:, r]), (r + 1, at_start[:, r + 1])):
            if beam.thickness[i, s] > 0.0:
                per_load = modulus * beam.thickness[i, s] / 2 * arm / beam.stiffness[i]
                sides.append((abs(per_load[-1]), i, per_load[:-1] * load))
        _, segment[index], upper[index] = max(sides, key=lambda side: side[0])
    return Curvature(upper, segment)

"""A joint as a beam: the solid sections between its rows and the bending of every location."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.bending import LIGHTEST, lever_arms, section, station_heights
from fatigue.joint.layout import JointArrays, Layout

Array = NDArray[np.float64]
Indices = NDArray[np.int64]

NEGLIGIBLE = 1e-9
"""Bending below this share of the remote stress is rounding, and belongs to no face."""
USUAL_STRAIN = 1 / 720
"""Remote strain at which faces are found unless a stress is given: 100 MPa in aluminium of 72 000 MPa."""
BLOCK = 256
"""Variants taken at a time, so that the numbers of a block stay in the processor's cache."""


@dataclass(frozen=True, eq=False)
class Beam:
    """The segments of a joint in order along the load, per unit width; leading batch dimensions.

    Parameters
    ----------
    length, neutral_height, stiffness : ndarray, shape (..., m)
        [mm], [mm], [N mm].
    thickness : ndarray, shape (..., m, sheets)
        0 where a sheet is absent [mm].
    middle : ndarray, shape (..., m, sheets)
        Height of each sheet's mid-plane [mm].
    """

    length: Array
    neutral_height: Array
    stiffness: Array
    thickness: Array
    middle: Array


def build_beam(layout: Layout, arrays: JointArrays) -> Beam:
    """Cut a joint into its free length, its bays and what lies beyond the last row.

    All sheets of a segment are taken as one solid beam. Heights count from the face of the loaded sheet that touches
    its neighbour, and a step changes its far face; a loaded sheet between two others is stepped on both faces, and
    heights count from its mid-plane. Sheets further out follow, and a sheet that ends leaves its place empty.
    """
    middle = mid_planes(layout, arrays.thickness)
    thickness = np.where(layout.extent, arrays.thickness, 0.0)
    neutral, stiffness = section(arrays.modulus[..., None, :], thickness, middle)
    return Beam(arrays.length, neutral, stiffness, thickness, middle)


def mid_planes(layout: Layout, thickness: Array) -> Array:
    """Return the height of every sheet's mid-plane, counted as in `build_beam`.

    Parameters
    ----------
    layout : Layout
    thickness : ndarray, shape (..., sheets)
        Of the whole stack, absent sheets too [mm].

    Returns
    -------
    ndarray, shape (..., sheets)
        [mm]
    """
    top = thickness - np.cumsum(thickness, axis=-1)
    middle = top - thickness / 2
    s = layout.loaded
    if s == 0:
        zero = top[..., [0]] - thickness[..., [0]]
    elif s == layout.sheets - 1:
        zero = top[..., [s]]
    else:
        zero = middle[..., [s]]
    return np.asarray(middle - zero)


@dataclass(frozen=True, eq=False)
class Bender:
    """How each location bends: which side of its row, by what share, and towards which face.

    Parameters
    ----------
    beam : Beam
    load_per_stress : ndarray, shape (...)
        Thickness of the loaded sheet far from the splice [mm].
    before, after : ndarray, shape (..., L)
        Stress at the upper face per load times arm in the segment before and after the row, 0 on the side that bends
        less [1/mm^2].
    upper : ndarray, shape (..., L)
        Stress at the upper face over S, at the stress where the sides were compared.
    """

    beam: Beam
    load_per_stress: Array
    before: Array
    after: Array
    upper: Array


def build_bender(layout: Layout, arrays: JointArrays, stress: float | None = None) -> Bender:
    """Find the side of its row on which each location bends harder, and towards which face.

    sigma = E (t/2) P u/(E I) of the segment, which is 6 P u/t^2 where the sheet stands alone.

    Parameters
    ----------
    layout : Layout
    arrays : JointArrays
    stress : float, optional
        Remote gross stress at which the sides are compared; `USUAL_STRAIN` times the loaded sheet's modulus if not
        given [MPa]. Not a vanishing one: the sheet of a one-strap joint bends before its outer row only as it is
        pulled straight.
    """
    beam = build_beam(layout, arrays)
    batch = arrays.batch()
    length, stiffness, neutral = (
        np.moveaxis(np.broadcast_to(v, (*batch, layout.rows + 1)), -1, 0)
        for v in (beam.length, beam.stiffness, beam.neutral_height)
    )
    first = np.broadcast_to(arrays.first_thickness(layout), batch)
    usual = USUAL_STRAIN * arrays.modulus[..., layout.loaded] if stress is None else stress
    start, end = lever_arms(length, stiffness, neutral, usual * first, layout.ends, layout.symmetric)
    row, sheet = layout.row, layout.sheet
    modulus = np.broadcast_to(arrays.modulus, (*batch, layout.sheets))[..., sheet]
    thickness = np.broadcast_to(beam.thickness, (*batch, layout.rows + 1, layout.sheets))
    stiff = np.broadcast_to(beam.stiffness, (*batch, layout.rows + 1))
    per_arm = [modulus * thickness[..., row + side, sheet] / (2 * stiff[..., row + side]) for side in (0, 1)]
    sides = [per_arm[0] * np.moveaxis(end, 0, -1)[..., row], per_arm[1] * np.moveaxis(start, 0, -1)[..., row + 1]]
    harder = np.abs(sides[0]) >= np.abs(sides[1]) * (1 - 1e-12)
    return Bender(
        beam=beam,
        load_per_stress=first,
        before=np.where(harder, per_arm[0], 0.0),
        after=np.where(harder, 0.0, per_arm[1]),
        upper=np.where(harder, *sides) * first[..., None],
    )


def bending_stress(layout: Layout, bender: Bender, levels: Array) -> Array:
    """Return the bending stress of every location at its face, tension positive.

    In compression the arm of a vanishing load is held, so that the stress stays proportional to the load.

    Parameters
    ----------
    layout : Layout
    bender : Bender
    levels : ndarray, shape (n,)
        Remote gross stress [MPa].

    Returns
    -------
    ndarray, shape (..., L, n)
        [MPa]; another load than the one the face was found at may turn its sign.
    """
    batch = bender.load_per_stress.shape
    flat = int(np.prod(batch))
    locations, n = layout.row.size, levels.size
    out = np.zeros((flat, locations, n))
    if not layout.bends:
        return out.reshape(*batch, locations, n)
    sign = face_sign(bender.upper)
    before, after = ((side * sign).reshape(flat, locations) for side in (bender.before, bender.after))
    first = bender.load_per_stress.reshape(flat)
    segments = [
        np.ascontiguousarray(np.broadcast_to(v, (*batch, layout.rows + 1)).reshape(flat, -1).T)
        for v in (bender.beam.length, bender.beam.stiffness, bender.beam.neutral_height)
    ]
    for begin in range(0, flat, BLOCK):
        block = slice(begin, begin + BLOCK)
        sections = tuple(v[:, block] for v in segments)
        _bend_block(layout, sections, first[block], (before[block], after[block]), levels, out[block])
    return out.reshape(*batch, locations, n)


def face_sign(upper: Array) -> Array:
    """Return 1 where the upper face is in bending tension, -1 where the lower one is, 0 where there is no bending."""
    return np.where(np.abs(upper) < NEGLIGIBLE, 0.0, np.sign(upper))


def _bend_block(
    layout: Layout,
    sections: tuple[Array, ...],
    first: Array,
    sides: tuple[Array, Array],
    levels: Array,
    out: Array,
) -> None:
    """Write the stresses of a block of v variants: sections (m, v), sides (v, L), levels (n,), out (v, L, n)."""
    length, stiffness, neutral = sections
    before, after = sides
    load = first[:, None] * levels
    limit = LIGHTEST["pinned" if layout.symmetric else layout.ends]
    lightest = limit**2 * (stiffness / length**2).min(axis=0)
    root_load = np.maximum(load, lightest[:, None])
    np.sqrt(root_load, out=root_load)
    z = neutral[..., None]
    clamped = layout.ends == "clamped"
    stations = station_heights(
        length[..., None], np.sqrt(1 / stiffness)[..., None], z, root_load, clamped, layout.symmetric
    )
    # load (w - z) per arm, of the side that counts
    slope = before + after
    offset = before * z[layout.row, :, 0].T + after * z[layout.row + 1, :, 0].T
    own = np.empty_like(load)
    for i, r in enumerate(layout.row.tolist()):
        np.multiply(stations[r + 1], slope[:, i, None], out=own)
        own -= offset[:, i, None]
        np.multiply(own, load, out=out[:, i])

"""Row loads: sheets as chains of axial springs, shear planes as springs between neighbouring sheets.

Nodes are numbered row by row and sheet by sheet, so that every spring joins nodes at most one row's sheets apart: a
symmetric band, eliminated for all variants at once.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.interfaces import fastener_flexibility, plane_stiffness
from fatigue.joint.layout import JointArrays, Layout

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class RowLoads:
    """Loads of a joint over its remote load P = S W t, with leading batch dimensions.

    Parameters
    ----------
    flexibility : ndarray, shape (..., I)
        Per total fastener load [mm/N].
    shear : ndarray, shape (..., I)
        Load of each shear plane over the common width, positive when it pulls the upper sheet along.
    segment : ndarray, shape (..., R + 1, s)
        Load of every sheet in every segment, tension positive.
    residual : ndarray, shape (...)
        Largest difference between a segment's load from the fasteners before it and from its own stretch.
    free_body : ndarray, shape (...)
        Largest difference from P of what the sheets of one cut carry together by their stretch.
    """

    flexibility: Array
    shear: Array
    segment: Array
    residual: Array
    free_body: Array


def row_loads(layout: Layout, arrays: JointArrays) -> RowLoads:
    """Solve the spring chain of a joint for a unit remote load.

    Parameters
    ----------
    layout : Layout
    arrays : JointArrays

    Returns
    -------
    RowLoads

    References
    ----------
    Key ``spring-chain``.
    """
    flexibility = fastener_flexibility(layout, arrays)
    planes = plane_stiffness(layout, arrays, flexibility)
    bays = bay_stiffness(layout, arrays)
    batch = np.broadcast_shapes(planes.shape[:-1], bays.shape[:-2])
    nodes = displacements(layout, bays, planes, unit_load(layout, batch))
    shear = planes * slip(layout, nodes)
    segment, residual, free_body = check(layout, bays, nodes, shear)
    return RowLoads(flexibility, shear, segment, residual, free_body)


def bay_stiffness(layout: Layout, arrays: JointArrays) -> Array:
    """Return E t W/length of every segment that can stretch, 0 of the others, shape (..., R + 1, s) [N/mm].

    What lies before the first row, and after the last where a lap goes out, only passes the load on.
    """
    stretches = layout.extent.copy()
    stretches[0] = False
    if not layout.symmetric:
        stretches[-1] = False
    per_length = (arrays.width[..., None] / arrays.length)[..., None]
    return np.where(stretches, arrays.modulus[..., None, :] * arrays.thickness * per_length, 0.0)


def unit_load(layout: Layout, batch: tuple[int, ...]) -> Array:
    """Return the force on every node for a unit remote load, against the direction of the rows, shape (..., R, s)."""
    load = np.zeros((*batch, layout.rows, layout.sheets))
    load[..., 0, layout.loaded] = -1.0
    return load


def slip(layout: Layout, nodes: Array) -> Array:
    """Return how far the lower sheet moved past the upper one at every shear plane, shape (..., I) [mm]."""
    row = layout.interface_row
    return np.asarray(nodes[..., row, layout.lower] - nodes[..., row, layout.upper])


def displacements(layout: Layout, bays: Array, planes: Array, load: Array) -> Array:
    """Return the displacement of every node under given forces.

    Parameters
    ----------
    layout : Layout
    bays : ndarray, shape (..., R + 1, s)
        Stiffnesses of the segments [N/mm].
    planes : ndarray, shape (..., I)
        Of the shear planes [N/mm].
    load : ndarray, shape (..., R, s)
        [N]

    Returns
    -------
    ndarray, shape (..., R, s)
        [mm]; 0 where there is no node.
    """
    rows, sheets = layout.rows, layout.sheets
    real = layout.extent[:-1] | layout.extent[1:] | layout.holes
    for s in layout.out:
        real[-1, s] = False
    real = real.ravel()
    batch = np.broadcast_shapes(bays.shape[:-2], planes.shape[:-1], load.shape[:-2])
    # the band first, the batch last: every elementary step runs over a contiguous batch
    band = np.zeros((sheets + 1, rows * sheets, *batch))
    springs: list[tuple[int, int | None, Array]] = []
    if layout.symmetric:
        grounded = np.flatnonzero(layout.extent[-1]).tolist()
        springs += [((rows - 1) * sheets + s, None, bays[..., rows, s]) for s in grounded]
    for r in range(1, rows):
        for s in np.flatnonzero(layout.extent[r]).tolist():
            springs.append(((r - 1) * sheets + s, r * sheets + s, bays[..., r, s]))
    for i, r in enumerate(layout.interface_row.tolist()):
        springs.append((r * sheets + int(layout.upper[i]), r * sheets + int(layout.lower[i]), planes[..., i]))
    for a, b, stiffness in springs:
        for node in (a, b):
            if node is not None and real[node]:
                band[0, node] += stiffness
        if b is not None and real[a] and real[b]:
            band[b - a, a] -= stiffness
    band[0, ~real] = 1.0
    right = np.zeros((rows * sheets, *batch))
    right[:] = np.moveaxis(load.reshape(*load.shape[:-2], rows * sheets), -1, 0)
    right[~real] = 0.0
    solved = solve_band(band, right)
    return np.moveaxis(solved, 0, -1).reshape(*batch, rows, sheets)


def solve_band(band: Array, right: Array) -> Array:
    """Solve symmetric positive definite band systems in place of their arguments, for a whole batch at once.

    Parameters
    ----------
    band : ndarray, shape (w + 1, N, ...)
        Entry (k, j) couples unknowns j and j + k.
    right : ndarray, shape (N, ...)

    Returns
    -------
    ndarray, shape (N, ...)
        `right`, now the solution.

    Raises
    ------
    ValueError
        If a pivot is not positive: some node is held by nothing.
    """
    width, count = band.shape[0] - 1, band.shape[1]
    if not (band[0] > 0.0).all():
        raise ValueError("some sheet of the joint is held by nothing")
    scale = band[0].copy()
    for j in range(count):
        reach = min(width, count - 1 - j)
        pivot = band[0, j]
        if not (pivot > 1e-14 * scale[j]).all():
            raise ValueError("some sheet of the joint is held by nothing")
        for a in range(1, reach + 1):
            coupling = band[a, j]
            if not coupling.any():
                continue
            factor = coupling / pivot
            for b in range(a, reach + 1):
                band[b - a, j + a] -= factor * band[b, j]
            right[j + a] -= factor * right[j]
            band[a, j] = factor
        # the row's own couplings are kept as factors for the way back
        right[j] /= pivot
    for j in range(count - 2, -1, -1):
        for a in range(1, min(width, count - 1 - j) + 1):
            right[j] -= band[a, j] * right[j + a]
    return right


def segment_loads(layout: Layout, shear: Array, remote: float | Array = 1.0) -> Array:
    """Return every sheet's load in every segment by equilibrium, fastener after fastener.

    Parameters
    ----------
    layout : Layout
    shear : ndarray, shape (..., I)
        Of every shear plane over the common width [N].
    remote : float or ndarray, shape (...)
        Remote load [N].

    Returns
    -------
    ndarray, shape (..., R + 1, s)
        [N]; not masked, so that what is left where a sheet has ended shows the error.
    """
    gained = np.zeros((*shear.shape[:-1], layout.rows + 1, layout.sheets))
    gained[..., 0, layout.loaded] = remote
    for i, r in enumerate(layout.interface_row.tolist()):
        gained[..., r + 1, layout.upper[i]] -= shear[..., i]
        gained[..., r + 1, layout.lower[i]] += shear[..., i]
    return np.cumsum(gained, axis=-2)


def check(layout: Layout, bays: Array, nodes: Array, shear: Array) -> tuple[Array, Array, Array]:
    """Return every segment's load by equilibrium, and how far the sheets' stretch departs from it.

    Parameters
    ----------
    layout : Layout
    bays : ndarray, shape (..., R + 1, s)
        [N/mm]
    nodes : ndarray, shape (..., R, s)
        [mm]
    shear : ndarray, shape (..., I)
        Over the remote load.

    Returns
    -------
    segment : ndarray, shape (..., R + 1, s)
    residual, free_body : ndarray, shape (...)
        Of nodes, and of whole cuts.
    """
    segment = segment_loads(layout, shear)
    stretch = np.zeros_like(segment)
    stretch[..., 1:-1, :] = bays[..., 1:-1, :] * np.diff(nodes, axis=-2)
    stretch[..., 0, :] = segment[..., 0, :]
    if layout.symmetric:
        stretch[..., -1, :] = -bays[..., -1, :] * nodes[..., -1, :]
    else:
        stretch[..., -1, list(layout.out)] = segment[..., -1, list(layout.out)]
    residual = np.abs(segment - stretch).max(axis=(-2, -1))
    free_body = np.abs(stretch.sum(axis=-1) - 1.0).max(axis=-1)
    segment = np.where(layout.extent, segment, 0.0)
    return segment, residual, free_body

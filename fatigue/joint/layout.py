"""A splice taken apart: its layout, which never varies, and its numbers, which may have leading batch dimensions.

The layout says which sheet runs through which segment and which rows join what; segment 0 lies before the first row,
segment i after row i - 1 and the last one beyond the last row. Everything the mechanics compute is a function of a
layout and of arrays, so that ten thousand variants of a joint cost one call.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from fatigue.splice import Splice

Array = NDArray[np.float64]
Indices = NDArray[np.int64]
Mask = NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class Layout:
    """What is joined to what; R rows, s sheets top first, L locations, I interfaces.

    Parameters
    ----------
    holes : ndarray of bool, shape (R, s)
        Whether the sheet has a hole in the row.
    extent : ndarray of bool, shape (R + 1, s)
        Whether the sheet runs through the segment.
    loaded : int
        The sheet the remote load comes in by.
    out : tuple of int
        Sheets that go out at the far end of a lap; empty in a symmetric half.
    symmetric : bool
        The last segment ends at a line of symmetry.
    row, sheet : ndarray of int, shape (L,)
        In the order of `splice.locations`.
    interface_row, upper, lower : ndarray of int, shape (I,)
        A shear plane each: row by row, top first.
    middle_first : ndarray of bool, shape (I,)
        Double shear: whether the middle sheet is the upper one of the two.
    planes : ndarray of int, shape (I,)
        2 in double shear, else 1.
    riveted : ndarray of bool, shape (R,)
    flexibility, ends : str
        As in the splice.
    bends : bool
        Whether secondary bending is to be computed.
    """

    holes: Mask
    extent: Mask
    loaded: int
    out: tuple[int, ...]
    symmetric: bool
    row: Indices
    sheet: Indices
    interface_row: Indices
    upper: Indices
    lower: Indices
    middle_first: Mask
    planes: Indices
    riveted: Mask
    flexibility: str
    ends: str
    bends: bool

    def __post_init__(self) -> None:
        _lock(self)

    @property
    def rows(self) -> int:
        """Number of rows."""
        return int(self.holes.shape[0])

    @property
    def sheets(self) -> int:
        """Number of sheets."""
        return int(self.holes.shape[1])


@dataclass(frozen=True, eq=False)
class JointArrays:
    """The numbers of a splice; every array may have leading batch dimensions that broadcast together.

    To make variants, put arrays with a leading dimension in place of some: ``replace(arrays, pitch=...)``.

    Parameters
    ----------
    length : ndarray, shape (..., R + 1)
        Of the segments: free length, bays, and what lies beyond the last row [mm].
    thickness : ndarray, shape (..., R + 1, s)
        In every segment; where a sheet is absent, as if it went on [mm].
    modulus : ndarray, shape (..., s)
        Young's modulus [MPa].
    width : ndarray, shape (...)
        Common width W [mm].
    pitch, diameter : ndarray, shape (..., R)
        [mm]
    fastener_modulus, fastener_poisson : ndarray, shape (..., R)
        Young's modulus [MPa]; Poisson's ratio.
    measured : ndarray, shape (..., R)
        Flexibility per total fastener load, NaN where the formula is to be used [mm/N].
    slack : ndarray, shape (..., R)
        Movement before a fastener takes load [mm].
    friction_share : ndarray, shape (..., R)
        Share of the row's load that clamped faces carry.
    """

    length: Array
    thickness: Array
    modulus: Array
    width: Array
    pitch: Array
    diameter: Array
    fastener_modulus: Array
    fastener_poisson: Array
    measured: Array
    slack: Array
    friction_share: Array

    def __post_init__(self) -> None:
        _lock(self)

    @property
    def at_holes(self) -> Array:
        """Thickness at the holes: the thinner of the segments beside the row, shape (..., R, s) [mm]."""
        return np.minimum(self.thickness[..., :-1, :], self.thickness[..., 1:, :])

    def first_thickness(self, layout: Layout) -> Array:
        """Return the thickness that the remote gross stress acts on, shape (...) [mm]."""
        return np.asarray(self.thickness[..., 0, layout.loaded])

    def batch(self) -> tuple[int, ...]:
        """Return the shape all leading dimensions broadcast to."""
        own = (np.shape(getattr(self, f.name)) for f in fields(self))
        trailing = {"thickness": 2, "width": 0}
        cut = (s[: len(s) - trailing.get(f.name, 1)] for f, s in zip(fields(self), own, strict=True))
        return np.broadcast_shapes(*cut)


def _lock(record: Layout | JointArrays) -> None:
    for field in fields(record):
        value = getattr(record, field.name)
        if isinstance(value, np.ndarray):
            value.setflags(write=False)


def layout_of(splice: Splice) -> Layout:
    """Return the layout of a splice.

    Shear planes: a fastener through the loaded sheet and a sheet on either face of it is in double shear there; any
    other pair of neighbours in a stack is joined in single shear, plane by plane.
    """
    rows, sheets = len(splice.rows), splice.sheets
    symmetric = splice.to_centre > 0.0
    holes = np.array([[sheet.spans(r) for sheet in sheets] for r in range(rows)], dtype=np.bool_)
    extent = np.zeros((rows + 1, len(sheets)), dtype=np.bool_)
    for s, sheet in enumerate(sheets):
        first = 0 if sheet.start == "loaded" else sheet.first_row + 1
        last = rows if sheet.end != "free" else sheet.last_row
        extent[first : last + 1, s] = True
    loaded = splice.first_loaded
    interfaces = []
    for r in range(rows):
        stack = np.flatnonzero(holes[r]).tolist()
        inside = loaded in stack[1:-1]
        for upper, lower in pairwise(stack):
            double = inside and loaded in (upper, lower)
            interfaces.append((r, upper, lower, upper == loaded and double, 2 if double else 1))
    columns = np.array(interfaces, dtype=np.int64).reshape(-1, 5).T
    row, sheet_index = np.nonzero(holes)
    return Layout(
        holes=holes,
        extent=extent,
        loaded=loaded,
        out=() if symmetric else tuple(s for s, sheet in enumerate(sheets) if sheet.end != "free"),
        symmetric=symmetric,
        row=row.astype(np.int64),
        sheet=sheet_index.astype(np.int64),
        interface_row=columns[0].copy(),
        upper=columns[1].copy(),
        lower=columns[2].copy(),
        middle_first=columns[3].astype(np.bool_),
        planes=columns[4].copy(),
        riveted=np.array([row.fastener.riveted for row in splice.rows], dtype=np.bool_),
        flexibility=splice.flexibility,
        ends=splice.ends,
        bends=splice.bending != "none",
    )


def arrays_of(splice: Splice) -> JointArrays:
    """Return the numbers of a splice, without batch dimensions."""
    rows, sheets = splice.rows, splice.sheets
    far = splice.to_centre if splice.to_centre > 0.0 else splice.free_length
    bays = [b.position - a.position for a, b in pairwise(rows)]
    missing = float("nan")
    return JointArrays(
        length=np.array([splice.free_length, *bays, far], dtype=np.float64),
        thickness=np.array(
            [[sheet.thickness_after(r) for sheet in sheets] for r in range(-1, len(rows))], dtype=np.float64
        ),
        modulus=np.array([sheet.material.modulus for sheet in sheets], dtype=np.float64),
        width=np.array(splice.width, dtype=np.float64),
        pitch=np.array([row.pitch for row in rows], dtype=np.float64),
        diameter=np.array([row.hole_diameter for row in rows], dtype=np.float64),
        fastener_modulus=np.array([row.fastener.modulus for row in rows], dtype=np.float64),
        fastener_poisson=np.array([row.fastener.poisson for row in rows], dtype=np.float64),
        measured=np.array([missing if row.flexibility is None else row.flexibility for row in rows], dtype=np.float64),
        slack=np.array([row.slack for row in rows], dtype=np.float64),
        friction_share=np.array([row.friction_share for row in rows], dtype=np.float64),
    )

"""Variants of one splice: every input as a factor on the case's own value, or as points added to its fit."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.joint.interfaces import fastener_flexibility
from fatigue.joint.layout import JointArrays, Layout, arrays_of, layout_of
from fatigue.splice import Row, Sheet, Splice

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Variation:
    """n variants of a splice with R rows and s sheets.

    The distance from the last hole to a sheet's end stays the same number of hole diameters.

    Parameters
    ----------
    thickness : ndarray, shape (n, s)
        Factor on every sheet's thickness, steps included.
    hole : ndarray, shape (n, R)
        Factor on the hole diameter of each row.
    flexibility : ndarray, shape (n, R)
        Factor on the fasteners' flexibility.
    fit : ndarray, shape (n, R)
        Added to the fit [percent of the hole].
    pitch, row_spacing, free_length, load : ndarray, shape (n,)
        Factors on the pitch, the distances between rows, the free length and the remote stress.
    """

    thickness: Array
    hole: Array
    flexibility: Array
    fit: Array
    pitch: Array
    row_spacing: Array
    free_length: Array
    load: Array

    def __len__(self) -> int:
        return int(self.load.size)

    def part(self, which: slice | NDArray[np.int64]) -> Variation:
        """Return some of the variants."""
        return Variation(**{name: values[which] for name, values in vars(self).items()})


def variation(splice: Splice, count: int, **given: ArrayLike) -> Variation:
    """Return variants with the inputs given, each of shape (n,) or as in `Variation`; the others stay as they are.

    Examples
    --------
    >>> import fatigue
    >>> splice = fatigue.read_case(fatigue.demo_case()).splice
    >>> variation(splice, 3, pitch=[0.9, 1.0, 1.1]).thickness.shape
    (3, 2)
    """
    wide = {
        "thickness": len(splice.sheets),
        "hole": len(splice.rows),
        "flexibility": len(splice.rows),
        "fit": len(splice.rows),
    }
    if unknown := set(given) - set(Variation.__dataclass_fields__):
        raise ValueError(f"unknown inputs {sorted(unknown)}")
    made = {}
    for name in Variation.__dataclass_fields__:
        value = np.asarray(given.get(name, 0.0 if name == "fit" else 1.0), dtype=np.float64)
        if name in wide:
            if value.ndim == 1:
                value = value[:, None]
            made[name] = np.broadcast_to(value, (count, wide[name]))
        else:
            made[name] = np.broadcast_to(value, (count,))
    return Variation(**made)


def varied_arrays(splice: Splice, variants: Variation) -> tuple[Layout, JointArrays]:
    """Return the layout and the joint's numbers with the variants as leading dimension."""
    layout, base = layout_of(splice), arrays_of(splice)
    many = len(variants)
    length = np.tile(base.length, (many, 1))
    length[:, 0] *= variants.free_length
    length[:, 1:-1] *= variants.row_spacing[:, None]
    if not layout.symmetric:
        length[:, -1] *= variants.free_length
    arrays = replace(
        base,
        length=length,
        thickness=base.thickness * variants.thickness[:, None, :],
        width=base.width * variants.pitch,
        pitch=base.pitch * variants.pitch[:, None],
        diameter=base.diameter * variants.hole,
    )
    if np.all(variants.flexibility == 1.0):
        return layout, arrays
    planes = np.broadcast_to(fastener_flexibility(layout, arrays), (many, layout.upper.size))
    mean = np.stack([planes[:, layout.interface_row == r].mean(axis=1) for r in range(layout.rows)], axis=1)
    return layout, replace(arrays, measured=mean * variants.flexibility)


def varied_splice(splice: Splice, variants: Variation, index: int) -> Splice:
    """Return one variant as a splice; the load's factor is for the caller to apply."""
    one = variants.part(slice(index, index + 1))
    _, arrays = varied_arrays(splice, one)
    measured = np.broadcast_to(arrays.measured, (1, len(splice.rows)))[0]

    def row(r: int, own: Row) -> Row:
        hole = own.hole
        if one.fit[0, r] != 0.0:
            hole = replace(hole, fit_percent=(hole.fit_percent or 0.0) + float(one.fit[0, r]))
        return replace(
            own,
            position=own.position * float(one.row_spacing[0]),
            hole_diameter=own.hole_diameter * float(one.hole[0, r]),
            pitch=own.pitch * float(one.pitch[0]),
            hole=hole,
            flexibility=None if np.isnan(measured[r]) else float(measured[r]),
        )

    def sheet(s: int, own: Sheet) -> Sheet:
        factor = float(one.thickness[0, s])
        at_end = own.last_row if own.end == "free" else own.first_row
        return replace(
            own,
            thickness=own.thickness * factor,
            edge=own.edge * float(one.hole[0, at_end]),
            steps=tuple(replace(step, thickness=step.thickness * factor) for step in own.steps),
        )

    return replace(
        splice,
        sheets=tuple(sheet(s, own) for s, own in enumerate(splice.sheets)),
        rows=tuple(row(r, own) for r, own in enumerate(splice.rows)),
        width=splice.width * float(one.pitch[0]),
        free_length=splice.free_length * float(one.free_length[0]),
    )

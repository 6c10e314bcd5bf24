"""A splice as a network of springs: which node is where, what holds what."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.flexibility import huth_1986, swift_1971, tate_rosenfeld_1946
from fatigue.splice import Row, Sheet, Splice

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Chain:
    """The spring network of a splice for a unit remote load.

    Parameters
    ----------
    incidence : ndarray, shape (m, N)
    stiffness : ndarray, shape (m,)
        [N/mm]
    load : ndarray, shape (N,)
        1 at the node where the load comes in.
    node : dict
        (row, sheet) to node; nodes that are held have none.
    bays : dict
        (row, sheet) to the spring that follows the row in that sheet.
    interfaces : tuple of (row, upper sheet, lower sheet, spring)
        The fasteners' springs, per common width.
    flexibility : ndarray, shape (interfaces,)
        Of one fastener, per total fastener load [mm/N].
    """

    incidence: Array
    stiffness: Array
    load: Array
    node: dict[tuple[int, int], int]
    bays: dict[tuple[int, int], int]
    interfaces: tuple[tuple[int, int, int, int], ...]
    flexibility: Array


def present(splice: Splice, row: int) -> list[int]:
    """Return the sheets that have a hole in a row, top first."""
    return [s for s, sheet in enumerate(splice.sheets) if sheet.spans(row)]


def fastener_flexibility(splice: Splice, row: Row, upper: Sheet, lower: Sheet, index: int, planes: int) -> float:
    """Return the flexibility of one fastener between two neighbouring sheets [mm/N].

    In a stack of three the formula's sheet 1 is the middle one (double shear, the flexibility per *total* load, each
    interface taking its half: twice as flexible an interface). Stacks of more are taken interface by interface in
    single shear.
    """
    if row.flexibility is not None:
        return row.flexibility * planes
    t1, t2 = upper.thickness_at(index), lower.thickness_at(index)
    e1, e2 = upper.material.modulus, lower.material.modulus
    fastener = row.fastener
    if splice.flexibility == "huth":
        single = huth_1986(
            t1, t2, row.hole_diameter, e1, e2, fastener.modulus, riveted=fastener.riveted, shear_planes=planes
        )
        return single * planes
    if splice.flexibility == "swift":
        return swift_1971(t1, t2, row.hole_diameter, e1, e2, fastener.modulus)
    return tate_rosenfeld_1946(t1, t2, row.hole_diameter, e1, e2, fastener.modulus, fastener.poisson)


def in_double_shear(splice: Splice, row: int) -> bool:
    """Tell whether the row's fasteners load the middle one of three sheets from both sides."""
    stack = present(splice, row)
    return len(stack) == 3 and stack[1] == splice.first_loaded


def build_chain(splice: Splice) -> Chain:
    """Assemble the spring network of a splice."""
    rows, sheets, width = splice.rows, splice.sheets, splice.width
    held = {
        (sheet.last_row, s) for s, sheet in enumerate(sheets) if sheet.end != "free" and splice.to_centre <= 0.0
    }
    node: dict[tuple[int, int], int] = {}
    for place in splice.locations:
        if place not in held:
            node[place] = len(node)
    springs: list[tuple[int | None, int | None, float]] = []
    bays: dict[tuple[int, int], int] = {}
    for s, sheet in enumerate(sheets):
        for r in range(sheet.first_row, sheet.last_row):
            length = rows[r + 1].position - rows[r].position
            bays[r, s] = len(springs)
            stiffness = sheet.material.modulus * sheet.thickness_after(r) * width / length
            springs.append((node.get((r, s)), node.get((r + 1, s)), stiffness))
        if sheet.end != "free" and splice.to_centre > 0.0:
            r = sheet.last_row
            bays[r, s] = len(springs)
            stiffness = sheet.material.modulus * sheet.thickness_after(r) * width / splice.to_centre
            springs.append((node[r, s], None, stiffness))
    interfaces = []
    flexibility = []
    for r, row in enumerate(rows):
        stack = present(splice, r)
        planes = 2 if in_double_shear(splice, r) else 1
        for upper, lower in zip(stack, stack[1:], strict=False):
            middle_first = planes == 2 and lower == stack[1]
            first, second = (sheets[lower], sheets[upper]) if middle_first else (sheets[upper], sheets[lower])
            one = fastener_flexibility(splice, row, first, second, r, planes)
            interfaces.append((r, upper, lower, len(springs)))
            flexibility.append(one / planes)
            springs.append((node.get((r, upper)), node.get((r, lower)), width / row.pitch / one))
    incidence = np.zeros((len(springs), len(node)))
    for i, (start, end, _) in enumerate(springs):
        if start is not None:
            incidence[i, start] = -1.0
        if end is not None:
            incidence[i, end] = 1.0
    load = np.zeros(len(node))
    first_loaded = splice.first_loaded
    load[node[sheets[first_loaded].first_row, first_loaded]] = 1.0
    # forces are positive in tension: a load along the chain stretches the springs that hold it back
    return Chain(
        incidence=incidence,
        stiffness=np.array([k for *_, k in springs]),
        load=-load,
        node=node,
        bays=bays,
        interfaces=tuple(interfaces),
        flexibility=np.array(flexibility),
    )

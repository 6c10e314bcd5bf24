"""The flexibility of every shear plane of a joint, by its formula or as measured."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.flexibility import (
    FORMULAS,
    SINGLE_SHEAR_ONLY,
    huth_1986,
    swift_1971,
    tate_rosenfeld_1946,
    tate_rosenfeld_1946_double,
)
from fatigue.joint.layout import JointArrays, Layout

Array = NDArray[np.float64]


def fastener_flexibility(layout: Layout, arrays: JointArrays) -> Array:
    """Return the flexibility of one fastener at every shear plane, per total fastener load.

    In double shear the two planes of a fastener have a value each, of its middle sheet with the outer one on that
    side; where the outer ones are equal it is the formula's own. In a stack of single shear planes each plane has the
    formula's value for its two sheets. A measured value holds for every plane of its row.

    Parameters
    ----------
    layout : Layout
    arrays : JointArrays

    Returns
    -------
    ndarray, shape (..., I)
        [mm/N]

    Raises
    ------
    ValueError
        If the formula is unknown, or has no double-shear form and a row without a measured value needs it.
    """
    if layout.flexibility not in FORMULAS:
        raise ValueError(f"unknown flexibility formula {layout.flexibility!r}")
    row, double = layout.interface_row, layout.planes == 2
    measured = np.broadcast_to(arrays.measured, (*arrays.batch(), layout.rows))[..., row]
    if not np.isnan(measured).any():
        return measured
    if layout.flexibility in SINGLE_SHEAR_ONLY and (np.isnan(measured) & double).any():
        raise ValueError(f"{layout.flexibility} is a single-shear formula")
    first = np.where(double & ~layout.middle_first, layout.lower, layout.upper)
    second = np.where(double & ~layout.middle_first, layout.upper, layout.lower)
    thickness = arrays.at_holes
    pair = (
        thickness[..., row, first],
        thickness[..., row, second],
        arrays.diameter[..., row],
        arrays.modulus[..., first],
        arrays.modulus[..., second],
        arrays.fastener_modulus[..., row],
    )
    if layout.flexibility == "huth":
        formula = huth_1986(*pair, riveted=layout.riveted[row], shear_planes=layout.planes)
    elif layout.flexibility == "swift":
        formula = swift_1971(*pair)
    else:
        poisson = arrays.fastener_poisson[..., row]
        formula = tate_rosenfeld_1946(*pair, poisson)
        if double.any():
            formula = np.where(double, tate_rosenfeld_1946_double(*pair, poisson), formula)
    return np.where(np.isnan(measured), formula, measured)


def plane_stiffness(layout: Layout, arrays: JointArrays, flexibility: Array) -> Array:
    """Return the stiffness of every shear plane over the common width, shape (..., I) [N/mm].

    The width carries W/pitch fasteners of a row. In double shear a plane carries half the fastener's load: half as
    stiff as the fastener.
    """
    per_width = arrays.width[..., None] / arrays.pitch[..., layout.interface_row]
    return np.asarray(per_width / (layout.planes * flexibility))

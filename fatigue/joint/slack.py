"""Rows that pick up load late: clearance in the spring chain, followed from one closing gap to the next.

A shear plane whose sheets slip by less than its slack carries nothing; beyond it, its spring works. Between the loads
at which a gap closes or opens the joint is linear, so the whole answer is a polyline over the remote stress and needs
no load steps. It is odd in the load: compression closes the same gaps the other way.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.interfaces import fastener_flexibility, plane_stiffness
from fatigue.joint.layout import JointArrays, Layout
from fatigue.joint.transfer import bay_stiffness, displacements, slip, unit_load

Array = NDArray[np.float64]

LOOSE = 1e-9
"""Share of its stiffness left to an open gap where nothing else would hold the sheets."""


@dataclass(frozen=True, eq=False)
class SlackPath:
    """Shear of every plane against the remote stress, a polyline.

    Parameters
    ----------
    stress : ndarray, shape (k,)
        Remote gross stress of the knots, from 0 [MPa].
    shear : ndarray, shape (k, I)
        Load of each plane over the common width [N].
    rate : ndarray, shape (I,)
        Its increase per stress beyond the last knot [N/MPa].
    closing : ndarray, shape (I,)
        Remote stress at which each plane first carries load, infinite where it never does [MPa].
    """

    stress: Array
    shear: Array
    rate: Array
    closing: Array

    def at(self, levels: Array) -> Array:
        """Return the shear at remote stresses of either sign, shape (n, I) [N]."""
        size = np.abs(np.asarray(levels, dtype=np.float64))
        inside = np.column_stack([np.interp(size, self.stress, own) for own in self.shear.T])
        beyond = np.maximum(size - self.stress[-1], 0.0)[:, None] * self.rate
        return np.asarray(np.sign(levels)[:, None] * (inside + beyond))


def follow_slack(layout: Layout, arrays: JointArrays) -> SlackPath:
    """Follow a joint with clearance from no load to the load beyond which no gap closes or opens any more.

    Parameters
    ----------
    layout : Layout
    arrays : JointArrays
        Of one joint, without batch dimensions.

    Returns
    -------
    SlackPath

    Raises
    ------
    ValueError
        If the states do not settle: more changes than any joint of this size should need.

    References
    ----------
    Key ``slack-chain``.
    """
    flexibility = fastener_flexibility(layout, arrays)
    springs = plane_stiffness(layout, arrays, flexibility)
    bays = bay_stiffness(layout, arrays)
    per_stress = float(arrays.width * arrays.first_thickness(layout))
    pull = unit_load(layout, ()) * per_stress
    gap = arrays.slack[layout.interface_row]
    tight = gap <= 0.0
    floor = 0.0 if held(layout, tight) else LOOSE

    def rates(state: NDArray[np.int64]) -> Array:
        works = np.where(tight | (state != 0), 1.0, floor)
        return slip(layout, displacements(layout, bays, springs * works, pull))

    state = np.zeros(gap.size, dtype=np.int64)
    closing = np.where(tight, 0.0, np.inf)
    slips, stress = np.zeros(gap.size), 0.0
    knots, shears = [0.0], [np.zeros(gap.size)]
    for _ in range(20 * gap.size + 20):
        rate = rates(state)
        # a gap at its limit opens again if the sheets move back, and one that stays open may not move on
        with np.errstate(divide="ignore", invalid="ignore"):
            to_close = np.where(~tight & (state == 0), (gap - slips * np.sign(rate)) / np.abs(rate), np.inf)
            to_open = np.where(~tight & (state != 0) & (rate * state < 0), (slips * state - gap) / np.abs(rate), np.inf)
        step = float(np.minimum(to_close, to_open).min(initial=np.inf))
        works = np.where(tight | (state != 0), springs, 0.0)
        if not np.isfinite(step):
            return SlackPath(np.array(knots), np.array(shears), works * rate, closing)
        step = max(step, 0.0)
        stress += step
        slips = slips + step * rate
        near = 1e-10 * max(step, stress)
        closes, opens = to_close <= step + near, to_open <= step + near
        state = np.where(closes, np.sign(rate).astype(np.int64), np.where(opens, 0, state))
        slips = np.where(closes | opens, np.sign(slips) * gap, slips)
        closing = np.where(closes & np.isinf(closing), stress, closing)
        shear = np.where(tight, springs * slips, np.where(state != 0, springs * (slips - state * gap), 0.0))
        knots.append(stress)
        shears.append(shear)
    raise ValueError("the gaps of the joint do not settle")


def held(layout: Layout, working: NDArray[np.bool_]) -> bool:
    """Tell whether working shear planes alone tie every sheet to the end that takes the load."""
    fixed = set(np.flatnonzero(layout.extent[-1]).tolist()) if layout.symmetric else set(layout.out)
    while True:
        reached = fixed | {
            s
            for u, v in zip(layout.upper[working].tolist(), layout.lower[working].tolist(), strict=True)
            if {u, v} & fixed
            for s in (u, v)
        }
        if reached == fixed:
            return len(fixed) == layout.sheets
        fixed = reached

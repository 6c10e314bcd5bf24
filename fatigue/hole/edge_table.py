"""The solved pin contact as a table, for studies of very many variants of a hole.

The contact is homogeneous of degree one in (bypass p, bearing q, fit f). With N = |p| + |q| + |f|, f a stress,
hoop/N is a function of a point on an octahedron; on each of its faces p, q and f are products of the two coordinates
used here, so that bilinear interpolation is exact wherever hoop is linear in the loads, and only the losses of contact
are blurred. The width ratio d/W is a third coordinate, in which hoop varies slowly.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.hole.edge import pin_in_hole
from fatigue.hole.sheet import Edge

Array = NDArray[np.float64]

TURN_STEPS = (0.01, 0.04)
"""Step of the direction of (bypass, bearing) where variants lie, and where few do."""
FIT_STEPS = (1 / 300, 1 / 50)
"""Step of the fit's share of N, likewise: contact's end moves by about one point of the edge."""
FEW = 5e-4
"""Share of the variants in a cell below which it may be coarse."""
WIDTH_STEP = 0.015
"""Nodes of d/W lie no further apart."""
MARGIN = 1e-9


@dataclass(frozen=True, eq=False)
class EdgeTable:
    """Hoop stress over N at points of one hole's edge.

    Parameters
    ----------
    width_ratio : ndarray, shape (X,)
        Nodes of d/W.
    turn : ndarray, shape (B,)
        Direction of (bypass, bearing): bearing/(|bypass| + |bearing|) where bypass is positive, 2 less that elsewhere.
    share : ndarray, shape (F,)
        Fit's share of N, signed.
    hoop : ndarray, shape (B, F, X, T)
    open_factor, pressure_factor : ndarray, shape (X,)
        Of the sheet's edge at 90 deg: open hole under bypass, cosine pressure with its reaction.
    modulus : float
        Unit of the fit [MPa].
    """

    width_ratio: Array
    turn: Array
    share: Array
    hoop: Array
    open_factor: Array
    pressure_factor: Array
    modulus: float

    def only(self, points: NDArray[np.int64]) -> EdgeTable:
        """Return the table at some of its points of the edge."""
        hoop = np.ascontiguousarray(self.hoop[..., points])
        return EdgeTable(
            self.width_ratio, self.turn, self.share, hoop, self.open_factor, self.pressure_factor, self.modulus
        )

    def look_up(self, bypass: Array, bearing: Array, fit: Array, width_ratio: Array) -> Array:
        """Return hoop stress at loads, shape (..., T), all arguments broadcast together [MPa]."""
        turn, share, size = coordinates(bypass, bearing, fit * self.modulus)
        b, wb = cell(self.turn, turn)
        f, wf = cell(self.share, share)
        x, wx = cell(self.width_ratio, np.broadcast_to(width_ratio, turn.shape))
        widths, shares = self.width_ratio.size, self.share.size
        flat = self.hoop.reshape(-1, self.hoop.shape[-1])
        at = (b * shares + f) * widths + x
        out = np.zeros((*turn.shape, flat.shape[1]))
        for up, along in ((0, (1 - wb) * size), (shares * widths, wb * size)):
            for on, part in ((0, along * (1 - wf)), (widths, along * wf)):
                for over, weight in ((0, part * (1 - wx)), (1, part * wx)):
                    found = np.take(flat, at + (up + on + over), axis=0)
                    found *= weight[..., None]
                    out += found
        return out

    def open_at(self, width_ratio: Array) -> Array:
        """Return the open hole's factor at widths."""
        return np.asarray(np.interp(width_ratio, self.width_ratio, self.open_factor))

    def pressure_at(self, width_ratio: Array) -> Array:
        """Return the factor of the pin's pressure alone at widths."""
        alone = self.pressure_factor - self.width_ratio / 2 * self.open_factor
        return np.asarray(np.interp(width_ratio, self.width_ratio, alone))


def coordinates(bypass: Array, bearing: Array, fit_stress: Array) -> tuple[Array, Array, Array]:
    """Return turn, share and size N of loads.

    Examples
    --------
    >>> turn, share, size = coordinates(np.array([1.0, -1.0]), np.array([1.0, -1.0]), np.array([2.0, 2.0]))
    >>> turn.tolist(), share.tolist(), size.tolist()
    ([0.5, 2.5], [0.5, 0.5], [4.0, 4.0])
    """
    plane = np.abs(bypass) + np.abs(bearing)
    size = plane + np.abs(fit_stress)
    part = bearing / np.where(plane > 0.0, plane, 1.0)
    turn = np.where(bypass >= 0.0, part, 2.0 - part)
    share = fit_stress / np.where(size > 0.0, size, 1.0)
    turn, share, size = np.broadcast_arrays(turn, share, size)
    return turn, share, size


def cell(nodes: Array, value: Array) -> tuple[NDArray[np.int64], Array]:
    """Return the cell a value lies in, clipped to the nodes, and how far into it."""
    if nodes.size == 1:
        raise ValueError("a table needs two nodes")
    at = np.clip(np.searchsorted(nodes, value, side="right") - 1, 0, nodes.size - 2)
    return at, np.clip((value - nodes[at]) / (nodes[at + 1] - nodes[at]), 0.0, 1.0)


def spaced(low: float, high: float, step: float, kinks: tuple[float, ...] = ()) -> Array:
    """Return evenly spaced nodes over a span, with a node on every kink inside it."""
    low, high = low - MARGIN, high + MARGIN
    nodes = np.linspace(low, high, max(2, int(np.ceil((high - low) / step)) + 1))
    return np.unique(np.concatenate([nodes, [k for k in kinks if low < k < high]]))


def crowded(values: Array, steps: tuple[float, float], kinks: tuple[float, ...]) -> Array:
    """Return nodes over the span of some values, close together where many of them lie."""
    fine = spaced(float(values.min()), float(values.max()), steps[0], kinks)
    count, _ = np.histogram(values, fine)
    many = count > FEW * values.size
    wanted = np.zeros(fine.size, dtype=np.bool_)
    wanted[:-1] |= many
    wanted[1:] |= many
    wanted[:: max(1, round(steps[1] / steps[0]))] = True
    wanted[[0, -1]] = True
    wanted |= np.isin(fine, kinks)
    return np.asarray(fine[wanted])


def edge_table(
    edge: Edge,
    width_span: tuple[float, float],
    end_ratio: float,
    modulus: float,
    poisson: float,
    pin_modulus: float,
    pin_poisson: float,
    turns: Array,
    shares: Array,
    theta: Array,
) -> EdgeTable:
    """Solve the contact over a span of loads, fits and widths.

    Parameters
    ----------
    edge, end_ratio, modulus, poisson, pin_modulus, pin_poisson
        As in `fatigue.hole.edge.edge_maps`.
    width_span : tuple of float
    turns, shares : ndarray
        Coordinates of the variants' loads; `look_up` clips to their span.
    theta : ndarray, shape (T,)
        Whole degrees.
    """
    low, high = width_span
    width = spaced(low, high, WIDTH_STEP)
    turn = crowded(turns, TURN_STEPS, (0.0, 1.0, 2.0))
    share = crowded(shares, FIT_STEPS, (0.0,))
    hoop = np.empty((turn.size, share.size, width.size, theta.size))
    open_factor, pressure = np.empty(width.size), np.empty(width.size)
    points = np.rint(theta).astype(np.int64)
    signed = np.where(turn <= 1.0, turn, 2.0 - turn)
    for k, x in enumerate(width):
        hole = pin_in_hole(edge, float(x), end_ratio, modulus, poisson, pin_modulus, pin_poisson)
        open_factor[k] = hole.sheet.open_factor
        pressure[k] = hole.sheet.cosine_bearing_factor
        for j in range(turn.size):
            # from the most fit to the least, so that contact is lost node by node
            rest = 1.0 - np.abs(share[::-1])
            bypass = rest * (1.0 - abs(signed[j])) * (1.0 if turn[j] <= 1.0 else -1.0)
            bearing = rest * signed[j]
            # computed a hundredfold of 1 MPa, which the solver's tolerances are made for
            solved = hole.solve(100 * bypass, 100 * bearing, 100 * share[::-1] / modulus)
            hoop[j, :, k] = solved.hoop[::-1, points] / 100
    return EdgeTable(width, turn, share, hoop, open_factor, pressure, modulus)

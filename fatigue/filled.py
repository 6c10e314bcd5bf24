"""Route `contact` over a whole splice: the hole's making, the pin in it, the loads, what the first block leaves."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.damage import damage_per_cycle
from fatigue.hole.edge import EdgeMaps, edge_maps, uncredited
from fatigue.hole.installed import Installed, installed
from fatigue.hole.relaxation import Settled, settle
from fatigue.hole.ring import Metal
from fatigue.joint import Joint
from fatigue.local import LocalStress, end_ratios
from fatigue.material import library
from fatigue.material.curves import LocationCurves
from fatigue.material.records import Material
from fatigue.splice import Splice
from spectra import Cycles

Array = NDArray[np.float64]

WAYS = ("resisted", "outside")
"""How secondary bending is added: the pin resists the ovalling it causes, or it adds to the solved contact."""
FEW_CYCLES = 1024
"""Up to so many different cycles, each is mapped at every point; more are put on a grid to find the worst point."""
GRID = 48
"""Lines of that grid across the span of stress."""
YIELD_STRAIN, ASSUMED_EXPONENT = 0.002, 0.07
"""Cyclic curve where a material has none of its own: through the 0.2 % yield stress (common practice, no source)."""


@dataclass(frozen=True, eq=False)
class FilledHoles:
    """Edge maps of every location with its hole as made, and with no credit taken.

    Parameters
    ----------
    making : tuple of Installed
        By location.
    theta : ndarray, shape (T,)
        Points of the edge, from the load axis on the pin-load side [deg].
    credited, uncredited : ndarray, shape (L, 2, T, n)
        Hoop stress at the load levels by the two `WAYS`; uncredited: no fit above 0, no residual stress [MPa].
    maps : EdgeMaps
        With the fit, before the residual stress.
    settled : tuple of Settled
        By way: what the first block leaves of the residual stress.
    """

    making: tuple[Installed, ...]
    theta: Array
    credited: Array
    uncredited: Array
    maps: EdgeMaps
    settled: tuple[Settled, Settled]


@dataclass(frozen=True, eq=False)
class Governing:
    """The point of each location's edge that gathers most damage.

    Parameters
    ----------
    way, point : ndarray of int, shape (L,)
        Index in `WAYS` and in theta.
    peak : ndarray, shape (L, n)
        Hoop stress there at the load levels [MPa].
    damage : ndarray, shape (L, 2)
        Largest damage over the edge by way, per flight; on the grid where cycles are many.
    """

    way: NDArray[np.int64]
    point: NDArray[np.int64]
    peak: Array
    damage: Array


def made_holes(splice: Splice) -> tuple[Installed, ...]:
    """Follow the making of every location's hole."""
    found = []
    for r, s in splice.locations:
        row, material = splice.rows[r], splice.sheets[s].material
        hole = row.hole
        found.append(
            installed(
                Metal(material.modulus, material.poisson, material.yield_stress),
                row.fastener.modulus,
                row.fastener.poisson,
                fit=None if hole.fit_percent is None else hole.fit_percent / 100,
                cold_expansion=hole.cold_expansion_percent / 100,
                squeeze_ratio=hole.squeeze_ratio,
                shank_diameter=row.hole_diameter,
                side="driven" if s == splice.driven_sheet(r) else "formed",
            )
        )
    return tuple(found)


def filled_holes(splice: Splice, joint: Joint, local: LocalStress, credited_only: bool = False) -> FilledHoles:
    """Solve the contact of every location's pin at the load levels.

    Parameters
    ----------
    splice : Splice
    joint : Joint
    local : LocalStress
        Its levels span the spectrum.
    credited_only : bool
        Leave `uncredited` at what the fit gives, where nobody asks for it.

    Returns
    -------
    FilledHoles

    References
    ----------
    Keys ``pin-contact``, ``sheet-collocation``, ``initial-stress``.
    """
    making = made_holes(splice)
    places = splice.locations
    materials = [splice.sheets[s].material for _, s in places]
    rows = [splice.rows[r] for r, _ in places]
    loads = joint.loads(local.levels)
    fit = np.array([hole.fit for hole in making])
    factors = local.factors

    def solve(fit: Array, which: NDArray[np.intp]) -> EdgeMaps:
        return edge_maps(
            bypass=loads.bypass[which],
            bearing=loads.bearing[which],
            bend=local.bending[which],
            edge="row" if splice.edge == "row" else "strip",
            width_ratio=factors.width_ratio[which],
            end_ratio=end_ratios(splice, joint)[which],
            modulus=np.array([m.modulus for m in materials])[which],
            poisson=np.array([m.poisson for m in materials])[which],
            pin_modulus=np.array([row.fastener.modulus for row in rows])[which],
            pin_poisson=np.array([row.fastener.poisson for row in rows])[which],
            fit=fit[which],
            k_bend=factors.k_bend[which],
            sink=factors.sink[which],
            tilt=factors.tilt[which],
            friction=np.array([row.hole.friction for row in rows])[which],
        )

    maps = solve(fit, np.arange(len(places)))
    bare = np.stack([maps.resisted, maps.outside], axis=1)
    again = np.flatnonzero(uncredited(fit) != fit)
    if again.size and not credited_only:
        loose = solve(uncredited(fit), again)
        bare[again] = np.stack([loose.resisted, loose.outside], axis=1)
    residual = np.array([hole.residual_hoop for hole in making])
    cyclic = np.array([cyclic_curve(m) for m in materials]).T
    settled = (settle(maps.resisted, residual, *cyclic), settle(maps.outside, residual, *cyclic))
    return FilledHoles(
        making=making,
        theta=maps.theta,
        credited=np.stack([part.hoop for part in settled], axis=1),
        uncredited=bare,
        maps=maps,
        settled=settled,
    )


def cyclic_curve(material: Material) -> tuple[float, float, float]:
    """Return E, K' [MPa] and n' of a material, assumed from its yield stress where it has no constants of its own."""
    if material.strain_life:
        own = library.strain_life(material.strain_life)
        return material.modulus, own.cyclic_strength, own.cyclic_exponent
    return material.modulus, material.yield_stress / YIELD_STRAIN**ASSUMED_EXPONENT, ASSUMED_EXPONENT


def governing_point(hoop: Array, levels: Array, cycles: Cycles, curves: LocationCurves) -> Governing:
    """Find the fixed point of each edge, and the way of bending, with the largest damage.

    Every counted cycle is mapped at every point: the peak moves around the edge with the load, and a cycle between the
    peaks of two points is suffered by neither.

    Parameters
    ----------
    hoop : ndarray, shape (L, 2, T, n)
        [MPa]
    levels : ndarray, shape (n,)
        Remote gross stress, ascending [MPa].
    cycles : Cycles
        Of the remote gross stress.
    curves : LocationCurves
    """
    few = on_grid(cycles)
    places, ways, points, _ = hoop.shape
    if len(few):
        ends = [mapped(hoop, levels, end) for end in (few.low, few.high)]
        life = curves.life(np.minimum(*ends), np.maximum(*ends))
        damage = damage_per_cycle(life, few.count).sum(axis=-1)
    else:
        damage = np.zeros((places, ways, points))
    # where nothing does damage the highest stress says where to look
    tie_break = np.where(damage.any(axis=(1, 2))[:, None, None], damage, hoop.max(axis=3))
    way, point = np.unravel_index(tie_break.reshape(places, -1).argmax(axis=1), (ways, points))
    return Governing(
        way=way.astype(np.int64),
        point=point.astype(np.int64),
        peak=hoop[np.arange(places), way, point],
        damage=damage.max(axis=2),
    )


def mapped(hoop: Array, levels: Array, stress: Array) -> Array:
    """Interpolate maps along their last axis, shape (..., n) at (k,) -> (..., k)."""
    if levels.size < 2:
        return np.repeat(hoop[..., :1], stress.size, axis=-1)
    above = np.clip(np.searchsorted(levels, stress), 1, levels.size - 1)
    share = (stress - levels[above - 1]) / (levels[above] - levels[above - 1])
    return np.asarray(hoop[..., above - 1] * (1 - share) + hoop[..., above] * share)


def on_grid(cycles: Cycles) -> Cycles:
    """Return many cycles as the means of those in each cell of a grid, few ones as they are."""
    if len(cycles) <= FEW_CYCLES:
        return cycles
    bottom, top = cycles.low.min(), cycles.high.max()
    cell = [((end - bottom) / (top - bottom) * (GRID - 1e-9)).astype(np.int64) for end in (cycles.low, cycles.high)]
    _, which = np.unique(cell[0] * GRID + cell[1], return_inverse=True)
    count = np.asarray(np.bincount(which, cycles.count), dtype=np.float64)
    low, high = (np.bincount(which, end * cycles.count) / count for end in (cycles.low, cycles.high))
    return Cycles(low, high, count)

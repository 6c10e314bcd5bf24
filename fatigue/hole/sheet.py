"""How the sheet around a hole answers: opening and hoop stress of its edge under remote load and edge pressure.

Everything is scaled by the hole radius and the sheet's modulus, for a sheet symmetric about the load axis, and written
in cosine harmonics of the angle from the load axis on the pin-load side. In a wide sheet the harmonics do not mix and
the answer is closed form. Neighbours, sides and a free end mix the low ones: the field they throw back at the hole is
found by collocation. The hole's own edge is satisfied exactly, term by term, by the complex stress functions
Phi = sum a_j z^j, Psi = sum b_j z^j with b_(m-2) = (1-m) a_m + a_(-m) - g_m, g the radial traction's harmonics
(Muskhelishvili's method), so that only the outer boundary remains to be met, in least squares.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Complex = NDArray[np.complexfloating]
Edge = Literal["row", "strip", "wide"]

HARMONICS = 21
"""Harmonics of edge pressure that feel the boundary; the reflected field falls as (d/W)^(2n)."""
FAR = 1.5
"""Length of sheet modelled on either side of the hole, in widths: the end effect left at the hole is under 0.1 %."""
ROW_REACH = 5.0
"""Length of sheet whose sideways contraction a row of holes shares, in pitches."""
LARGEST_RATIO = 0.6
"""Largest d/W the collocation was checked for."""
LARGEST_SOLVED = 0.75
"""Largest d/W that is collocated; beyond, its answers are held on net section, which the caller must flag."""
SMALLEST_RATIO = 0.02
"""Below this d/W the sheet is taken as wide."""
NEAR_END = 0.2
"""End distance over width below which the end is so near that its effect is taken from a narrower sheet and added."""


@dataclass(frozen=True, eq=False)
class SheetEdge:
    """Answers of a hole's edge, by cosine harmonics of the angle; lengths in radii, E u for displacements.

    Parameters
    ----------
    opening_remote : ndarray, shape (M,)
        Radial opening per unit bypass stress; the first harmonic is a rigid shift and is left out (0).
    hoop_remote : ndarray, shape (M,)
        Hoop stress per unit bypass stress.
    opening_pressure, hoop_pressure : ndarray, shape (M, N)
        What the boundary adds to the wide sheet's answer to the harmonics of pressure; the first column includes the
        pin's reaction, taken by the sheet behind it.
    poisson : float
    residual : float
        Largest boundary stress left over unit load; 0 for a wide sheet.
    """

    opening_remote: Array
    hoop_remote: Array
    opening_pressure: Array
    hoop_pressure: Array
    poisson: float
    residual: float

    def __post_init__(self) -> None:
        for array in (self.opening_remote, self.hoop_remote, self.opening_pressure, self.hoop_pressure):
            array.setflags(write=False)

    @property
    def open_factor(self) -> float:
        """Concentration factor of the open hole, on gross stress at 90 deg."""
        return float(_at_90(self.hoop_remote))

    @property
    def cosine_bearing_factor(self) -> float:
        """Hoop at 90 deg over bearing stress for cosine pressure on half the edge, reaction included.

        8/pi^2 in a wide sheet.
        """
        n = np.arange(self.hoop_pressure.shape[1])
        pressure = np.zeros(n.size)
        even = n % 2 == 0
        pressure[even] = 8 / np.pi**2 * (-1.0) ** (n[even] // 2) / (1.0 - n[even] ** 2)
        pressure[0] /= 2
        pressure[1] = 2 / np.pi
        return float(8 / np.pi**2 + _at_90(self.hoop_pressure @ pressure))


def _at_90(harmonics: Array) -> float:
    return float(harmonics @ np.cos(np.arange(harmonics.size) * np.pi / 2))


def wide_sheet(poisson: float) -> SheetEdge:
    """Return the closed-form answers of a wide sheet: opening S (1 + 2 cos 2t)/E, hoop S (1 - 2 cos 2t).

    References
    ----------
    Kirsch 1898; key ``kirsch-1898``.

    Examples
    --------
    >>> wide_sheet(0.33).open_factor
    3.0
    """
    zero = np.zeros((HARMONICS, HARMONICS))
    opening, hoop = np.zeros(HARMONICS), np.zeros(HARMONICS)
    opening[[0, 2]], hoop[[0, 2]] = (1.0, 2.0), (1.0, -2.0)
    return SheetEdge(opening, hoop, zero, zero.copy(), poisson, 0.0)


@lru_cache(maxsize=512)
def sheet_edge(edge: Edge, width_ratio: float, end_ratio: float, poisson: float) -> SheetEdge:
    """Return how a hole's edge answers in a strip or in a row of holes across the load, a free end near or far.

    Parameters
    ----------
    edge : str
        ``strip``: free sides; ``row``: equal holes either side, so that the lines midway stay straight and free of
        shear; ``wide``.
    width_ratio : float
        d/W, the pitch for a row. Checked to 0.6; beyond 0.75 held on net section.
    end_ratio : float
        Distance from the hole's centre to the sheet's end on the pin-load side over d; the bypass leaves evenly
        through it. Infinite where no end is near.
    poisson : float

    Returns
    -------
    SheetEdge

    Raises
    ------
    ValueError
        If the hole does not fit between the sides or before the end.

    Notes
    -----
    The sheet is 1.5 widths long on either side with evenly spread stress at its ends. A row contracts sideways as its
    sheet does: freely under the bypass, by the mean of both sides under the pin load, that of the sheet behind where
    a free end is near.

    References
    ----------
    Muskhelishvili 1953, Howland 1930; keys ``muskhelishvili-1953``, ``howland-1930``, ``sheet-collocation``.

    Examples
    --------
    >>> round(sheet_edge("row", 0.2, float("inf"), 0.33).open_factor, 2)
    3.01
    """
    if not 0 <= width_ratio < 1:
        raise ValueError(f"width_ratio must lie from 0 to 1, not {width_ratio}")
    if not end_ratio > 0.5:
        raise ValueError(f"end_ratio must exceed 0.5, not {end_ratio}")
    if edge == "wide" or (width_ratio < SMALLEST_RATIO and np.isinf(end_ratio)):
        return wide_sheet(poisson)
    if width_ratio > LARGEST_SOLVED:
        return _scaled(sheet_edge(edge, LARGEST_SOLVED, end_ratio, poisson), (1 - LARGEST_SOLVED) / (1 - width_ratio))
    if width_ratio * end_ratio < NEAR_END:
        # the end is near and the sides far: what the end adds hardly depends on them
        narrow = NEAR_END / end_ratio
        far, with_end, without = (
            sheet_edge(edge, x, e, poisson)
            for x, e in ((width_ratio, math.inf), (narrow, end_ratio), (narrow, math.inf))
        )
        return _sum_of(far, with_end, without)
    return _Collocation(edge, width_ratio, end_ratio, poisson).solved()


def _scaled(sheet: SheetEdge, factor: float) -> SheetEdge:
    return SheetEdge(
        opening_remote=factor * sheet.opening_remote,
        hoop_remote=factor * sheet.hoop_remote,
        opening_pressure=factor * sheet.opening_pressure,
        hoop_pressure=factor * sheet.hoop_pressure,
        poisson=sheet.poisson,
        residual=factor * sheet.residual,
    )


def _sum_of(far: SheetEdge, with_end: SheetEdge, without: SheetEdge) -> SheetEdge:
    """Add what an end does in a narrower sheet to a sheet without one."""

    def added(name: str) -> Array:
        return np.asarray(getattr(far, name) + getattr(with_end, name) - getattr(without, name))

    return SheetEdge(
        opening_remote=added("opening_remote"),
        hoop_remote=added("hoop_remote"),
        opening_pressure=added("opening_pressure"),
        hoop_pressure=added("hoop_pressure"),
        poisson=far.poisson,
        residual=max(far.residual, with_end.residual),
    )


@dataclass(frozen=True, eq=False)
class _Field:
    """Stresses and sideways displacement (2 mu v) at points, one column per term."""

    along: Array
    across: Array
    shear: Array
    sideways: Array


def _field(z: Complex, slope: float, phi: Complex, Phi: Complex, dPhi: Complex, psi: Complex, Psi: Complex) -> _Field:
    turn = np.conj(z) * dPhi + Psi
    return _Field(
        along=2 * Phi.real - turn.real,
        across=2 * Phi.real + turn.real,
        shear=turn.imag,
        sideways=(slope * phi - z * np.conj(Phi) + psi).imag,
    )


class _Collocation:
    """One sheet: its boundary points, its terms, and the least-squares solution."""

    def __init__(self, edge: Edge, width_ratio: float, end_ratio: float, poisson: float) -> None:
        self.edge, self.poisson = edge, poisson
        self.slope = (3 - poisson) / (1 + poisson)
        self.half_width = 1 / width_ratio
        self.behind = FAR * 2 * self.half_width
        self.ahead = min(2 * end_ratio, self.behind)
        reach = ROW_REACH * 2 * self.half_width
        self.behind_share = reach / (reach + min(2 * end_ratio, reach))
        regular, singular = 64, HARMONICS + 11
        self.powers = np.concatenate([np.arange(regular + 1), -np.arange(2, singular + 1)])
        size = np.hypot(self.behind, self.half_width)
        exponents = np.where(self.powers >= 0, -self.powers, self.powers + 2)
        self.scale = size ** exponents.astype(np.float64)

    def terms(self, z: Complex) -> _Field:
        """Return the fields of the free terms; each leaves the hole's edge free of traction."""
        j = self.powers[None].astype(np.float64)
        z = z[:, None]
        up, down = z ** (j - 1), z ** (-j - 1)
        phi = z ** (j + 1) / (j + 1)
        psi = np.where(j == 1, 0.0, -up) - down / (j + 1)
        field = _field(z, self.slope, phi, z**j, j * up, psi, (1 - j) * up / z + down / z)
        return _Field(*(part * self.scale for part in (field.along, field.across, field.shear, field.sideways)))

    def pressures(self, z: Complex) -> _Field:
        """Return the wide sheet's fields of edge pressure cos(n t), n = 0, 1, ..."""
        n = np.arange(HARMONICS)[None].astype(np.float64)
        z = z[:, None]
        n_safe = np.where(n == 1, 2.0, n)
        Phi = np.where(n == 0, 0.0, -0.5 * z**-n)
        phi = np.where(n == 0, 0.0, -0.5 * z ** (1 - n) / (1 - n_safe))
        Psi = np.where(n == 0, z**-2.0, -n / 2 * z ** (-n - 2))
        psi = np.where(n == 0, -1 / z, n / (2 * (n + 1)) * z ** (-n - 1))
        a, w = -(1 + self.poisson) / 8, z[:, 0]
        b, c = a + 0.5, 2 * a + 0.5
        Phi[:, 1], phi[:, 1] = a / w, a * np.log(w)
        Psi[:, 1], psi[:, 1] = b / w + c / w**3, b * np.log(w) - c / (2 * w**2)
        dPhi = -n * Phi / z
        return _field(z, self.slope, phi, Phi, dPhi, psi, Psi)

    def solved(self) -> SheetEdge:
        """Return the edge's answers."""
        count = 160
        spread = -np.cos(np.pi * (np.arange(count) + 0.5) / count)
        length = self.behind + self.ahead
        side = length / 2 * spread + (self.ahead - self.behind) / 2 + 1j * self.half_width
        up = (1 + spread[::2]) / 2 * self.half_width
        columns = HARMONICS + 1  # the bypass first, then the pressures
        reaction = np.pi / (2 * self.half_width)
        rows: list[Array] = []
        wanted: list[Array] = []

        def meet(term: Array, own: Array, value: Array) -> None:
            rows.append(term)
            target = np.broadcast_to(value, (term.shape[0], columns)).copy()
            target[:, 1:] -= own
            wanted.append(target)

        nothing = np.zeros(columns)
        terms, own = self.terms(side), self.pressures(side)
        if self.edge == "row":
            contraction = nothing.copy()
            contraction[0], contraction[2] = 1.0, reaction * self.behind_share
            contraction *= -self.poisson / (1 + self.poisson)
            meet(terms.sideways / self.half_width, own.sideways / self.half_width, contraction)
        else:
            meet(terms.across, own.across, nothing)
        meet(terms.shear, own.shear, nothing)
        for end, pull in ((-self.behind, reaction), (self.ahead, 0.0)):
            at_end = end + 1j * up
            terms, own = self.terms(at_end), self.pressures(at_end)
            load = nothing.copy()
            load[0], load[2] = 1.0, pull
            meet(terms.along, own.along, load)
            meet(terms.shear, own.shear, nothing)
        system, right = np.vstack(rows), np.vstack(wanted)
        coefficients = np.linalg.lstsq(system, right, rcond=1e-13)[0]
        residual = float(np.abs(system @ coefficients - right)[:, :3].max())
        return self._answers(coefficients * self.scale[:, None], residual)

    def _answers(self, coefficients: Array, residual: float) -> SheetEdge:
        """Turn the terms' coefficients into harmonics of opening and hoop: 4/(j+1) and 4 times those of z^j."""
        order = np.abs(self.powers)
        opening = np.zeros((order.max() + 1, coefficients.shape[1]))
        hoop = np.zeros_like(opening)
        free = order != 1
        np.add.at(opening, order[free], 4 * coefficients[free] / (self.powers[free] + 1.0)[:, None])
        np.add.at(hoop, order, 4 * coefficients)
        keep = HARMONICS
        return SheetEdge(
            opening_remote=opening[:keep, 0].copy(),
            hoop_remote=hoop[:keep, 0].copy(),
            opening_pressure=opening[:keep, 1:].copy(),
            hoop_pressure=hoop[:keep, 1:].copy(),
            poisson=self.poisson,
            residual=residual,
        )

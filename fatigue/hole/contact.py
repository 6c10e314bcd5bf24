"""The pin in its hole: frictionless contact that may separate, solved exactly at evenly spaced points of the edge.

Gap and pressure are complementary: gap >= 0, pressure >= 0, gap x pressure = 0, with

    gap = opening(remote load) + opening(pressure) - fit - U cos(t),    resultant of the pressure = pin load.

`fatigue.hole.complementarity` finds the points in contact.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.hole.complementarity import UnilateralContact
from fatigue.hole.sheet import SheetEdge

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

POINTS = 181
"""Points on the half circle."""


@dataclass(frozen=True, eq=False)
class Grid:
    """Evenly spaced points of the half circle and their cosine transform.

    Parameters
    ----------
    theta : ndarray, shape (P,)
        From the load axis on the pin-load side [rad].
    weight : ndarray, shape (P,)
        1, and 1/2 at both ends.
    cosines : ndarray, shape (P, P)
        cos(n theta), one column per harmonic n.
    by_order, by_square, mean : ndarray, shape (P, P)
        Nodal force -> opening, for harmonics 2n/(n^2-1), 1/(n^2-1) and for n = 0 alone.
    shift : ndarray, shape (P, P)
        The same for n = 1, which only moves the pin.
    """

    theta: Array
    weight: Array
    cosines: Array
    by_order: Array
    by_square: Array
    mean: Array
    shift: Array

    def harmonics(self, force: Array, count: int) -> Array:
        """Return the first harmonics of pressure from nodal forces, shape (..., count)."""
        spread = 2.0 / (self.theta.size - 1) * np.where(np.arange(count) % (self.theta.size - 1) == 0, 0.5, 1.0)
        return np.asarray(force @ self.cosines[:, :count] * spread)


@lru_cache(maxsize=4)
def grid(points: int = POINTS) -> Grid:
    """Return the points of the half circle and the matrices that depend on nothing else."""
    n = np.arange(points, dtype=np.float64)
    theta = np.pi * n / (points - 1)
    weight = np.ones(points)
    weight[[0, -1]] = 0.5
    cosines = np.cos(np.outer(theta, n))
    spread = 2.0 / (points - 1) * np.where(n % (points - 1) == 0, 0.5, 1.0)
    free = n >= 2
    inverse_square = np.where(free, 1.0 / np.where(free, n * n - 1.0, 1.0), 0.0)

    def matrix(factors: Array) -> Array:
        return np.asarray((cosines * (factors * spread)) @ cosines.T)

    return Grid(
        theta=theta,
        weight=weight,
        cosines=cosines,
        by_order=matrix(2 * n * inverse_square),
        by_square=matrix(inverse_square),
        mean=matrix((n == 0).astype(np.float64)),
        shift=matrix((n == 1).astype(np.float64)),
    )


@dataclass(frozen=True, eq=False)
class Contact:
    """Contact at a number of loads, shape (n, P) or (n,).

    Parameters
    ----------
    theta : ndarray, shape (P,)
        From the load axis on the pin-load side [rad].
    pressure : ndarray
        [MPa]
    gap : ndarray
        Over the hole radius.
    shift : ndarray
        The pin's movement along the load over the hole radius.
    hoop : ndarray
        [MPa]
    """

    theta: Array
    pressure: Array
    gap: Array
    shift: Array
    hoop: Array

    @property
    def closed(self) -> Mask:
        """Points in contact."""
        return np.asarray(self.pressure > 0)


@dataclass(frozen=True)
class Pin:
    """An elastic pin.

    Parameters
    ----------
    modulus : float
        [MPa]
    poisson : float
    """

    modulus: float
    poisson: float


class PinInHole:
    """A pin in the hole of a sheet, ready to be loaded.

    Parameters
    ----------
    sheet : SheetEdge
        The answers of the hole's edge.
    modulus : float
        The sheet's [MPa].
    pin : Pin
    points : int
        On the half circle.

    Examples
    --------
    >>> from fatigue.hole.sheet import wide_sheet
    >>> hole = PinInHole(wide_sheet(0.33), 72e3, Pin(72e3, 0.33))
    >>> round(float(hole.solve(bypass=0.0, bearing=0.0, fit=0.005).pressure[0, 90]), 2)
    180.0
    """

    def __init__(self, sheet: SheetEdge, modulus: float, pin: Pin, points: int = POINTS) -> None:
        self.sheet, self.modulus, self.pin, self.points = sheet, modulus, pin, points
        self.grid = grid(points)

    @cached_property
    def compliance(self) -> Array:
        """Gap per nodal force, shape (P, P), symmetric [1/MPa]."""
        g, sheet, pin = self.grid, self.sheet, self.pin
        e, ep, nu, nup = self.modulus, pin.modulus, sheet.poisson, pin.poisson
        wide = (
            (1 / e + 1 / ep) * (g.by_order + g.shift)
            + ((1 - nu) / e - (1 - nup) / ep) * g.by_square
            + ((1 + nu) / e + (1 - nup) / ep) * g.mean
        )
        low = sheet.opening_pressure.shape[1]
        own = np.array(sheet.opening_pressure)
        own[:, 1] = 0.0  # the resultant's share is a given load
        own[1, :] = 0.0  # and the first harmonic of opening moves the pin
        own[:, 0] /= 2
        own *= 2.0 / (self.points - 1) / e
        cosines = g.cosines[:, :low]
        return np.asarray(wide + cosines @ ((own + own.T) / 2) @ cosines.T)

    @cached_property
    def loads(self) -> Array:
        """Gap per bypass stress, per first harmonic of pressure, per fit, shape (P, 3)."""
        low = self.sheet.opening_pressure.shape[1]
        cosines = self.grid.cosines[:, :low]
        return np.column_stack(
            [
                cosines @ self.sheet.opening_remote / self.modulus,
                cosines @ self.sheet.opening_pressure[:, 1] / self.modulus,
                -np.ones(self.points),
            ]
        )

    @cached_property
    def problem(self) -> UnilateralContact:
        """The contact of the pin, which is free along the load axis."""
        resultant = np.array([0.0, (self.points - 1) / 2, 0.0])
        return UnilateralContact(self.compliance, self.grid.cosines[:, 1], self.loads, resultant)

    def solve(self, bypass: ArrayLike, bearing: ArrayLike, fit: ArrayLike) -> Contact:
        """Solve the contact at one or many loads, each near the one before it.

        Parameters
        ----------
        bypass : array_like, shape (n,)
            Stress on the gross section that passes the hole by [MPa].
        bearing : array_like, shape (n,)
            F/(d t), positive where the pin pushes towards theta = 0 [MPa].
        fit : array_like, shape (n,)
            Interference over the diameter; negative is clearance.

        Returns
        -------
        Contact
        """
        load = np.stack(np.broadcast_arrays(*np.atleast_1d(*map(np.asarray, (bypass, bearing, fit)))), axis=-1).astype(
            np.float64
        )
        load[:, 1] *= 2 / np.pi
        loose = ~load[:, :2].any(axis=1) & (load[:, 2] <= 0)
        force, gap, shift = np.zeros((len(load), self.points)), np.zeros((len(load), self.points)), np.zeros(len(load))
        gap[loose] = -load[loose, 2:]
        held = load[~loose]
        size = np.abs(held[:, :2]).sum(axis=1) + np.abs(held[:, 2]) * self.problem.stiffness
        force[~loose], gap[~loose], shift[~loose] = self.problem.follow(held, size)
        return self._contact(load, force, gap, shift)

    def _contact(self, load: Array, force: Array, gap: Array, shift: Array) -> Contact:
        sheet, g = self.sheet, self.grid
        low = sheet.hoop_pressure.shape[1]
        pressure = force / g.weight
        harmonics = g.harmonics(force, low)
        harmonics[:, 1] = load[:, 1]
        smooth = harmonics @ sheet.hoop_pressure.T
        smooth += np.outer(load[:, 0], sheet.hoop_remote)
        smooth[:, 0] += 2 * harmonics[:, 0]
        smooth[:, 1] += (3 - sheet.poisson) / 2 * load[:, 1]
        hoop = smooth @ g.cosines[:, :low].T - pressure
        return Contact(g.theta, pressure, gap, shift, hoop)

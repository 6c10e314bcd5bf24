"""Gap and force at the points of a contact, one of them nothing at each: solved exactly, loads followed in order.

    gap = C force - U lever + loads,   lever . force + floating U = resultant,   gap >= 0, force >= 0, gap x force = 0

One load is settled by exchanging all points that pull or overlap and solving again; should that go round in circles,
they are exchanged one by one, which ends for any positive definite C (Murty 1974). A row of loads is followed on a
tableau that holds the answer of every point to the loads for the present contacts: a new load then costs a product, and
points that open or close a change of low rank.
"""

from __future__ import annotations

from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy.linalg.blas import dgemm
from scipy.linalg.lapack import dposv

Array = NDArray[np.float64]
Mask = NDArray[np.bool_]

FLOATING = 1e-7
"""Stiffness that centres an unloaded body, over the stiffness of the contact."""
ROUNDING = 1e-9
"""Force and gap below this share of their scale count as nothing."""
SINKING = 3.0
"""How far a force sinks in to begin with, times its share of a point over the stiffness of one: a first guess only."""
PATIENCE = 8
"""Exchanges of many points at once without progress before they are exchanged one by one."""


class UnilateralContact:
    """A contact between a fixed body and one free to move along one line.

    Parameters
    ----------
    compliance : ndarray, shape (P, P)
        Gap per force, symmetric, positive definite.
    lever : ndarray, shape (P,)
        Closing of the gap per movement of the free body.
    loads : ndarray, shape (P, q)
        Gap per load.
    resultant : ndarray, shape (q,)
        Force along the line per load.

    References
    ----------
    Exchange of single points: Murty 1974; key ``murty-1974``.
    """

    def __init__(self, compliance: Array, lever: Array, loads: Array, resultant: Array) -> None:
        self.compliance, self.lever, self.loads, self.resultant = compliance, lever, loads, resultant
        self.points = lever.size
        self.stiffness = 1.0 / float(compliance[0, 0])

    def follow(self, load: Array, size: Array) -> tuple[Array, Array, Array]:
        """Solve a row of loads, each near the one before it.

        Parameters
        ----------
        load : ndarray, shape (n, q)
        size : ndarray, shape (n,)
            What a force at each load is measured by, for rounding.

        Returns
        -------
        force, gap : ndarray, shape (n, P)
        movement : ndarray, shape (n,)
        """
        points, count = self.points, len(load)
        limits = ROUNDING * np.column_stack([size, size / self.stiffness])
        force, gap, movement = np.zeros((count, points)), np.zeros((count, points)), np.zeros(count)
        if not count:
            return force, gap, movement
        closed, force[0], gap[0], movement[0] = self.settle(load[0], limits[0])
        done, ahead = 1, 1
        tableau = self._tableau(closed) if count > 1 else None
        while tableau is not None and done < count:
            near = slice(done, done + ahead)
            answers = load[near] @ tableau[:, points + 1 :].T
            bad = _violated(answers[:, :points], closed, limits[near]).any(axis=1)
            good = int(np.argmax(bad)) if bad.any() else len(answers)
            held = slice(done, done + good)
            force[held] = np.where(closed, np.maximum(answers[:good, :points], 0.0), 0.0)
            gap[held] = np.where(closed, 0.0, np.maximum(answers[:good, :points], 0.0))
            movement[held] = answers[:good, points]
            ahead = 1 if good < len(answers) else 2 * ahead
            done += good
            if good < len(answers):
                self._pivot(load[done], limits[done], closed, tableau)
        return force, gap, movement

    def settle(self, load: Array, limits: Array) -> tuple[Mask, Array, Array, float]:
        """Solve one load from scratch: points closed, forces, gaps, movement."""
        start, pull = self.loads @ load, float(self.resultant @ load)
        closed = self._guess(start, pull)
        search = _Search(self.points)
        while True:
            touching = np.flatnonzero(closed)
            own = self.compliance[:, touching]
            sides = np.column_stack([-start[touching], self.lever[touching]])
            apart, pushed = (dposv(own[touching], sides)[1] if touching.size else sides).T
            share = self.lever[touching]
            movement = (pull - share @ apart) / (share @ pushed + FLOATING * self.stiffness)
            force = np.zeros(self.points)
            force[touching] = apart + movement * pushed
            gap = own @ force[touching] + start - movement * self.lever
            gap[touching] = 0.0
            chosen = search.exchange(_violated(np.where(closed, force, gap), closed, limits))
            if not chosen.size:
                return closed, np.maximum(force, 0.0), np.maximum(gap, 0.0), float(movement)
            closed[chosen] = ~closed[chosen]

    def _guess(self, start: Array, pull: float) -> Mask:
        """Return what may touch: what overlaps with the body moved as its force would move it."""
        if pull:
            side = np.sign(pull) * self.lever
            touch = float((start[side > 0] / side[side > 0]).min())
            start = start - side * (touch + SINKING * abs(pull) / (self.points * self.stiffness))
        return np.asarray(start < 0)

    @cached_property
    def _system(self) -> Array:
        """The whole linear system, last row the equilibrium, then the loads."""
        size, kinds = self.loads.shape
        matrix = np.zeros((size + 1, size + 1 + kinds), order="F")
        matrix[:size, :size] = self.compliance
        matrix[:size, size], matrix[size, :size] = -self.lever, self.lever
        matrix[size, size] = FLOATING * self.stiffness
        matrix[:size, size + 1 :] = self.loads
        matrix[size, size + 1 :] = -self.resultant
        return matrix

    @cached_property
    def _closed_all_round(self) -> Array:
        tableau = self._system.copy(order="F")
        _exchange(tableau, np.arange(self.points + 1))
        return tableau

    def _tableau(self, closed: Mask) -> Array:
        """Return the tableau for a set of contacts; the movement is always solved for."""
        if closed.all():
            return self._closed_all_round.copy(order="F")
        tableau = self._system.copy(order="F")
        _exchange(tableau, np.flatnonzero(np.append(closed, True)))
        return tableau

    def _pivot(self, load: Array, limits: Array, closed: Mask, tableau: Array) -> None:
        """Exchange points on the tableau until none pulls or overlaps; contacts and tableau change in place."""
        size = self.points
        search = _Search(size)
        while True:
            answers = tableau[:size, size + 1 :] @ load
            chosen = search.exchange(_violated(answers, closed, limits))
            if not chosen.size:
                return
            _exchange(tableau, chosen)
            closed[chosen] = ~closed[chosen]


class _Search:
    """Which of the points that are wrong to exchange next."""

    def __init__(self, points: int) -> None:
        self.fewest, self.patience, self.tries = points + 1, PATIENCE, 20 * points

    def exchange(self, wrong: Mask) -> NDArray[np.int64]:
        bad = np.flatnonzero(wrong)
        if bad.size < self.fewest:
            self.fewest, self.patience = bad.size, PATIENCE
        else:
            self.patience -= 1
        self.tries -= 1
        if self.tries < 0:
            raise ArithmeticError("the contact did not settle")
        return bad if self.patience > 0 else bad[-1:]


def _violated(answers: Array, closed: Mask, limits: Array) -> Mask:
    """Tell which points pull or overlap; limits are those of force and gap, on the last axis."""
    return np.asarray(answers < -np.where(closed, limits[..., :1], limits[..., 1:]))


def _exchange(tableau: Array, chosen: NDArray[np.int64]) -> None:
    """Exchange known and unknown of the chosen points in place: the principal pivot of w = M z + q.

    Solves their rows for their unknowns and puts those into the other rows. The tableau is column-major.
    """
    rows, columns = tableau[chosen], tableau[:, chosen]
    block = rows[:, chosen]
    rows[:, chosen] = -np.eye(chosen.size)
    new = np.linalg.solve(block, -rows) if chosen.size > 1 else -rows / block
    columns[chosen] = np.eye(chosen.size)
    tableau[:, chosen] = 0.0
    tableau[chosen] = 0.0
    dgemm(1.0, columns, new, beta=1.0, c=tableau, overwrite_c=True)

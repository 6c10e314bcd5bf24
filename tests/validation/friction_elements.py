"""Coulomb friction between a snug pin and its hole, by the elements of `plane_stress_elements`.

A snug pin under loads that grow together slips the same way throughout, so that one step is exact: a box-constrained
problem with the friction bounds taken from the normal forces, repeated until they agree. Run

    python -m tests.validation.friction_elements

to print the table `fatigue.hole.edge.FRICTION_BEARING` and `FRICTION_BYPASS` were taken from (some ten minutes).
"""

from __future__ import annotations

import numpy as np
from scipy.optimize import brentq

from tests.validation.plane_stress_elements import PINS, PinnedSheet, make_pin


def boxed(matrix, linear, low, high, start):
    """Minimise l.M.l/2 + l.b between bounds by a primal-dual active set."""
    result, diagonal = start, np.diag(matrix)
    for trial in range(400):
        wish = result - (matrix @ result + linear) / diagonal
        new = np.clip(wish, low, high)
        free = (wish >= low) & (wish <= high)
        fixed = ~free
        new[free] = np.linalg.solve(
            matrix[np.ix_(free, free)], -(linear[free] + matrix[np.ix_(free, fixed)] @ new[fixed])
        )
        if np.abs(new - result).max() < 1e-10 * np.abs(new).max():
            return new
        result = new if trial < 60 else (new + result) / 2
    raise ArithmeticError("not settled")


class RubbingPin:
    """A snug pin in a sheet, with friction."""

    def __init__(self, edge, width_ratio, end_ratio=np.inf, pin="aluminium", around=90):
        self.sheet = PinnedSheet(edge, width_ratio, end_ratio, around=around)
        bodies = self.sheet.body, make_pin(PINS[pin], around)
        angle = bodies[0].angle
        self.count = angle.size
        self.keep = np.concatenate([np.arange(self.count), self.count + np.arange(1, self.count - 1)])
        whole = np.zeros((2 * self.count, 2 * self.count))
        for body in bodies:
            pushed = body.solve(np.hstack([body.pushes(), self.rubs(body)]))
            whole += self.moves(body, pushed)
            if body is bodies[0]:
                self.pushed = pushed
        self.matrix = ((whole + whole.T) / 2)[np.ix_(self.keep, self.keep)]
        self.lift = np.concatenate([np.cos(angle), -np.sin(angle)])[self.keep]

    @staticmethod
    def rubs(body):
        force = np.zeros((body.stiffness.shape[0], body.angle.size))
        i = np.arange(body.angle.size)
        force[body.edge[0], i], force[body.edge[1], i] = -np.sin(body.angle), np.cos(body.angle)
        return force

    @staticmethod
    def moves(body, u):
        along = (-u[body.edge[0]].T * np.sin(body.angle) + u[body.edge[1]].T * np.cos(body.angle)).T
        return np.concatenate([body.radial(u), along])

    def loaded(self, bypass, bearing, friction):
        """Return the hoop stress around the edge."""
        sheet, n = self.sheet, self.count
        u = sheet.bypass * bypass + sheet.reaction * bearing / sheet.half_width
        gap = self.moves(sheet.body, u)[self.keep]

        def force(shift):
            linear = gap - shift * self.lift
            bound, result = np.zeros(n), np.zeros(self.keep.size)
            for trial in range(80):
                rub = friction * bound[1:-1] + 1e-9
                low, high = np.concatenate([np.zeros(n), -rub]), np.concatenate([np.full(n, np.inf), rub])
                result = boxed(self.matrix, linear, low, high, result)
                if friction == 0 or np.abs(result[:n] - bound).max() < 1e-5 * result[:n].max():
                    break
                bound = result[:n] if trial < 3 else (bound + result[:n]) / 2
            return result

        radial = gap[:n]
        middle = (radial[0] - radial[-1]) / 2
        low, high = middle - 1e-3, middle + 1e-3
        while force(high) @ self.lift < bearing:
            high += 2e-3
        while force(low) @ self.lift > bearing:
            low -= 2e-3
        full = np.zeros(2 * n)
        full[self.keep] = force(brentq(lambda shift: force(shift) @ self.lift - bearing, low, high, xtol=1e-9))
        return sheet.body.hoop(u + self.pushed @ full)


def main():
    for width_ratio in (0.2, 0.05):
        pin = RubbingPin("row", width_ratio)
        for bypass, bearing in ((0.0, 100.0), (100.0, 100.0), (60.0, 200.0), (100.0, 0.0)):
            peaks = np.array([pin.loaded(bypass, bearing, mu).max() for mu in (0.0, 0.1, 0.2, 0.3)])
            print(width_ratio, bypass, bearing, peaks.round(2), "rise", (peaks / peaks[0] - 1).round(4))


if __name__ == "__main__":
    main()

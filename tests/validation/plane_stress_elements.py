"""Plane-stress finite elements of a pin in a hole, independent of the engine: scikit-fem, second-order quadrilaterals.

Half of a sheet and half of a pin about the load axis, the hole's radius 1. Both are condensed to their edge nodes; the
contact is then a least-squares problem with non-negative nodal forces (`scipy.optimize.nnls`) for a given movement of
the pin, and the movement is found so that the forces carry the pin's load. Run

    python -m tests.validation.plane_stress_elements

to make `data/pin_in_hole_elements.csv` again (some minutes); `test_hole_elements.py` compares it with the engine.
"""

from __future__ import annotations

import csv
import sys
from pathlib import Path

import numpy as np
import scipy.sparse.linalg as sla
from scipy.optimize import brentq, nnls
from skfem import Basis, BilinearForm, ElementQuad2, ElementVector, FacetBasis, LinearForm, MeshQuad, MeshQuad2
from skfem.helpers import ddot, eye, sym_grad, trace

STORED = Path(__file__).parents[2] / "reports" / "evidence" / "data" / "pin_in_hole_elements.csv"
SHEET = (72e3, 0.33)
PINS = {"aluminium": (72e3, 0.33), "steel": (205e3, 0.30)}
COLUMNS = ["edge", "width_ratio", "end_ratio", "pin"]
COLUMNS += ["bypass_MPa", "bearing_MPa", "fit", "peak_MPa", "angle_deg", "at_90_MPa"]
CORE = 0.02
"""Radius of the pin's rigid core, which holds it."""
LENGTH = 1.5
"""Sheet either side of the hole, in widths."""
REACH = 5.0
"""Length of sheet whose sideways contraction a row shares, in pitches."""


def graded(count, first, length):
    """Spread points whose spacing grows evenly from the first one, from 0 to 1."""
    growth = brentq(lambda q: first * (q**count - 1) / (q - 1) - length, 1 + 1e-9, 5)
    points = (growth ** np.arange(count + 1) - 1) / (growth - 1)
    return points / points[-1]


def quadrilaterals(x, y):
    """Join a grid of points to elements."""
    index = np.arange(x.size).reshape(x.shape)
    cells = [index[:-1, :-1], index[1:, :-1], index[1:, 1:], index[:-1, 1:]]
    return np.array([x.ravel(), y.ravel()]), np.array([cell.ravel() for cell in cells])


def merged(parts):
    """Glue grids at the points they share."""
    points = np.hstack([p for p, _ in parts])
    offsets = np.cumsum([0] + [p.shape[1] for p, _ in parts[:-1]])
    cells = np.hstack([t + offset for (_, t), offset in zip(parts, offsets, strict=True)])
    _, first, back = np.unique(np.round(points * 1e9).astype(np.int64), axis=1, return_index=True, return_inverse=True)
    return points[:, first], back.ravel()[cells]


def round_edge(points, cells):
    """Make second-order elements whose middle points on the hole lie on the circle."""
    mesh = MeshQuad2.from_mesh(MeshQuad(np.ascontiguousarray(points), np.ascontiguousarray(cells)))
    places = mesh.doflocs.copy()
    radius = np.hypot(*places)
    near = np.abs(radius - 1) < 3e-3
    places[:, near] /= radius[near]
    return MeshQuad2(doflocs=places, t=mesh.t)


def sheet_mesh(half_width, behind, ahead, around, outwards=26, first=0.02):
    angle = np.pi * np.arange(around + 1) / around
    c, s = np.cos(angle), np.sin(angle)
    left, right = -min(behind, half_width), min(ahead, half_width)
    with np.errstate(invalid="ignore"):
        along = np.where(c > 0, right, left) / np.where(np.abs(c) > 1e-12, c, np.nan)
        reach = np.fmin(half_width / np.where(s > 1e-12, s, np.nan), along)
    outer_x, outer_y = reach * c, reach * s
    outer_y[[0, -1]] = 0
    for corner in (right, left):
        k = np.argmin((outer_x - corner) ** 2 + (outer_y - half_width) ** 2)
        outer_x[k], outer_y[k] = corner, half_width
    g = graded(outwards, first / (min(half_width, right) - 1), 1.0)
    parts = [quadrilaterals(c[:, None] * (1 - g) + outer_x[:, None] * g, s[:, None] * (1 - g) + outer_y[:, None] * g)]
    for end, start in ((ahead, right), (-behind, left)):
        if abs(end - start) > 1e-9:
            heights = np.sort(outer_y[np.abs(outer_x - start) < 1e-9])
            parts.append(quadrilaterals(*np.meshgrid(np.linspace(start, end, 11), heights, indexing="ij")))
    return round_edge(*merged(parts))


def pin_mesh(around, inwards=16, first=0.02):
    angle = np.pi * np.arange(around + 1) / around
    g = 1 - (1 - CORE) * graded(inwards, first / (1 - CORE), 1.0)
    return round_edge(*quadrilaterals(np.cos(angle)[:, None] * g, np.sin(angle)[:, None] * g))


class Body:
    """One body, held at some degrees of freedom, loaded at its round edge."""

    def __init__(self, mesh, modulus, poisson, held):
        self.modulus, self.poisson = modulus, poisson
        self.basis = Basis(mesh, ElementVector(ElementQuad2()), intorder=5)
        lame, shear = modulus * poisson / (1 - poisson**2), modulus / (2 * (1 + poisson))

        @BilinearForm
        def energy(u, v, _):
            strain = sym_grad(u)
            return ddot(2 * shear * strain + lame * eye(trace(strain), 2), sym_grad(v))

        self.stiffness = energy.assemble(self.basis).tocsc()
        self.places = self.basis.doflocs
        self.component = np.zeros(self.places.shape[1], dtype=int)
        for dofs in (self.basis.nodal_dofs, self.basis.facet_dofs, self.basis.interior_dofs):
            for k, row in enumerate(dofs):
                self.component[row] = k % 2
        on = np.flatnonzero(np.abs(np.hypot(*self.places) - 1) < 1e-9)
        angle = np.arctan2(self.places[1, on], self.places[0, on])
        order = np.lexsort((self.component[on], np.round(angle, 9)))
        self.edge = on[order].reshape(-1, 2).T
        self.angle = angle[order].reshape(-1, 2)[:, 0]
        self.free = np.setdiff1d(np.arange(self.places.shape[1]), np.flatnonzero(held(self.places, self.component)))
        inner = self.stiffness[self.free][:, self.free].tocsc()
        self.factor = sla.splu(inner, permc_spec="MMD_AT_PLUS_A", options={"SymmetricMode": True})

    def solve(self, force, given=None):
        u = np.zeros((self.stiffness.shape[0], *force.shape[1:])) if given is None else given.copy()
        rest = force if given is None else force - self.stiffness @ u
        u[self.free] = self.factor.solve(np.asfortranarray(rest[self.free]))
        return u

    def pushes(self):
        """Unit radial forces at the edge nodes, one column each."""
        force = np.zeros((self.stiffness.shape[0], self.angle.size))
        i = np.arange(self.angle.size)
        force[self.edge[0], i], force[self.edge[1], i] = np.cos(self.angle), np.sin(self.angle)
        return force

    def radial(self, u):
        return (u[self.edge[0]].T * np.cos(self.angle) + u[self.edge[1]].T * np.sin(self.angle)).T

    def pull(self, end):
        """Unit tension on the end of a sheet."""
        mesh = self.basis.mesh
        facets = mesh.facets_satisfying(lambda x: np.abs(x[0] - end) < 1e-9, boundaries_only=True)

        @LinearForm
        def work(v, _):
            return np.sign(end) * v[0]

        return work.assemble(FacetBasis(mesh, self.basis.elem, facets=facets, intorder=5))

    def hoop(self, u):
        """Hoop stress at the edge nodes, the mean of the elements that meet there."""
        nodes = np.array([[0, 1, 1, 0, 0.5, 1, 0.5, 0, 0.5], [0, 0, 1, 1, 0, 0.5, 1, 0.5, 0.5]])
        basis = Basis(self.basis.mesh, self.basis.elem, quadrature=(nodes, np.ones(9)))
        gradient = basis.interpolate(u).grad
        x = np.asarray(basis.global_coordinates())
        strain = (gradient + np.swapaxes(gradient, 0, 1)) / 2
        plane = self.modulus / (1 - self.poisson**2)
        xx = plane * (strain[0, 0] + self.poisson * strain[1, 1])
        yy = plane * (strain[1, 1] + self.poisson * strain[0, 0])
        xy = self.modulus / (1 + self.poisson) * strain[0, 1]
        on = np.abs(np.hypot(*x) - 1) < 1e-9
        angle = np.arctan2(x[1][on], x[0][on])
        s, c = np.sin(angle), np.cos(angle)
        hoop = xx[on] * s * s + yy[on] * c * c - 2 * xy[on] * s * c
        which = np.round(angle / np.pi * (self.angle.size - 1)).astype(int)
        return np.bincount(which, hoop) / np.bincount(which)


def make_pin(pin, around):
    return Body(
        pin_mesh(around), *pin, lambda x, comp: (np.hypot(*x) < CORE + 1e-4) | ((np.abs(x[1]) < 1e-9) & (comp == 1))
    )


class PinnedSheet:
    """A sheet with a hole; unit load cases solved once."""

    def __init__(self, edge, width_ratio, end_ratio=np.inf, sheet=SHEET, around=90):
        h = 1 / width_ratio
        behind = LENGTH * 2 * h
        ahead = min(2 * end_ratio, behind)
        self.half_width = h

        def held(x, comp):
            axis = np.abs(x[1]) < 1e-9
            fixed = (axis & (comp == 1)) | (axis & (comp == 0) & (np.abs(x[0] + behind) < 1e-9))
            return fixed | ((comp == 1) & (np.abs(x[1] - h) < 1e-9)) if edge == "row" else fixed

        self.body = body = Body(sheet_mesh(h, behind, ahead, around), *sheet, held)
        pulls = body.pull(-behind), body.pull(ahead)
        given = None
        if edge == "row":
            # the lines midway between holes stay straight and come closer as the sheet contracts
            given = np.where((body.component == 1) & (np.abs(body.places[1] - h) < 1e-9), -sheet[1] / sheet[0] * h, 0.0)
        reach = REACH * 2 * h
        share = reach / (reach + min(2 * end_ratio, reach))
        self.bypass = body.solve(pulls[0] + pulls[1], given)
        self.reaction = body.solve(pulls[0], None if given is None else given * share)
        self.pushed = body.solve(body.pushes())

    def open_hoop(self, bypass):
        return bypass * self.body.hoop(self.bypass)

    def with_pin(self, pin):
        """Add the pin's compliance."""
        whole = self.body.radial(self.pushed) + pin.radial(pin.solve(pin.pushes()))
        self.upper = np.linalg.cholesky((whole + whole.T) / 2).T
        return self

    def loaded(self, bypass, bearing, fit):
        """Return nodal forces and hoop stress at the edge nodes."""
        cosine = np.cos(self.body.angle)
        u = self.bypass * bypass + self.reaction * bearing / self.half_width
        gap = self.body.radial(u) - fit

        def force(shift):
            return nnls(self.upper, -np.linalg.solve(self.upper.T, gap - shift * cosine), maxiter=20000)[0]

        def excess(shift):
            return force(shift) @ cosine - bearing

        low, high = -1e-5 - abs(fit), 1e-5 + abs(fit)
        while excess(high) < 0:
            high *= 2
        while excess(low) > 0:
            low *= 2
        idle = bearing == 0 and excess(0.0) == 0
        pressed = force(0.0 if idle else brentq(excess, low, high, xtol=1e-13, rtol=1e-11))
        return pressed, self.body.hoop(u + self.pushed @ pressed)


def cases():
    """Yield edge, d/W and end distance/d."""
    for edge in ("row", "strip"):
        for width_ratio in (0.2, 0.3, 0.5):
            for end_ratio in (2.0, 3.0, np.inf):
                yield edge, width_ratio, end_ratio


LOADS = [(100.0, 0.0), (0.0, 100.0), (100.0, 100.0), (60.0, 200.0), (-50.0, -100.0)]
FITS = [0.0, -0.001, 0.003]


def main():
    with STORED.open("w", newline="") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(COLUMNS)
        for edge, width_ratio, end_ratio in cases():
            sheet = PinnedSheet(edge, width_ratio, end_ratio)
            write(writer, sheet, (edge, width_ratio, end_ratio, "none"), 100.0, 0.0, "open", sheet.open_hoop(100.0))
            for name, pin in PINS.items():
                sheet.with_pin(make_pin(pin, 90))
                for bypass, bearing in LOADS:
                    for fit in FITS:
                        hoop = sheet.loaded(bypass, bearing, fit)[1]
                        write(writer, sheet, (edge, width_ratio, end_ratio, name), bypass, bearing, fit, hoop)
            sys.stderr.write(f"{edge} {width_ratio} {end_ratio}\n")


def write(writer, sheet, head, bypass, bearing, fit, hoop):
    peak = int(np.argmax(hoop))
    angle = np.degrees(sheet.body.angle[peak])
    writer.writerow([*head, bypass, bearing, fit, f"{hoop[peak]:.3f}", f"{angle:.0f}", f"{hoop[hoop.size // 2]:.3f}"])


if __name__ == "__main__":
    main()

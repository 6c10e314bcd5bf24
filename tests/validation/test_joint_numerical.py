"""Row loads and bending against general solvers: scipy's boundary-value solver, and dense equilibrium written anew."""

from dataclasses import replace

import numpy as np
import pytest
from scipy.integrate import solve_bvp

from fatigue.joint import arrays_of, layout_of, solve_joint
from fatigue.joint.bending import lever_arms
from fatigue.splice import Row, Sheet, Splice, Step
from tests.support import ALUMINIUM, BOLT, DRILLED, RIVET


def by_bvp(length, stiffness, neutral, load, ends, symmetric):
    """Solve u'' = (P/EI) u, every segment on [0, 1], jumps of u between them and the line of action's tilt unknown."""
    m = len(length)
    root = load / stiffness

    def slope(x, y):
        u, du = y[0::2], y[1::2]
        out = np.empty_like(y)
        out[0::2] = du * length[:, None]
        out[1::2] = (root * length)[:, None] * u
        return out

    # u is the height of the line of action above the bent neutral line; without tilt it starts at neutral[0] offsets
    def residual(a, b):
        parts = []
        for i in range(m - 1):
            parts += [a[2 * i + 2] - b[2 * i] - (neutral[i] - neutral[i + 1]), a[2 * i + 3] - b[2 * i + 1]]
        if ends == "pinned":
            parts.append(a[0])
            parts.append(b[-1] if symmetric else b[-2])
        else:
            parts.append(a[1])
            parts.append(b[-1])
        return np.array(parts)

    x = np.linspace(0, 1, 41)
    found = solve_bvp(slope, residual, x, np.zeros((2 * m, x.size)), tol=1e-10, max_nodes=200_000)
    assert found.success
    return found.sol(0.0)[0::2], found.sol(1.0)[0::2]


@pytest.mark.parametrize("seed", range(12))
@pytest.mark.parametrize("symmetric", [False, True])
def test_pinned_joints_with_steps(seed, symmetric):
    """Random sections, lengths and offsets under 5 to 250 MPa, to 1e-6 of the largest arm."""
    random = np.random.default_rng(seed)
    m = int(random.integers(2, 7))
    thickness = random.uniform(0.8, 4.0, m)
    stiffness = 72e3 * thickness**3 / 12
    length = random.uniform(10, 60, m)
    neutral = np.cumsum(random.normal(0, 0.8, m))
    load = random.uniform(5, 250) * thickness[0]
    # between supports at the two ends' own neutral lines the action is straight: take its tilt out first
    if not symmetric:
        neutral = neutral - np.interp(np.cumsum(length) - length / 2, [0, length.sum()], [neutral[0], neutral[-1]])
        neutral[0] = neutral[-1] = 0.0
    start, end = lever_arms(length, stiffness, neutral, load, "pinned", symmetric)
    start_bvp, end_bvp = by_bvp(length, stiffness, neutral, load, "pinned", symmetric)
    scale = np.abs([start, end]).max()
    np.testing.assert_allclose(np.abs(start), np.abs(start_bvp), atol=1e-6 * scale)
    np.testing.assert_allclose(np.abs(end), np.abs(end_bvp), atol=1e-6 * scale)


def random_stack(random):
    """Return a lap of three or four sheets, each over some of the rows, all tied together."""
    rows = int(random.integers(3, 7))
    sheets = int(random.integers(3, 5))
    spans = [(0, rows - 1)]
    for _ in range(sheets - 2):
        first = int(random.integers(0, rows - 1))
        spans.append((first, int(random.integers(first, rows))))
    spans.append((0, rows - 1))
    made = []
    for i, (first, last) in enumerate(spans):
        steps = ()
        if random.random() < 0.5 and last > first:
            steps = (Step(int(random.integers(first, last)), float(random.uniform(0.8, 3.0))),)
        start = "loaded" if i == 0 else "free"
        end = "out" if i == sheets - 1 else "free"
        thickness = float(random.uniform(0.8, 3.0))
        made.append(Sheet(f"s{i}", ALUMINIUM, thickness, first, last, start, end, steps=steps, edge=9.0))
    at = np.cumsum(random.uniform(14, 30, rows))
    kinds = [RIVET if random.random() < 0.5 else BOLT for _ in range(rows)]
    made_rows = tuple(
        Row(
            f"r{i}", float(at[i] - at[0]), float(random.uniform(3, 6)), float(random.uniform(18, 30)), kinds[i], DRILLED
        )
        for i in range(rows)
    )
    return Splice("lap", tuple(made), made_rows, 22.0, 150.0)


@pytest.mark.parametrize("seed", range(30))
def test_random_stacks_against_dense_equilibrium(seed):
    """Forces on every node set to zero by a dense solve over displacements, written from the splice's own records."""
    splice = random_stack(np.random.default_rng(100 + seed))
    joint = solve_joint(splice)
    node, width = {}, splice.width
    for r, _ in enumerate(splice.rows):
        for s, sheet in enumerate(splice.sheets):
            if sheet.spans(r) or (r > sheet.first_row and sheet.end == "out"):
                node[r, s] = len(node)
    stiffness, force = np.zeros((len(node), len(node))), np.zeros(len(node))

    def spring(a, b, k):
        for i, j, sign in ((a, a, 1), (b, b, 1), (a, b, -1), (b, a, -1)):
            stiffness[i, j] += sign * k

    for (r, s), at in node.items():
        if (r + 1, s) in node:
            sheet = splice.sheets[s]
            length = splice.rows[r + 1].position - splice.rows[r].position
            spring(at, node[r + 1, s], sheet.material.modulus * sheet.thickness_after(r) * width / length)
    planes = list(zip(joint.interfaces, joint.flexibility, joint.layout.planes, strict=True))
    for (r, upper, lower), flexibility, number in planes:
        fasteners = width / splice.rows[r].pitch
        spring(node[r, upper], node[r, lower], fasteners / flexibility / number)
    force[node[0, 0]] = -1.0
    fixed = node[len(splice.rows) - 1, len(splice.sheets) - 1]
    free = [i for i in range(len(node)) if i != fixed]
    moved = np.zeros(len(node))
    moved[free] = np.linalg.solve(stiffness[np.ix_(free, free)], force[free])
    taken = np.zeros(len(splice.locations))
    for (r, upper, lower), flexibility, number in planes:
        load = (moved[node[r, lower]] - moved[node[r, upper]]) * width / splice.rows[r].pitch / flexibility / number
        taken[splice.locations.index((r, upper))] -= load
        taken[splice.locations.index((r, lower))] += load
    np.testing.assert_allclose(np.abs(taken), joint.transfer, atol=1e-9)
    assert joint.equilibrium_residual < 1e-10
    assert joint.free_body < 1e-10


def test_three_sheets_in_a_row_make_single_or_double_shear_by_who_carries():
    splice = random_stack(np.random.default_rng(5))
    main = replace(splice, flexibility="huth")
    layout = layout_of(main)
    assert set(layout.planes.tolist()) == {1}  # the loaded sheet is an outer one: no fastener is in double shear
    assert arrays_of(main).length.size == len(main.rows) + 1

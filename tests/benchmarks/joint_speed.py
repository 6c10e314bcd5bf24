"""Row loads and bending of many variants in one call against a loop: python -m tests.benchmarks.joint_speed."""

from __future__ import annotations

from dataclasses import replace
from time import process_time

import numpy as np

from fatigue.joint import arrays_of, layout_of, solve_joint, solve_variants
from fatigue.splice import Splice
from tests.support import make_lap

LEVELS = np.linspace(2.0, 140.0, 50)


def random_variants(count: int) -> tuple[Splice, dict[str, np.ndarray]]:
    """Return a six-row lap and arrays of its thicknesses, pitches and diameters drawn at random."""
    random = np.random.default_rng(7)
    splice = make_lap(rows=6)
    arrays = arrays_of(splice)
    return splice, {
        "thickness": arrays.thickness * random.uniform(0.8, 1.4, (count, 1, 2)),
        "pitch": arrays.pitch * random.uniform(0.9, 1.3, (count, 6)),
        "diameter": arrays.diameter * random.uniform(0.9, 1.2, (count, 6)),
    }


def one_by_one(splice: Splice, drawn: dict[str, np.ndarray], count: int) -> list[tuple[np.ndarray, np.ndarray]]:
    """Solve the first variants with the single-case functions."""
    found = []
    for k in range(count):
        sheets = tuple(
            replace(sheet, thickness=float(drawn["thickness"][k, 0, s])) for s, sheet in enumerate(splice.sheets)
        )
        rows = tuple(
            replace(row, pitch=float(drawn["pitch"][k, r]), hole_diameter=float(drawn["diameter"][k, r]))
            for r, row in enumerate(splice.rows)
        )
        joint = solve_joint(replace(splice, sheets=sheets, rows=rows))
        found.append((joint.transfer, joint.bending(LEVELS)))
    return found


def measure(count: int, looped: int) -> tuple[float, float, float]:
    """Return processor seconds a variant in one call and in the loop, and the largest difference of the numbers.

    Processor time, with one thread for the linear algebra: others on the machine count less than by the clock.
    """
    splice, drawn = random_variants(count)
    layout, arrays = layout_of(splice), replace(arrays_of(splice), **drawn)
    call = loop = float("inf")
    for _ in range(3):  # the best of three each
        begin = process_time()
        many = solve_variants(layout, arrays, LEVELS)
        call = min(call, (process_time() - begin) / count)
        begin = process_time()
        single = one_by_one(splice, drawn, looped)
        loop = min(loop, (process_time() - begin) / looped)
    difference = max(
        max(
            np.abs(many.loads.transfer[k] - transfer).max(),
            np.abs(many.bending[k] - bending).max() / np.abs(bending).max(),
        )
        for k, (transfer, bending) in enumerate(single)
    )
    return call, loop, float(difference)


def main() -> None:
    """Print the ratio."""
    call, loop, difference = measure(10_000, 400)
    print(f"10,000 variants in one call {1e6 * call:.1f} us each, in a loop {1e3 * loop:.2f} ms each")
    print(f"ratio {loop / call:.0f}; largest difference {difference:.1e}")


if __name__ == "__main__":
    main()

"""Checks of fastener flexibility, row loads and secondary bending."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from functools import partial
from typing import Any

import numpy as np

from fatigue.joint import solve_joint
from fatigue.joint.flexibility import huth_1986, swift_1971, tate_rosenfeld_1946
from fatigue.splice import Splice
from reports.evidence.check import Check, Checks
from reports.evidence.splices import make_doubler, make_lap, make_one_strap, make_two_strap

E = 72e3
STEEL = 205e3


def share(splice: Splice, row: int, sheet: int = 0) -> float:
    """Return the share of the remote load that a row takes out of a sheet."""
    return float(solve_joint(splice).transfer[splice.locations.index((row, sheet))])


def with_kappa(rows: int, first: float, second: float | None = None) -> Splice:
    """Return a lap whose flexibility gives kappa = (s/(E t W))/C in its sheets."""
    splice = make_lap(rows=rows)
    sheet, other = splice.sheets
    bay = splice.rows[1].position / (sheet.material.modulus * sheet.thickness * splice.width)
    splice = replace(splice, rows=tuple(replace(row, flexibility=bay / first) for row in splice.rows))
    if second is None:
        return splice
    return replace(splice, sheets=(sheet, replace(other, thickness=sheet.thickness * first / second)))


def k_bend(splice: Splice, stress: float, row: int = 0, sheet: int = 0) -> float:
    """Return bending over remote stress at a location."""
    return float(solve_joint(splice).bending([stress])[splice.locations.index((row, sheet)), 0] / stress)


def _long_doubler(softness: float) -> Splice:
    """Return a doubler of 24 rows on an equal skin with (s/(E t W))/C of skin and doubler together."""
    splice = make_doubler(rows=24)
    sheet = splice.sheets[0]
    bay = splice.rows[1].position / (sheet.material.modulus * sheet.thickness * splice.width)
    rows = tuple(replace(row, flexibility=2 * bay / softness) for row in splice.rows)
    return replace(splice, rows=rows)


def _decay(softness: float) -> float:
    return share(_long_doubler(softness), 6) / share(_long_doubler(softness), 5)


def checks() -> list[Check]:
    """Return the checks of joints."""
    found = Checks()
    add = found.add

    unit = "1e-6 mm/N"
    for t, printed in ((1.2, "47.193"), (1.6, "39.711")):
        compute = partial(_scaled, huth_1986, t, t, 4.0, E, E, E, riveted=True)
        add("flexibility", f"riveted, d 4.0, {t:g} + {t:g}", printed, compute, "huth-1986", unit=unit)
    add(
        "flexibility",
        "bolted, double shear, 2.0 between 1.2, d 4.7625 steel",
        "10.850",
        partial(_scaled, huth_1986, 2.0, 1.2, 4.7625, E, E, STEEL, riveted=False, shear_planes=2),
        "huth-1986",
        unit=unit,
        within=5e-3,
        reason="the printed value does not say which modulus the steel has",
    )
    add(
        "flexibility", "d 4.0, 1.2 + 1.2", "35.880", partial(_scaled, swift_1971, 1.2, 1.2, 4.0, E, E, E),
        "swift-1971", unit=unit,
    )  # fmt: skip
    add(
        "flexibility", "single shear, d 4.7625, 1.6 + 1.6", "38.348",
        partial(_scaled, tate_rosenfeld_1946, 1.6, 1.6, 4.7625, E, E, E, 0.33), "tate-rosenfeld-1946", unit=unit,
    )  # fmt: skip

    chain = "spring-chain"
    three = with_kappa(3, 0.423)
    for row, printed in enumerate(("0.3700", "0.2600", "0.3700")):
        add("row loads", f"three equal rows, kappa 0.423, row {row + 1}", printed, partial(share, three, row), chain)
    for row, percent in enumerate(("37", "26", "37")):
        compute = partial(_percent, three, row)
        add("row loads", f"three rows of a usual lap, row {row + 1}", percent, compute, chain, unit="%", how="practice")
    for row, printed in enumerate(("0.3333", "0.1667", "0.1667", "0.3333")):
        compute = partial(share, with_kappa(4, 0.5), row)
        add("row loads", f"four equal rows, kappa 0.5, row {row + 1}", printed, compute, chain)
    add(
        "row loads", "two rows, unequal sheets, kappa 0.6 and 0.3", "0.551724",
        partial(share, with_kappa(2, 0.6, 0.3), 0), chain,
    )  # fmt: skip
    for row, printed in enumerate(("0.4047", "0.2396", "0.3557")):
        what = f"two-strap butt, main 2.0, straps 1.2, row {row + 1} from outside"
        add("row loads", what, printed, partial(share, make_two_strap(), row, 1), chain)
    what = "long doubler, softness 0.4687 of a bay over a fastener"
    add("row loads", f"{what}: decay from row to row", "0.5107", partial(_decay, 0.4687), chain)
    add("row loads", f"{what}: first row", "0.2446", partial(share, _long_doubler(0.4687), 0), chain)

    line = "schijve-1972"
    thick = make_lap(rows=3, spacing=28.0, thickness=2.0)
    stiff = [replace(s, material=replace(s.material, modulus=E / (1 - 0.33**2))) for s in thick.sheets]
    for what, printed, splice, stress in (
        ("equal lap 2.0, S 100, pinned", "1.15568", thick, 100.0),
        ("equal lap 2.0, S 100, clamped", "1.15566", replace(thick, ends="clamped"), 100.0),
        ("equal lap 2.0, S 100, E/(1-nu^2)", "1.18790", replace(thick, sheets=tuple(stiff)), 100.0),
        ("equal lap 2.0, S 10", "1.9153", thick, 10.0),
        ("equal lap 2.0, S 40", "1.4391", thick, 40.0),
        ("equal lap 2.0, S 200", "0.9897", thick, 200.0),
        ("equal lap 1.2, rows at 20, S 100", "1.0659", make_lap(), 100.0),
        ("long and highly loaded lap", "0.78361", make_lap(spacing=500.0, thickness=2.0), 300.0),
    ):
        add("secondary bending", what, printed, partial(k_bend, splice, stress), line)
    add(
        "secondary bending", "equal lap 2.0, vanishing load: 3/(1 + L/(2 L1))", f"{3 / (1 + 56 / 300):.5f}",
        partial(k_bend, thick, 1e-7), line, within=2e-5,
        reason="the load does not quite vanish",
    )  # fmt: skip
    strap = make_one_strap()
    add("secondary bending", "one-strap 2.0/2.0, skin at the outer row", "1.4791", partial(k_bend, strap, 100.0), line)
    compute = partial(k_bend, strap, 100.0, 1, 1)
    add("secondary bending", "one-strap 2.0/2.0, strap at the inner row", "1.9831", compute, line)
    doubler = make_doubler(rows=2, spacing=50.0, to_centre=50.0)
    add("secondary bending", "one-sided doubler 1.6 on 1.6", "0.7798", partial(k_bend, doubler, 100.0), line)
    return found


def _scaled(formula: Callable[..., Any], *values: float, **more: object) -> float:
    return 1e6 * float(formula(*values, **more))


def _percent(splice: Splice, row: int) -> float:
    return 100 * share(splice, row)


def bending_curve() -> tuple[np.ndarray, np.ndarray]:
    """Return k_b of the equal 2.0 lap against remote stress, for the plot beside the printed points."""
    stress = np.geomspace(2.0, 400.0, 60)
    joint = solve_joint(make_lap(rows=3, spacing=28.0, thickness=2.0))
    return stress, joint.bending(stress)[0] / stress

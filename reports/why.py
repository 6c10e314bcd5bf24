"""Why the governing location governs, in sentences made of its numbers."""

from __future__ import annotations

import numpy as np

from fatigue.life import Estimate
from reports.figures.style import life_text


def why_first(estimate: Estimate) -> list[str]:
    """Return what sets the governing location apart from the next one in another place of the joint."""
    rows = estimate.rows
    first = rows.iloc[0]
    joint, i = estimate.joint, estimate.governing
    stress = {name: float(first[f"from_{name}_MPa"]) for name in ("bypass", "bearing", "bending")}
    total = sum(stress.values()) or 1.0
    largest = max(stress, key=lambda name: stress[name])
    found = [
        f"Its row takes {100 * first['transfer_fraction']:.0f} % of the load out of the {first['sheet']} and lets "
        f"{100 * abs(float(joint.bypass[i])):.0f} % pass; the largest part of its stress is {largest} "
        f"({100 * stress[largest] / total:.0f} %)."
    ]
    apart = rows[np.abs(np.log(rows["life_flights"] / first["life_flights"])) > 1e-6]
    twins = len(rows) - len(apart) - 1
    if twins:
        names = [f"row {r}, {s}" for r, s in zip(rows["row"][1 : 1 + twins], rows["sheet"][1 : 1 + twins], strict=True)]
        found.append(f"The joint is symmetric: {' and '.join(names)} stands as bad.")
    if len(apart):
        following = apart.iloc[0]
        parts = {name: stress[name] - float(following[f"from_{name}_MPa"]) for name in stress}
        more = max(parts, key=lambda name: parts[name])
        found.append(
            f"The next, row {following['row']}, {following['sheet']}, lasts {life_text(following['life_flights'])} "
            f"flights; what sets them apart most is {more}, {parts[more]:.0f} MPa more at the first."
        )
    by_cycle, cycles = estimate.route.by_cycle[i], estimate.loads.cycles
    if by_cycle.sum() > 0:
        order = np.argsort(-by_cycle)
        half = order[: int(np.searchsorted(np.cumsum(by_cycle[order]), 0.5 * by_cycle.sum()) + 1)]
        low, high = f"{cycles.range[half].min():.0f}", f"{cycles.range[half].max():.0f}"
        found.append(
            f"Half of its damage comes from cycles of {low if low == high else f'{low} to {high}'} MPa remote range, "
            f"{cycles.count[half].sum():.2g} of them a flight."
        )
    return found

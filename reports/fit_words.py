"""The curve of life against fit, told feature by feature."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from fatigue.fits import FitCurves
from fatigue.life import Estimate
from reports.figures.style import life_text

Array = NDArray[np.float64]

FLAT = 0.15
"""Change of a life over the clearances, as a share, that is called flat."""
SIDE = 8.0
"""Degrees from 90 within which a point lies on the hole's side."""


def fit_story(estimate: Estimate, curves: FitCurves) -> list[str]:
    """Return what the curve of the governing location shows, a sentence or two per feature."""
    i = estimate.governing
    r, s = estimate.case.splice.locations[i]
    fit, life = curves.fit_percent, curves.life[:, i]
    if not np.isfinite(life).all():
        return ["The loads do no damage there at one fit or more: there is nothing to compare."]
    name = f"row {estimate.case.splice.rows[r].name}, {estimate.case.splice.sheets[s].name}"
    return [
        *_clearance(name, fit, life),
        *_climb(fit, life, curves.angle[:, i], curves.closed[:, i]),
        *_yielding(fit, curves.pressing_percent[:, i], curves.residual_left[:, i]),
        *_practice(estimate, curves),
    ]


def _clearance(name: str, fit: Array, life: Array) -> list[str]:
    snug = int(np.argmin(np.abs(fit)))
    if snug == 0:
        return []
    loosest = life[0] / life[snug]
    start = (
        f"From {fit[0]:g} % to a snug pin the life of {name} is nearly flat"
        if abs(loosest - 1) < FLAT
        else f"From {fit[0]:g} % to a snug pin the life of {name} falls from {life_text(life[0])} to "
        f"{life_text(life[snug])} flights"
    )
    return [
        f"{start}: without interference the pin bears on part of the edge only and takes nothing off the stress at "
        f"the hole's side, and a closer pin spreads its pressure towards the sides, where it adds to the stress of the "
        f"load that passes by."
    ]


def _climb(fit: Array, life: Array, angle: Array, closed: NDArray[np.bool_]) -> list[str]:
    snug = int(np.argmin(np.abs(fit)))
    after = np.arange(snug, fit.size)
    found = []
    doubled = after[life[after] >= 2 * life[snug]]
    if doubled.size:
        found.append(
            f"Interference has doubled the life of a snug pin by {fit[doubled[0]]:.2g} %: the fit holds the edge "
            "in tension before the load comes, and while the pin stays in touch the load takes off its pressure "
            "instead of stretching the edge, so that the range falls."
        )
    travelling = after[np.abs(angle[after] - 90) > SIDE]
    if travelling.size:
        last = travelling[-1]
        found.append(
            f"Up to {fit[last]:.2g} % the worst point lies where contact ends under the largest load, "
            f"{angle[travelling[0]]:.0f} to {angle[last]:.0f} deg from the load axis; each bit of fit moves it away "
            "from the side of the hole, and the life climbs steeply."
        )
        if last + 1 < fit.size:
            found.append(
                f"From {fit[last + 1]:.2g} % on the side of the hole governs, under the pin's pressure: the range has "
                "reached its floor there, and a tighter fit gains little, since all it adds is mean stress."
            )
    kept = after[closed[after]]
    if kept.size and not closed[after].all():
        found.append(
            f"From {fit[kept[0]]:.2g} % on contact is kept all round at every load of the spectrum (bending left out)."
        )
    return found


def _yielding(fit: Array, pressing: Array, left: Array) -> list[str]:
    yields = np.flatnonzero((fit > 0) & (pressing < 0.995 * fit))
    if not yields.size:
        return ["The hole does not yield anywhere in this span of fits."]
    k, last = yields[0], fit.size - 1
    return [
        f"From {fit[k]:.2g} % on the hole yields as the pin goes in: {fit[last]:g} % presses like "
        f"{pressing[last]:.2g} %, and the yielded ring is left in compression, of which the first block leaves "
        f"{-left[last]:.0f} MPa; what a higher load would wash out, the life loses."
    ]


def _practice(estimate: Estimate, curves: FitCurves) -> list[str]:
    parts: dict[str, float] = {}
    for i, (r, _) in enumerate(estimate.case.splice.locations):
        row = estimate.case.splice.rows[r].name
        reached = curves.practice_fit[i]
        worse = row not in parts or np.isnan(reached) or reached > parts[row]
        if worse:
            parts[row] = float(reached)
    words = [
        f"row {row} {'more than ' + format(curves.fit_percent[-1], 'g') if np.isnan(value) else format(value, '.2f')} %"
        for row, value in parts.items()
    ]
    return [
        "The practice factors promise the life of a solved fit of: "
        + ", ".join(words)
        + " (the harder-worked sheet of "
        "each row). A row with less has less life than the practice factors say."
    ]

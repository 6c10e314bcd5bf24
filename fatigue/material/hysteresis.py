"""The way of a hole edge through a short sequence of loads, with full memory: for drawings, and to check the loops by.

A branch that comes back to where it left an older one closes a loop, and the older branch goes on; a branch that has
doubled the first loading meets the cyclic curve and goes on along it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.material.notch import notch_range, notch_stress
from fatigue.material.strain import StrainLife, branch_strain, cyclic_strain

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Point:
    """A state of the edge: elastic and true stress [MPa], strain."""

    elastic: float
    stress: float
    strain: float


@dataclass(frozen=True)
class Loop:
    """A closed loop by its two tips."""

    low: Point
    high: Point


@dataclass(frozen=True, eq=False)
class Path:
    """The edge's way through a sequence.

    Parameters
    ----------
    turning : tuple of Point
        The start and every turning point.
    stress, strain : ndarray
        The whole way, to be drawn [MPa], -.
    closed : tuple of Loop
        In the order they close.
    """

    turning: tuple[Point, ...]
    stress: Array
    strain: Array
    closed: tuple[Loop, ...]


def follow(
    elastic: Sequence[float], k: StrainLife, *, residual: float = 0.0, rule: str = "neuber", points: int = 40
) -> Path:
    """Follow a short sequence of elastic turning points.

    Parameters
    ----------
    elastic : sequence of float
        Elastic hole-edge stress at the turning points, in order [MPa].
    k : StrainLife
    residual : float
        Stress before service, added to every elastic one [MPa].
    rule : str
        Notch rule.
    points : int
        Drawn on each branch.

    Returns
    -------
    Path

    References
    ----------
    Masing 1926; key ``masing-1926``.

    Examples
    --------
    >>> from fatigue.material.library import strain_life
    >>> path = follow([600.0, 0.0, 400.0, 100.0, 600.0, 0.0], strain_life("2024-T351"))
    >>> [(round(loop.low.elastic), round(loop.high.elastic)) for loop in path.closed]
    [(100, 400), (0, 600)]
    """

    def on_curve(value: float) -> Point:
        stress = float(notch_stress(value, k, rule))
        strain = stress / k.modulus if rule == "elastic" else float(cyclic_strain(stress, k))
        return Point(value, stress, strain)

    def on_branch(origin: Point, value: float) -> Point:
        way = value - origin.elastic
        stress = float(np.copysign(notch_range(abs(way), k, rule), way))
        strain = stress / k.modulus if rule == "elastic" else float(np.copysign(branch_strain(abs(stress), k), way))
        return Point(value, origin.stress + stress, origin.strain + strain)

    def drawn(origin: Point | None, here: Point, value: float) -> Point:
        for x in np.linspace(here.elastic, value, points)[1:]:
            way.append(on_curve(x) if origin is None else on_branch(origin, x))
        return way[-1]

    here = on_curve(residual)
    way, turning, closed = [here], [here], []
    targets = [float(value) + residual for value in elastic]
    outward = not targets or (targets[0] - residual) * residual >= 0.0
    opened = [] if outward else [here]
    for value in targets:
        while opened:
            origin = opened[-1]
            if len(opened) > 1:
                parent = opened[-2]
                if abs(value - origin.elastic) < abs(parent.elastic - origin.elastic):
                    break
                drawn(origin, here, parent.elastic)
                closed.append(Loop(*sorted((origin, parent), key=lambda point: point.elastic)))
                here, opened = parent, opened[:-2]
            elif value * origin.elastic < 0.0 and abs(value) > abs(origin.elastic):
                here, opened = drawn(origin, here, -origin.elastic), []
            else:
                break
        here = drawn(opened[-1] if opened else None, here, value)
        opened = [*opened, here]
        turning.append(here)
    return Path(
        turning=tuple(turning),
        stress=np.array([point.stress for point in way]),
        strain=np.array([point.strain for point in way]),
        closed=tuple(closed),
    )

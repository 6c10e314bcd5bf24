"""Speed of the whole chain against counting every location's own history.

    python -m tests.benchmarks.chain_speed

The obvious script maps the demo's whole stress history to each location's hole edge, counts it with the `rainflow`
package as a repeating block (started at its largest absolute value and closed) and sums its damage, all cycles at once.
It does so for the four lives of each location that `estimate` gives, with the maps and curves taken as found: mapping,
counting and summing alone are held against all of `estimate`. Both are timed in one run; the ratio for the route of the
case alone is told as well.
"""

from __future__ import annotations

import gc
import time
from dataclasses import dataclass

import numpy as np
import rainflow

import fatigue
from fatigue.loads import CountedLoads
from spectra import History

REPEATS = 5


@dataclass(frozen=True)
class Comparison:
    """Seconds of both, and how far the lives are apart at most."""

    points: int
    counted: int
    estimate: float
    with_count: float
    obvious: float
    one_route: float
    difference: float

    @property
    def ratio(self) -> float:
        """Obvious script over `estimate` with the spectrum counted."""
        return self.obvious / self.estimate


def obvious_lives(history, levels, peaks, curves, locations):
    """Return lives by counting each location's own history with the package."""
    lives = []
    for i in locations:
        local = np.interp(history.values, levels, peaks[i])
        start = int(np.argmax(np.abs(local)))
        closed = np.concatenate([local[start:], local[: start + 1]])
        cycles = np.array([cycle[:3] for cycle in rainflow.extract_cycles(closed.tolist())])
        half, mean, count = cycles[:, 0] / 2, cycles[:, 1], cycles[:, 2]
        life = curves.only(i).life((mean - half)[None], (mean + half)[None])[0]
        lives.append(history.flights / (count / life).sum())
    return np.array(lives)


def compare(repeats=REPEATS, locations=None, points=None):
    """Time both on the demo.

    Parameters
    ----------
    repeats : int
    locations : sequence of int, optional
        Those the obvious script does, all if not given; its time is then taken in proportion.
    points : int, optional
        Points of the history to keep, all if not given.
    """
    case = fatigue.read_case(fatigue.demo_case())
    loads = fatigue.count_loads(case)
    if points is not None:
        history = History(loads.history.values[:points], 100.0, "a part of the demo's")
        loads = CountedLoads(loads.name, history.cycles(), history)
    estimate = fatigue.estimate(case, loads)
    gc.collect()
    own = median(lambda: fatigue.estimate(case, loads), repeats)
    counted_too = median(lambda: fatigue.estimate(case), max(1, repeats // 2)) if points is None else float("nan")
    every = range(estimate.joint.row.size)
    chosen = list(every if locations is None else locations)
    obvious, difference = {}, 0.0
    for name, route in estimate.routes.items():
        start = time.perf_counter()
        lives = obvious_lives(loads.history, estimate.local.levels, route.peak, estimate.curves, chosen)
        obvious[name] = (time.perf_counter() - start) * len(every) / len(chosen)
        difference = max(difference, float(np.abs(lives / route.life[chosen] - 1).max()))
    one = obvious[case.life.credit]
    return Comparison(
        loads.history.values.size, len(loads.cycles), own, counted_too, sum(obvious.values()), one, difference
    )


def median(work, repeats):
    """Return the median time of some work."""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return float(np.median(times))


def main():
    found = compare()
    print(f"{found.points:,} points, {found.counted:,} different cycles")
    print(f"estimate, spectrum counted   {1e3 * found.estimate:10.1f} ms")
    print(f"estimate, counting as well   {1e3 * found.with_count:10.1f} ms")
    print(f"the obvious script           {1e3 * found.obvious:10.0f} ms: {found.ratio:.0f} times; wanted over 50")
    print(
        f"  for one route alone        {1e3 * found.one_route:10.0f} ms: {found.one_route / found.estimate:.0f} times"
    )
    print(f"lives differ by              {found.difference:10.1e}; wanted under 1e-9")


if __name__ == "__main__":
    main()

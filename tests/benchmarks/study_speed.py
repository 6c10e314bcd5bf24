"""Monte Carlo of the demo with contact: joints a second against the loop over `estimate`, and what the tables cost.

By hand: ``OMP_NUM_THREADS=1 python -m tests.benchmarks.study_speed [JOINTS] [PROCESSES] [CHECKED]``.
"""

from __future__ import annotations

import resource
import sys
import time
from concurrent.futures import ProcessPoolExecutor

import numpy as np

import fatigue
from fatigue.batch import Batch, direct_life
from fatigue.spreads import Spreads, draw_sample
from fatigue.sweeps import parse_vary, sweep
from fatigue.variation import Variation

LOOPED = 20


def solved(variants: Variation) -> np.ndarray:
    """Return the shortest life of every variant; a process of its own reads and estimates the case anew."""
    base = fatigue.estimate(fatigue.read_case(fatigue.demo_case()))
    return np.nanmin(Batch(base, variants).lives().life, axis=1)


def measure(joints: int = 100_000, processes: int = 2, checked: int = 500) -> dict[str, float]:
    """Return seconds, seconds a joint of the loop, their ratio, memory, errors against direct solutions."""
    base = fatigue.estimate(fatigue.read_case(fatigue.demo_case()))
    sample = draw_sample(base.case.splice, Spreads(), joints, 1)
    begin = time.perf_counter()
    for i in range(LOOPED):
        direct_life(base, sample.variants, i)
    loop = (time.perf_counter() - begin) / LOOPED
    parts = [np.asarray(part) for part in np.array_split(np.arange(joints), processes)]
    begin = time.perf_counter()
    if processes == 1:
        life = solved(sample.variants)
    else:
        with ProcessPoolExecutor(processes) as pool:
            life = np.concatenate(list(pool.map(solved, [sample.variants.part(part) for part in parts])))
    seconds = time.perf_counter() - begin
    some = np.random.default_rng(2).choice(joints, min(checked, joints), replace=False)
    error = np.array([abs(life[i] / direct_life(base, sample.variants, i).min() - 1) for i in some.tolist()])
    begin = time.perf_counter()
    sweep(base, parse_vary(["row_spacing_mm=16:32:50", "pitch_mm=16:32:50"]), checked=0)
    swept = time.perf_counter() - begin
    kilobytes = max(resource.getrusage(who).ru_maxrss for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN))
    return {
        "joints": joints,
        "processes": processes,
        "seconds": seconds,
        "loop_seconds_a_joint": loop,
        "times_the_loop": loop * joints / seconds,
        "largest_process_MB": kilobytes / 1024,
        "error_median_percent": 100 * float(np.median(error)),
        "error_worst_percent": 100 * float(error.max()),
        "sweep_50_by_50_seconds": swept,
    }


if __name__ == "__main__":
    for name, value in measure(*(int(word) for word in sys.argv[1:])).items():
        print(f"{name:<26}{value:,.4g}")

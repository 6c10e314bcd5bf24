"""Counting at scale: python -m tests.benchmarks.counting_speed [values in the memory map].

Ratios within one run. The memory map is written once to a temporary file and counted in a process of its own, whose
peak memory is read from the system.
"""

from __future__ import annotations

import subprocess
import sys
import tempfile
from collections.abc import Callable
from pathlib import Path
from time import perf_counter

import numpy as np
import rainflow

import spectra

PROGRAM = """
import sys, time
import numpy as np
import spectra
values = np.load(sys.argv[1], mmap_mode="r")
begin = time.perf_counter()
found = spectra.count_long(values)
spent = time.perf_counter() - begin
peak = next(line.split()[1] for line in open("/proc/self/status") if line.startswith("VmHWM"))
print(spent, int(peak) / 1024, found.cycles.total)
"""


def walk(size: int, seed: int = 1) -> np.ndarray:
    """Return noise about a slow wave, as a gauge records it, in steps of 0.01 MPa."""
    random = np.random.default_rng(seed)
    return (60 + 25 * np.sin(np.arange(size) / 5e3) + random.normal(0, 6, size)).round(2)


def adversaries(size: int) -> dict[str, np.ndarray]:
    """Return histories that make counting hard."""
    swing = np.where(np.arange(size) % 2 == 0, 1.0, -1.0)
    rising = np.arange(size, dtype=np.float64)
    return {
        "spiral out": swing * rising,
        "spiral in": swing * rising[::-1],
        "full nest": swing * np.concatenate([rising[: size // 2][::-1], rising[: size - size // 2]]),
        "all ties": swing * 10.0,
        "monotone": rising,
    }


def seconds(work: Callable[[], object], repeats: int = 3) -> float:
    """Return the best of a few times."""
    times = []
    for _ in range(repeats):
        begin = perf_counter()
        work()
        times.append(perf_counter() - begin)
    return min(times)


def against_package(size: int, looped: int) -> tuple[float, float, float]:
    """Return values a second by `spectra.count`, by `rainflow.extract_cycles`, and by reading the array once."""
    values = walk(size)
    few = values[:looped].tolist()
    own = size / seconds(lambda: spectra.count(values))
    package = looped / seconds(lambda: sum(1 for _ in rainflow.extract_cycles(few)), 1)
    read = size / seconds(lambda: values.sum())
    return own, package, read


def from_map(folder: Path, size: int, block: int = 10_000_000) -> tuple[float, float]:
    """Return seconds and peak memory [MB] of counting a memory map."""
    path = folder / "history.npy"
    stored = np.lib.format.open_memmap(path, "w+", np.float64, (size,))
    for begin in range(0, size, block):
        part = stored[begin : begin + block]
        part[:] = walk(part.size, begin)
    stored.flush()
    del stored
    runs = []
    for _ in range(2):  # the second finds as much of the file in memory as the system keeps
        done = subprocess.run([sys.executable, "-c", PROGRAM, str(path)], capture_output=True, text=True, check=True)
        runs.append(tuple(map(float, done.stdout.split()[:2])))
    path.unlink()
    return min(spent for spent, _ in runs), max(peak for _, peak in runs)


def from_csv(folder: Path, rows: int) -> tuple[float, float]:
    """Return seconds of reading a CSV file and of counting what was read."""
    path = folder / "history.csv"
    with path.open("w") as text:
        text.write("stress_MPa\n")
        for begin in range(0, rows, 1_000_000):
            text.write("\n".join(map(str, walk(min(1_000_000, rows - begin), begin))) + "\n")
    begin = perf_counter()
    recording = spectra.read_recording(path, "stress_MPa")
    reading = perf_counter() - begin
    begin = perf_counter()
    spectra.count_long(recording.values)
    return reading, perf_counter() - begin


def main() -> None:
    """Print all of it."""
    own, package, read = against_package(10_000_000, 400_000)
    print(f"10 million values: {own / 1e6:.1f} million a second, {own / package:.0f} times the package on one core;")
    print(f"  reading the array once goes at {read / 1e6:.0f} million a second")
    random_case = walk(1_000_000)
    usual = seconds(lambda: spectra.count(random_case))
    for name, values in adversaries(1_000_000).items():
        spent = seconds(lambda values=values: spectra.count(values))
        print(f"{name:12} 1 million: {spent / usual:.1f} times the random case")
    largest = int(float(sys.argv[1])) if len(sys.argv) > 1 else 100_000_000
    with tempfile.TemporaryDirectory() as folder:
        rates = {}
        for size in (10_000_000, largest):
            spent, peak = from_map(Path(folder), size)
            rates[size] = spent / size
            print(f"memory map of {size:,}: {spent:.1f} s, peak {peak:.0f} MB")
        print(f"  time a value {100 * (rates[largest] / rates[10_000_000] - 1):+.0f} % of that of 10 million")
        reading, counting = from_csv(Path(folder), 10_000_000)
        print(
            f"CSV of 10 million rows: read in {reading:.1f} s, counted in {counting:.2f} s ({counting / reading:.3f})"
        )


if __name__ == "__main__":
    main()

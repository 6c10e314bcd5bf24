"""Make the shipped, invented recording: six flights of one strain gauge, with the faults recorders have.

Run by hand: python -m tests.unit.spectra.recorded_six_flights
"""

from importlib import resources

import numpy as np

NAME = "recorded-six-flights.csv"
STEP = 4
"""Seconds between values."""
PER_KPA, PER_G, AT_REST = 1.4, 9.0, 2.0
"""Stress per cabin pressure, per g of normal acceleration, and at rest [MPa]."""
CRUISE = 55.0
"""Cabin differential [kPa]."""


def rough(random, size, scale):
    """Return normal acceleration in turbulence: noise that forgets half of itself in two values."""
    out = np.zeros(size)
    for i in range(1, size):
        out[i] = 0.7 * out[i - 1] + scale * random.normal()
    return 1.0 + out


def recording_text():
    """Return the file: semicolons, decimal commas, two rows before the header, a row of units below it."""
    random = np.random.default_rng(20261205)
    cabin, nz = [], []
    for _ in range(6):
        ground, climb, cruise, descent = random.integers([90, 220, 380, 230], [160, 290, 640, 290])
        cabin += [np.zeros(ground), np.linspace(0, CRUISE, climb), np.full(cruise, CRUISE)]
        cabin.append(np.linspace(CRUISE, 0, descent))
        worse = random.uniform(0.8, 1.6)
        nz += [rough(random, ground, 0.03), rough(random, climb, 0.13 * worse), rough(random, cruise, 0.07 * worse)]
        nz.append(rough(random, descent, 0.15 * worse))
    cabin.append(np.zeros(100))
    nz.append(rough(random, 100, 0.03))
    pressure, acceleration = np.concatenate(cabin), np.concatenate(nz)
    stress = AT_REST + PER_KPA * pressure + PER_G * (acceleration - 1.0) + random.normal(0.0, 0.15, pressure.size)
    gauge = [f"{value:.2f}" for value in stress]
    gauge[1305] = "812.40"  # a spike
    gauge[2210:2222] = ["0.00"] * 12  # the gauge drops out in descent
    gauge[3500:3507] = [""] * 7  # nothing recorded
    gauge[5023] = "ERR"
    lines = ["invented recording;six flights;made for this project", "recorder 3;gauge 7"]
    lines += ["time_s;skin_stress_MPa;cabin_kPa;nz_g", "s;MPa;kPa;g"]
    for i, row in enumerate(zip(gauge, pressure, acceleration, strict=True)):
        lines.append(f"{STEP * i};{row[0]};{row[1]:.2f};{row[2]:.3f}".replace(".", ","))
    return "\n".join(lines) + "\n"


if __name__ == "__main__":
    from pathlib import Path

    Path(str(resources.files("spectra.library") / NAME)).write_text(recording_text(), encoding="utf-8")

"""Life over one or two inputs, and the value of an input that gives a wanted life."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
import pandas as pd
from numpy.typing import NDArray
from scipy.optimize import brentq

from fatigue.batch import Batch, direct_life
from fatigue.life import Estimate
from fatigue.splice import Splice
from fatigue.variation import Variation, variation
from spectra.faults import Fault, InputFaults, did_you_mean, listed
from spectra.units import split_unit, to_si

Array = NDArray[np.float64]

INPUTS = {
    "thickness_mm": "thickness of the first-loaded sheet, the others in proportion",
    "pitch_mm": "fastener spacing along a row",
    "row_spacing_mm": "distance of the first two rows, the others in proportion",
    "hole_mm": "hole of the first row, the others in proportion",
    "fit_percent": "diametral interference of every hole",
    "free_length_mm": "outer row to the next line of support",
    "scale": "factor on the remote stress",
    "flexibility": "factor on the fasteners' flexibility",
}
MOST_STEPS, MOST_VARIANTS = 400, 10_000
DIRECT_UP_TO = 24
"""Up to so many variants each is an estimate of its own, with no table."""


@dataclass(frozen=True)
class Vary:
    """One input over a span: key in SI, first and last value, number of values."""

    key: str
    first: float
    last: float
    steps: int

    @property
    def values(self) -> Array:
        """The values, evenly spaced."""
        return np.linspace(self.first, self.last, self.steps)


def parse_vary(texts: Sequence[str], source: str = "--vary") -> tuple[Vary, ...]:
    """Read ``key=first:last:steps``, one or two of them; lengths may be given in inches.

    Raises
    ------
    InputFaults
        With every fault of every text.

    Examples
    --------
    >>> parse_vary(["row_spacing_mm=16:32:9"])
    (Vary(key='row_spacing_mm', first=16.0, last=32.0, steps=9),)
    """
    faults: list[Fault] = []
    found = []
    if not 1 <= len(texts) <= 2:
        faults.append(Fault("", f"{len(texts)} inputs were given.", "Vary one or two at a time."))
    for text in texts:
        key, equals, span = text.partition("=")
        key = key.strip()
        name, unit = split_unit(key)
        si = f"{name}_mm" if unit == "in" else key
        if not equals:
            faults.append(Fault(text, "there is no = in it.", "Write key=first:last:steps, as pitch_mm=16:32:9."))
            continue
        if si not in INPUTS:
            faults.append(Fault(key, "cannot be varied.", did_you_mean(key, INPUTS)))
            continue
        parts = span.split(":")
        try:
            first, last, steps = float(parts[0]), float(parts[1]), int(parts[2])
            good = len(parts) == 3 and np.isfinite([first, last]).all()
        except (ValueError, IndexError):
            good = False
        if not good:
            faults.append(Fault(key, f"{span!r} is not first:last:steps.", "Write two numbers and a count: 16:32:9."))
            continue
        if unit == "in":
            first, last = to_si(first, "in"), to_si(last, "in")
        if first > last:
            faults.append(Fault(key, f"the span runs backwards, from {first:g} to {last:g}.", "Smaller value first."))
        elif first == last:
            faults.append(Fault(key, f"the span is one point, {first:g}.", "Give two different ends."))
        if steps < 2:
            faults.append(Fault(key, f"{steps} step is no sweep.", "Take 2 or more."))
        elif steps > MOST_STEPS:
            faults.append(Fault(key, f"{steps} steps are too many.", f"Take {MOST_STEPS} or fewer."))
        if si != "fit_percent" and first <= 0:
            faults.append(Fault(key, f"{first:g} is not above zero.", "Start above zero."))
        if si == "fit_percent" and not -5 <= first <= last <= 5:
            faults.append(Fault(key, f"{first:g} to {last:g} % is outside -5 to 5 %.", "It is percent of the hole."))
        found.append(Vary(si, first, last, steps))
    if len({v.key for v in found}) < len(found):
        faults.append(Fault(found[0].key, "is varied twice.", "Name two different inputs."))
    if not faults and np.prod([v.steps for v in found]) > MOST_VARIANTS:
        faults.append(Fault("", f"more than {MOST_VARIANTS} variants.", "Take fewer steps."))
    if faults:
        raise InputFaults(source, faults)
    return tuple(found)


def own_value(base: Estimate, key: str) -> float:
    """Return the case's own value of an input."""
    splice = base.case.splice
    values = {
        "thickness_mm": lambda: splice.sheets[splice.first_loaded].thickness,
        "pitch_mm": lambda: splice.width,
        "row_spacing_mm": lambda: splice.rows[1].position - splice.rows[0].position if len(splice.rows) > 1 else 0.0,
        "hole_mm": lambda: splice.rows[0].hole_diameter,
        "fit_percent": lambda: splice.rows[0].hole.fit_percent or 0.0,
        "free_length_mm": lambda: splice.free_length,
        "scale": lambda: base.case.loads.scale,
        "flexibility": lambda: 1.0,
    }
    return float(values[key]())


def variants_of(base: Estimate, given: dict[str, Array]) -> Variation:
    """Return variants with inputs at given values, each of shape (n,)."""
    splice = base.case.splice
    names = {"thickness_mm": "thickness", "pitch_mm": "pitch", "row_spacing_mm": "row_spacing", "hole_mm": "hole",
             "free_length_mm": "free_length", "scale": "load", "flexibility": "flexibility"}  # fmt: skip
    count = next(iter(given.values())).size
    made: dict[str, Array] = {}
    for key, values in given.items():
        if key == "fit_percent":
            own = np.array([row.hole.fit_percent or 0.0 for row in splice.rows])
            made["fit"] = values[:, None] - own
        else:
            made[names[key]] = values / own_value(base, key)
    return variation(splice, count, **made)


def check_geometry(splice: Splice, variants: Variation, source: str = "--vary") -> None:
    """Refuse variants that cannot be built.

    Raises
    ------
    InputFaults
    """
    faults = []
    for r, row in enumerate(splice.rows):
        x = row.hole_diameter * variants.hole[:, r] / (row.pitch * variants.pitch)
        if x.max() >= 0.6:
            faults.append(
                Fault(
                    f"row {row.name!r}",
                    f"the hole takes {100 * x.max():.0f} % of the pitch at one end of the sweep.",
                    "The contact is solved up to 60 %: take a wider pitch or a smaller hole.",
                )
            )
        if (sink := row.countersink) is not None:
            t = splice.sheets[sink.sheet].thickness_at(r) * variants.thickness[:, sink.sheet]
            if t.min() <= sink.depth:
                faults.append(
                    Fault(
                        f"row {row.name!r}.countersink",
                        f"its depth of {sink.depth:g} mm goes through a sheet of {t.min():.3g} mm.",
                        "Sweep thicker sheets only.",
                    )
                )
    if np.any(variants.row_spacing != 1.0) and len(splice.rows) < 2:
        faults.append(Fault("row_spacing_mm", "the splice has one row.", "Vary something else."))
    if faults:
        raise InputFaults(source, faults)


@dataclass(frozen=True, eq=False)
class Swept:
    """Life over one or two inputs.

    Parameters
    ----------
    base : Estimate
    inputs : tuple of Vary
    life : ndarray, shape (n,) or (n, k), then (L,)
        [flights]
    direct : bool
        Whether each is an estimate of its own, without a table.
    check : ndarray
        Table over direct life less one, on a few variants; empty where all are direct.
    """

    base: Estimate
    inputs: tuple[Vary, ...]
    life: Array
    direct: bool
    check: Array

    @property
    def splice(self) -> Array:
        """Shortest life."""
        return np.asarray(self.life.min(axis=-1))

    @property
    def governing(self) -> NDArray[np.int64]:
        """Index of the location that governs; of lives alike but for rounding, the first."""
        return np.asarray(np.argmin(np.round(np.log10(np.maximum(self.life, 1e-300)), 6), axis=-1))

    def frame(self) -> pd.DataFrame:
        """Return a line per variant: the inputs, `life_flights, row, sheet` and every location's life."""
        splice = self.base.case.splice
        grid = np.meshgrid(*[v.values for v in self.inputs], indexing="ij")
        frame = pd.DataFrame({v.key: g.ravel() for v, g in zip(self.inputs, grid, strict=True)})
        places = [splice.locations[i] for i in self.governing.ravel()]
        frame["life_flights"] = self.splice.ravel()
        frame["row"] = [splice.rows[r].name for r, _ in places]
        frame["sheet"] = [splice.sheets[s].name for _, s in places]
        for i, (r, s) in enumerate(splice.locations):
            name = f"life_{splice.rows[r].name}_{splice.sheets[s].name}_flights"
            frame[name] = self.life.reshape(-1, self.life.shape[-1])[:, i]
        return frame


def sweep(base: Estimate, inputs: Sequence[Vary], checked: int = 5) -> Swept:
    """Return the life of every location over one or two inputs.

    Parameters
    ----------
    base : Estimate
    inputs : sequence of Vary
    checked : int
        Variants of a table sweep that are solved directly as well.
    """
    grid = np.meshgrid(*[v.values for v in inputs], indexing="ij")
    variants = variants_of(base, {v.key: g.ravel() for v, g in zip(inputs, grid, strict=True)})
    check_geometry(base.case.splice, variants)
    direct = len(variants) <= DIRECT_UP_TO
    errors = np.empty(0)
    if direct:
        life = np.array([direct_life(base, variants, i) for i in range(len(variants))])
    else:
        life = Batch(base, variants).lives(everything=True).life
        some = np.unique(np.linspace(0, len(variants) - 1, checked).astype(np.int64)) if checked else np.empty(0, int)
        errors = np.array([life[i].min() / direct_life(base, variants, i).min() - 1 for i in some.tolist()])
    return Swept(base, tuple(inputs), life.reshape(*grid[0].shape, -1), direct, errors)


def reach(base: Estimate, vary: Vary, flights: float) -> list[float]:
    """Return every value of an input within its span that gives a life, each bracketed between the sweep's values.

    Solved with `estimate` itself, no table. Two crossings between neighbouring values of the sweep are not seen.

    Raises
    ------
    InputFaults
        If the life is not above zero or nowhere reached.
    """
    if not (np.isfinite(flights) and flights > 0):
        raise InputFaults("--reach", [Fault("reach", f"{flights:g} flights are no life.", "Give a number above 0.")])
    life = sweep(base, [vary], checked=0).splice
    values = vary.values

    def over(value: float) -> float:
        one = variants_of(base, {vary.key: np.array([value])})
        return float(np.log(min(direct_life(base, one, 0).min(), 1e300) / flights))

    ends = np.log(np.minimum(life, 1e300) / flights)
    found = []
    for (a, b), (fa, fb) in zip(pairwise(values), pairwise(ends), strict=True):
        if fa == 0.0:
            found.append(float(a))
        elif fa * fb < 0:
            low, high = over(float(a)), over(float(b))
            if low * high < 0:
                found.append(float(brentq(over, a, b, xtol=1e-6 * abs(b - a) + 1e-9, rtol=1e-8)))
    if ends[-1] == 0.0:
        found.append(float(values[-1]))
    if not found:
        span = listed([f"{life.min():,.0f}", f"{life.max():,.0f}"], "and")
        raise InputFaults(
            "--reach",
            [
                Fault(
                    vary.key,
                    f"no value from {vary.first:g} to {vary.last:g} gives {flights:,.0f} flights: the life stays "
                    f"between {span}.",
                    "Widen the span, or change something else as well.",
                )
            ],
        )
    return found

"""Laps made up by Hypothesis, written as the text of a case."""

from __future__ import annotations

from dataclasses import dataclass, replace
from pathlib import Path

from hypothesis import strategies as st

import fatigue

INCH, KSI = 25.4, 6.894757293168361
CREDITS = ("none", "practice")


@dataclass(frozen=True)
class Lap:
    """A lap in mm and MPa; `blocks` are (max, min, cycles)."""

    thickness: tuple[float, float] = (1.2, 1.2)
    diameter: float = 4.0
    pitch: float = 20.0
    spacing: tuple[float, ...] = (20.0, 20.0)
    free: float = 150.0
    fits: tuple[float, ...] = (0.2, 0.2, 0.2)
    blocks: tuple[tuple[float, float, float], ...] = ((95.0, 0.0, 1.0),)
    credit: str = "none"
    scale: float = 1.0
    damage_sum: float = 1.0
    flexibility: str = "huth"

    def text(self, inch: bool = False) -> str:
        """Write the case, in mm and MPa or in inches and ksi."""
        unit, length, stress, pressure = ("in", INCH, "ksi", KSI) if inch else ("mm", 1.0, "MPa", 1.0)

        def of(name: str, value: float) -> str:
            return f"{name}_{unit} = {value / length!r}"

        blocks = ", ".join(
            f"{{ max_{stress} = {high / pressure!r}, min_{stress} = {low / pressure!r}, cycles = {n!r} }}"
            for high, low, n in self.blocks
        )
        lines = [
            'title = "lap"',
            "[loads]",
            f"blocks = [ {blocks} ]",
            f"scale = {self.scale!r}",
            "[splice]",
            'kind = "lap"',
            f'flexibility = "{self.flexibility}"',
            of("pitch", self.pitch),
            of("free_length", self.free),
            "[life]",
            f'credit = "{self.credit}"',
            f"damage_sum = {self.damage_sum!r}",
        ]
        for name, thickness in zip(("upper", "lower"), self.thickness, strict=True):
            lines += ["[[sheet]]", f'name = "{name}"', 'material = "2024-T3 bare sheet"', of("thickness", thickness)]
        for i, at in enumerate(self.places):
            lines += ["[[row]]", f'name = "{i}"', of("hole", self.diameter), of("at", at)]
            lines += ['fastener = "solid-rivet-2117"', f'hole = "h{i}"']
        for i, fit in enumerate(self.fits):
            lines += [f"[hole.h{i}]", f"fit_percent = {fit!r}"]
        return "\n".join(lines)

    @property
    def places(self) -> list[float]:
        """Positions of the rows [mm]."""
        return [sum(self.spacing[:i]) for i in range(len(self.spacing) + 1)]

    def case(self, inch: bool = False) -> fatigue.Case:
        """Read the case."""
        return fatigue.parse_case(self.text(inch), "lap.toml", Path())

    def estimate(self, inch: bool = False) -> fatigue.Estimate:
        """Estimate it."""
        return fatigue.estimate(self.case(inch))

    def life(self) -> list[float]:
        """Return the lives by the case's route, in the order of the locations."""
        return self.estimate().route.life

    def mirrored(self) -> Lap:
        """Return the lap turned about the axis across the load: sheets and rows in reverse, S in the other sheet."""
        first, second = self.thickness
        return replace(
            self,
            thickness=(second, first),
            spacing=self.spacing[::-1],
            fits=self.fits[::-1],
            scale=self.scale * first / second,
        )

    def larger(self, factor: float) -> Lap:
        """Return the lap with all lengths multiplied."""
        return replace(
            self,
            thickness=tuple(factor * t for t in self.thickness),
            diameter=factor * self.diameter,
            pitch=factor * self.pitch,
            spacing=tuple(factor * s for s in self.spacing),
            free=factor * self.free,
        )


def numbers(low: float, high: float) -> st.SearchStrategy[float]:
    """Return numbers of three decimals, so that failures read well."""
    return st.integers(round(1000 * low), round(1000 * high)).map(lambda n: n / 1000)


# few ratios of hole to pitch: the sheet around a hole is solved once for each
pitches = st.sampled_from([16.0, 20.0, 25.0])


@st.composite
def laps(draw: st.DrawFn) -> Lap:
    """Draw a lap of one to four rows with unequal sheets."""
    rows = draw(st.integers(1, 4))
    return Lap(
        thickness=(draw(numbers(0.8, 3.0)), draw(numbers(0.8, 3.0))),
        diameter=4.0,
        pitch=draw(pitches),
        spacing=tuple(draw(numbers(12.0, 40.0)) for _ in range(rows - 1)),
        free=draw(numbers(20.0, 400.0)),
        fits=tuple(draw(numbers(-0.3, 0.6)) for _ in range(rows)),
        blocks=((draw(numbers(60.0, 140.0)), draw(numbers(-30.0, 50.0)), 1.0),),
        credit=draw(st.sampled_from(CREDITS)),
        flexibility=draw(st.sampled_from(["huth", "swift", "tate-rosenfeld"])),
    )

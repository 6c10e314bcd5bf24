"""The tables of a case file: keys, types, defaults and allowed ranges, in SI keys.

Every dimensional key ends in its SI unit; `fatigue.case.keys` has already turned inch-pound keys into these.
"""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import BaseModel, ConfigDict, Field

Length = Annotated[float, Field(gt=0, le=1e5)]
Size = Annotated[float, Field(ge=0.01, le=1000)]
"""Of a thickness or a hole; outside this a joint is not one of sheets and fasteners [mm]."""
Modulus = Annotated[float, Field(ge=1e3, le=1e6)]
"""From soft plastics to beyond every metal, so that a value in GPa is caught [MPa]."""
Flexibility = Annotated[float, Field(ge=1e-10, le=1)]
"""[mm/N]"""
Fraction = Annotated[float, Field(ge=0, le=1)]
Text = Annotated[str, Field(min_length=1, max_length=200)]
Name = Annotated[str, Field(min_length=1, max_length=40, pattern=r"^\P{C}*$")]
"""Of a row or sheet: short enough for a figure, without control characters."""


class Table(BaseModel):
    """A strict table: no unknown key, no coercion, no NaN or infinity."""

    model_config = ConfigDict(strict=True, extra="forbid", frozen=True, allow_inf_nan=False)


class ChannelTable(Table):
    """A column of a recording with its factor: remote gross stress [MPa] per unit of the column."""

    column: Text
    factor: float


class HistoryTable(Table):
    """A recorded history of the remote gross stress, or of columns whose sum it is."""

    file: Text
    column: Text = "stress_MPa"
    channels: list[ChannelTable] = Field(default_factory=list)
    flights: Annotated[float, Field(gt=0, le=1e9)] | None = None
    time: Text | None = None
    ground_below_MPa: Annotated[float, Field(ge=-1e4, le=1e4)] | None = None
    repair: list[Literal["missing", "spikes", "drop-outs"]] = Field(default_factory=list)


class BlockTable(Table):
    """Cycles of one flight between two remote gross stresses."""

    max_MPa: Annotated[float, Field(ge=-1e4, le=1e4)]
    min_MPa: Annotated[float, Field(ge=-1e4, le=1e4)]
    cycles: Annotated[float, Field(gt=0, le=1e12)] = 1.0


class LoadsTable(Table):
    """`[loads]`: exactly one of spectrum, history and blocks."""

    spectrum: Text | None = None
    history: HistoryTable | None = None
    blocks: Annotated[list[BlockTable], Field(min_length=1)] | None = None
    factors: dict[str, float] = Field(default_factory=dict)
    repeating: bool = True
    scale: Annotated[float, Field(gt=0, le=1e6)] = 1.0
    flown_flights: Annotated[float, Field(ge=0, le=1e12)] = 0.0


class SpliceTable(Table):
    """`[splice]`: what holds for the whole joint."""

    kind: Literal["lap", "one-strap", "two-strap", "doubler"]
    pitch_mm: Length
    free_length_mm: Length
    row_spacing_mm: Length | None = None
    to_centre_mm: Length | None = None
    edge_mm: Length | None = None
    flexibility: Literal["huth", "swift", "tate-rosenfeld"] = "huth"
    flexibility_mm_per_N: Flexibility | None = None
    bending: Literal["neutral-line", "none"] = "neutral-line"
    ends: Literal["pinned", "clamped"] = "pinned"
    concentration: Literal["row", "strip"] = "row"
    staggered: bool = False


class StepTable(Table):
    """A change of thickness in the bay after a row."""

    after_row: Text
    thickness_mm: Size


class SheetTable(Table):
    """`[[sheet]]`, in stacking order."""

    name: Name
    material: Text
    thickness_mm: Size
    role: Literal["main", "strap", "skin", "doubler"] | None = None
    from_row: Text | None = None
    to_row: Text | None = None
    steps: list[StepTable] = Field(default_factory=list)
    edge_mm: Length | None = None


class CountersinkTable(Table):
    """A countersink in one sheet of a row."""

    sheet: Text
    depth_mm: Length


class RowTable(Table):
    """`[[row]]`, in order along the load."""

    name: Name
    hole_mm: Size
    fastener: Text
    hole: Text
    at_mm: Annotated[float, Field(ge=0, le=1e6)] | None = None
    pitch_mm: Length | None = None
    edge_mm: Length | None = None
    countersink: CountersinkTable | None = None
    flexibility_mm_per_N: Flexibility | None = None
    head_fixity: Fraction = 1.0
    slack_mm: Annotated[float, Field(ge=0, le=10)] = 0.0
    friction_share: Annotated[float, Field(ge=0, lt=1)] = 0.0
    driven_head: Text | None = None


class PracticeTable(Table):
    """The two practice factors on the peak stress."""

    hole: Annotated[float, Field(gt=0, le=2)] | None = None
    filling: Annotated[float, Field(gt=0, le=2)] | None = None


class HoleTable(Table):
    """`[hole.NAME]`: how the holes were made and filled."""

    fit_percent: Annotated[float, Field(ge=-5, le=5)] | None = None
    cold_expansion_percent: Annotated[float, Field(ge=0, le=10)] = 0.0
    squeeze_ratio: Annotated[float, Field(ge=1, le=3)] | None = None
    squeeze_force_N: Annotated[float, Field(gt=0, le=1e7)] | None = None
    friction: Annotated[float, Field(ge=0, le=0.5)] = 0.0
    practice: PracticeTable = Field(default_factory=PracticeTable)


class MaterialTable(Table):
    """`[material.NAME]`: the user's own sheet material."""

    modulus_MPa: Modulus
    poisson: Annotated[float, Field(ge=0, lt=0.5)]
    yield_MPa: Annotated[float, Field(gt=0, le=1e5)]
    ultimate_MPa: Annotated[float, Field(gt=0, le=1e5)] | None = None
    curve: Text
    strain_life: Text | None = None


class FastenerTable(Table):
    """`[fastener.NAME]`: the user's own fastener."""

    kind: Literal["solid-rivet", "clearance-bolt", "close-fit-bolt", "interference-pin", "tapered-pin", "blind-rivet"]
    modulus_MPa: Modulus
    poisson: Annotated[float, Field(ge=0, lt=0.5)] = 0.33


class LifeTable(Table):
    """`[life]`: the route to the life."""

    credit: Literal["none", "practice", "contact"] = "contact"
    curve: Literal["notched", "local-strain"] = "notched"
    tail: Literal["limit", "continued", "shallower"] = "continued"
    damage_sum: Annotated[float, Field(gt=0, le=10)] = 1.0


class InspectionTable(Table):
    """`[inspection]`: from a median life to a threshold."""

    tests: Annotated[int, Field(ge=1, le=10**6)] | None = None
    scatter_log10: Annotated[float, Field(ge=0, le=2)] = 0.15
    reliability: Annotated[float, Field(gt=0, lt=1)] = 0.95
    confidence: Annotated[float, Field(gt=0, lt=1)] = 0.95
    holes_per_row: Annotated[int, Field(ge=1, le=10**6)] = 25
    use_credit: bool = False


SINGLE: dict[str, type[Table]] = {
    "loads": LoadsTable,
    "splice": SpliceTable,
    "life": LifeTable,
    "inspection": InspectionTable,
}
"""Tables that stand once."""
LISTED: dict[str, type[Table]] = {"sheet": SheetTable, "row": RowTable}
"""Arrays of tables, in order."""
NAMED: dict[str, type[Table]] = {"hole": HoleTable, "material": MaterialTable, "fastener": FastenerTable}
"""Tables of named tables."""
REQUIRED = ("title", "loads", "splice", "sheet", "row")

"""What a splice is: sheets, rows, fasteners and holes, resolved, in N, mm and MPa.

These are the plain records every later stage reads. They hold no mechanics and check nothing: `fatigue.case`
builds them from a case file it has already checked.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from fatigue.material.records import Fastener, Material

SpliceKind = Literal["lap", "one-strap", "two-strap", "doubler"]
Start = Literal["loaded", "free"]
End = Literal["out", "centre", "free"]


@dataclass(frozen=True)
class Step:
    """A change of a sheet's thickness in the bay after a row."""

    after_row: int
    thickness: float


@dataclass(frozen=True)
class Sheet:
    """One sheet of the stack.

    Parameters
    ----------
    name : str
    material : Material
    thickness : float
        At the sheet's first row and up to its first step [mm].
    first_row, last_row : int
        Rows the sheet spans, counted from 0 along the load, both included.
    start, end : str
        What happens before the first and after the last row of the splice: the remote load comes in at a ``loaded``
        start; it goes ``out`` at the far end of a lap, or the sheet runs on to the line of symmetry at the ``centre``.
    role : str
        ``main``, ``strap``, ``skin``, ``doubler`` or empty (lap).
    edge : float
        Distance from the last hole to the sheet's free end [mm].
    steps : tuple of Step
        In order along the load.
    """

    name: str
    material: Material
    thickness: float
    first_row: int
    last_row: int
    start: Start = "free"
    end: End = "free"
    role: str = ""
    edge: float = 0.0
    steps: tuple[Step, ...] = ()

    def spans(self, row: int) -> bool:
        """Tell whether the sheet has a hole in the row."""
        return self.first_row <= row <= self.last_row

    def thickness_after(self, row: int) -> float:
        """Return the thickness in the bay that follows a row [mm]; row -1 is the part before the splice."""
        value = self.thickness
        for step in self.steps:
            if step.after_row <= row:
                value = step.thickness
        return value

    def thickness_at(self, row: int) -> float:
        """Return the thickness at the holes of a row: the thinner of the bays beside it that the sheet spans [mm]."""
        before, after = self.thickness_after(row - 1), self.thickness_after(row)
        return min(before, after)


@dataclass(frozen=True)
class Practice:
    """The two practice factors of route `practice` and where they come from."""

    hole: float = 1.0
    filling: float = 1.0
    source: str = ""


@dataclass(frozen=True)
class HoleCondition:
    """How the holes of a row were made and filled.

    Parameters
    ----------
    name : str
    fit_percent : float or None
        Diametral interference, percent of the hole diameter; negative is clearance. None: from the squeeze ratio, else
        snug.
    cold_expansion_percent : float
        Mandrel expansion before the fastener goes in.
    squeeze_ratio : float or None
        Driven-head diameter over shank diameter (rivets).
    friction : float
        Coefficient between pin and hole, as a stated multiplier of route `contact`.
    practice : Practice
    """

    name: str
    fit_percent: float | None = None
    cold_expansion_percent: float = 0.0
    squeeze_ratio: float | None = None
    friction: float = 0.0
    practice: Practice = field(default_factory=Practice)


@dataclass(frozen=True)
class Countersink:
    """A countersink in one sheet of a row."""

    sheet: int
    depth: float


@dataclass(frozen=True)
class Row:
    """One row of fasteners across the load.

    Parameters
    ----------
    name : str
    position : float
        Along the load, from the first row [mm].
    hole_diameter : float
        Also the shank diameter, the fit being a small fraction of it [mm].
    pitch : float
        Spacing of the fasteners along this row [mm].
    fastener : Fastener
    hole : HoleCondition
    countersink : Countersink or None
    flexibility : float or None
        Measured flexibility per total fastener load [mm/N]; None takes the splice's formula.
    head_fixity : float
        1 the heads hold the shank straight, 0 a free pin.
    slack : float
        Movement of the fastener before it takes load [mm].
    friction_share : float
        Share of the row's load that the clamped faces carry past its fasteners: off their bearing stress.
    driven_sheet : int or None
        Sheet under the driven head of a rivet; None: the last of the row.
    """

    name: str
    position: float
    hole_diameter: float
    pitch: float
    fastener: Fastener
    hole: HoleCondition
    countersink: Countersink | None = None
    flexibility: float | None = None
    head_fixity: float = 1.0
    slack: float = 0.0
    friction_share: float = 0.0
    driven_sheet: int | None = None


@dataclass(frozen=True)
class Splice:
    """A fastened splice as the engine sees it.

    Parameters
    ----------
    kind : str
        ``lap``, ``one-strap``, ``two-strap`` or ``doubler``.
    sheets : tuple of Sheet
        In stacking order, top first.
    rows : tuple of Row
        In order along the load.
    width : float
        Common width W all loads are taken over: the splice's fastener pitch [mm].
    free_length : float
        Outer row to the next line of support, for bending [mm].
    to_centre : float
        Inner row to the line of symmetry; 0 for a lap [mm].
    flexibility : str
        ``huth``, ``swift`` or ``tate-rosenfeld``.
    bending : str
        ``neutral-line`` or ``none``.
    ends : str
        ``pinned`` or ``clamped``: the ends of the free length.
    edge : str
        ``row``: the holes of a row shield each other; ``strip``: each strip stands alone.
    staggered : bool
        Whether the holes of each row stand between those of the next rather than in line with them. Rows are taken one
        by one either way; it only says what that leaves out.
    """

    kind: SpliceKind
    sheets: tuple[Sheet, ...]
    rows: tuple[Row, ...]
    width: float
    free_length: float
    to_centre: float = 0.0
    flexibility: str = "huth"
    bending: str = "neutral-line"
    ends: str = "pinned"
    edge: str = "row"
    staggered: bool = False

    @property
    def first_loaded(self) -> int:
        """Index of the sheet whose remote gross stress is S."""
        return next(i for i, sheet in enumerate(self.sheets) if sheet.start == "loaded")

    def driven_sheet(self, row: int) -> int:
        """Return the sheet under the driven heads of a row."""
        given = self.rows[row].driven_sheet
        return max(s for s, sheet in enumerate(self.sheets) if sheet.spans(row)) if given is None else given

    @property
    def locations(self) -> tuple[tuple[int, int], ...]:
        """Every (row, sheet) pair that has a hole, row by row."""
        return tuple((r, s) for r in range(len(self.rows)) for s, sheet in enumerate(self.sheets) if sheet.spans(r))

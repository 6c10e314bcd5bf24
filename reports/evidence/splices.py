"""Splices made without a case file. E = E_f = 72 000 MPa, nu 0.33 unless said."""

from __future__ import annotations

from fatigue.material.records import Fastener, Material
from fatigue.splice import HoleCondition, Row, Sheet, Splice

ALUMINIUM = Material("aluminium", 72e3, 0.33, 345.0, 440.0, "2024-T3 sheet")
RIVET = Fastener("rivet", "solid-rivet", 72e3, 0.33)
BOLT = Fastener("bolt", "close-fit-bolt", 205e3, 0.30)
DRILLED = HoleCondition("drilled")


def make_rows(count: int, spacing: float, diameter: float, pitch: float, fastener: Fastener = RIVET) -> tuple[Row, ...]:
    """Return rows at an even spacing."""
    return tuple(Row(f"r{i}", i * spacing, diameter, pitch, fastener, DRILLED) for i in range(count))


def make_lap(
    rows: int = 3,
    spacing: float = 20.0,
    thickness: float = 1.2,
    second: float | None = None,
    diameter: float = 4.0,
    pitch: float = 20.0,
    free: float = 150.0,
) -> Splice:
    """Return a lap of two sheets."""
    sheets = (
        Sheet("upper", ALUMINIUM, thickness, 0, rows - 1, start="loaded"),
        Sheet("lower", ALUMINIUM, second or thickness, 0, rows - 1, end="out"),
    )
    return Splice("lap", sheets, make_rows(rows, spacing, diameter, pitch), pitch, free)


def make_two_strap(
    rows: int = 3,
    spacing: float = 25.0,
    main: float = 2.0,
    strap: float = 1.2,
    pitch: float = 25.0,
    to_centre: float = 12.5,
) -> Splice:
    """Return half a butt between two straps, steel bolts."""
    sheets = (
        Sheet("outer strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
        Sheet("main", ALUMINIUM, main, 0, rows - 1, start="loaded", role="main"),
        Sheet("inner strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
    )
    return Splice("two-strap", sheets, make_rows(rows, spacing, 4.7625, pitch, BOLT), pitch, 150.0, to_centre)


def make_one_strap(
    rows: int = 2,
    spacing: float = 28.0,
    main: float = 2.0,
    strap: float = 2.0,
    pitch: float = 25.0,
    to_centre: float = 14.0,
) -> Splice:
    """Return half a butt on one strap."""
    sheets = (
        Sheet("main", ALUMINIUM, main, 0, rows - 1, start="loaded", role="main"),
        Sheet("strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
    )
    return Splice("one-strap", sheets, make_rows(rows, spacing, 4.0, pitch), pitch, 150.0, to_centre)


def make_doubler(
    rows: int = 4,
    spacing: float = 20.0,
    skin: float = 1.6,
    doubler: float = 1.6,
    pitch: float = 20.0,
    to_centre: float = 10.0,
) -> Splice:
    """Return half a doubler on a skin."""
    sheets = (
        Sheet("skin", ALUMINIUM, skin, 0, rows - 1, start="loaded", end="centre", role="skin"),
        Sheet("doubler", ALUMINIUM, doubler, 0, rows - 1, end="centre", role="doubler"),
    )
    return Splice("doubler", sheets, make_rows(rows, spacing, 4.0, pitch), pitch, 150.0, to_centre)

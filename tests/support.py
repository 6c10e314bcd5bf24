"""Splices made without a case file, for tests of the mechanics. E = E_f = 72 000 MPa, nu 0.33 unless said."""

from __future__ import annotations

from fatigue.material.records import Fastener, Material
from fatigue.splice import HoleCondition, Row, Sheet, Splice

ALUMINIUM = Material("aluminium", 72e3, 0.33, 345.0, 440.0, "2024-T3 sheet")
RIVET = Fastener("rivet", "solid-rivet", 72e3, 0.33)
BOLT = Fastener("bolt", "close-fit-bolt", 205e3, 0.30)
DRILLED = HoleCondition("drilled")


def make_rows(count, spacing, diameter, pitch, fastener=RIVET):
    return tuple(Row(f"r{i}", i * spacing, diameter, pitch, fastener, DRILLED) for i in range(count))


def make_lap(rows=3, spacing=20.0, thickness=1.2, second=None, diameter=4.0, pitch=20.0, free=150.0):
    sheets = (
        Sheet("upper", ALUMINIUM, thickness, 0, rows - 1, start="loaded"),
        Sheet("lower", ALUMINIUM, second or thickness, 0, rows - 1, end="out"),
    )
    return Splice("lap", sheets, make_rows(rows, spacing, diameter, pitch), pitch, free)


def make_two_strap(rows=3, spacing=25.0, main=2.0, strap=1.2, pitch=25.0, to_centre=12.5):
    sheets = (
        Sheet("outer strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
        Sheet("main", ALUMINIUM, main, 0, rows - 1, start="loaded", role="main"),
        Sheet("inner strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
    )
    return Splice("two-strap", sheets, make_rows(rows, spacing, 4.7625, pitch, BOLT), pitch, 150.0, to_centre)


def make_one_strap(rows=2, spacing=28.0, main=2.0, strap=2.0, pitch=25.0, to_centre=14.0):
    sheets = (
        Sheet("main", ALUMINIUM, main, 0, rows - 1, start="loaded", role="main"),
        Sheet("strap", ALUMINIUM, strap, 0, rows - 1, end="centre", role="strap"),
    )
    return Splice("one-strap", sheets, make_rows(rows, spacing, 4.0, pitch), pitch, 150.0, to_centre)


def make_doubler(rows=4, spacing=20.0, skin=1.6, doubler=1.6, pitch=20.0, to_centre=10.0):
    sheets = (
        Sheet("skin", ALUMINIUM, skin, 0, rows - 1, start="loaded", end="centre", role="skin"),
        Sheet("doubler", ALUMINIUM, doubler, 0, rows - 1, end="centre", role="doubler"),
    )
    return Splice("doubler", sheets, make_rows(rows, spacing, 4.0, pitch), pitch, 150.0, to_centre)

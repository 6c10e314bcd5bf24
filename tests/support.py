"""Splices for tests of the mechanics: those of the evidence."""

from reports.evidence.splices import (
    ALUMINIUM,
    BOLT,
    DRILLED,
    RIVET,
    make_doubler,
    make_lap,
    make_one_strap,
    make_rows,
    make_two_strap,
)

__all__ = [
    "ALUMINIUM",
    "BOLT",
    "DRILLED",
    "RIVET",
    "make_doubler",
    "make_lap",
    "make_one_strap",
    "make_rows",
    "make_two_strap",
]

"""All checks, subject after subject."""

from __future__ import annotations

from functools import cache

from reports.evidence import holes, joints, lives, loads
from reports.evidence.check import Check


@cache
def all_checks() -> tuple[Check, ...]:
    """Return every check in the order an estimate uses the methods."""
    return (*loads.checks(), *joints.checks(), *holes.checks(), *lives.checks())

"""Every published check, computed now: one list for the command `faying evidence` and for the tests."""

from reports.evidence.check import Check, Outcome, run
from reports.evidence.subjects import all_checks

__all__ = ["Check", "Outcome", "all_checks", "run"]

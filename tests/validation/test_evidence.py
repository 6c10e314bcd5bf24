"""Every published check of `faying evidence`, one test each: command and tests share the list."""

from dataclasses import replace

import pytest

from fatigue.references import references
from reports.evidence import all_checks, run
from reports.evidence.check import Check, half_a_digit


@pytest.mark.parametrize("check", all_checks(), ids=lambda check: f"{check.subject}: {check.what}")
def test_holds(check):
    (outcome,) = run([check])
    assert outcome.holds, f"printed {check.printed}, computed {outcome.computed!r}, allowed {check.tolerance:g}"


def test_every_check_can_fail():
    """A printed value moved by more than is allowed fails."""
    for check in all_checks():
        if check.within == 0.0 or check.upto:
            continue
        span = max(3 * check.tolerance, 1e-6)
        value = float(check.printed) + (span if float(check.printed) >= 0 else -span)
        low, high = replace(check, printed=repr(value), within=check.tolerance, reason="moved").span
        assert not low <= float(check.printed) <= high


def test_names_are_unique_and_sources_known():
    names = [(check.subject, check.what, check.source) for check in all_checks()]
    assert len(names) == len(set(names))
    known = references()
    assert {c.source for c in all_checks()} - set(known) == {"common practice, no source"}


def test_a_wrong_value_is_found_out():
    right = Check("a", "b", "1.0", lambda: 1.04, "kirsch-1898", "read")
    wrong = replace(right, compute=lambda: 1.06)
    assert [outcome.holds for outcome in run([right, wrong])] == [True, False]


def test_a_wide_tolerance_needs_a_reason():
    with pytest.raises(ValueError, match="needs its reason"):
        Check("a", "b", "1.0", float, "kirsch-1898", "read", within=0.3)


@pytest.mark.parametrize(("printed", "half"), [("12", 0.5), ("1.20", 0.005), ("2.83e5", 500.0)])
def test_half_a_digit(printed, half):
    assert half_a_digit(printed) == pytest.approx(half)

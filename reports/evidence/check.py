"""A check: what somebody else found, how far the digits they printed reach, and what this project computes."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Any, Literal

Kind = Literal["read", "read second-hand", "derived", "memory", "elements", "practice"]
KINDS: dict[str, str] = {
    "read": "seen in the named publication",
    "read second-hand": "seen in another publication that quotes it",
    "derived": "worked out from the named publication's equations, not with this code",
    "memory": "recalled from the named publication, not re-read",
    "elements": "finite elements made for this project",
    "practice": "a rule of the trade without a source",
}
"""How a printed value was obtained."""


@dataclass(frozen=True, eq=False)
class Check:
    """A number to compare with.

    Parameters
    ----------
    subject, what : str
    printed : str
        As printed.
    compute : callable
        Returns this project's value.
    source : str
        Key of the bibliography, or words.
    how : str
        One of `KINDS`.
    unit : str
    within : float, optional
        Largest difference; half a unit in the last printed digit if not given.
    reason : str
        Why it is wider than that.
    upto : str
        Upper end where a range is printed; `printed` is then its lower end.
    """

    subject: str
    what: str
    printed: str
    compute: Callable[[], Any]
    source: str
    how: Kind
    unit: str = ""
    within: float | None = None
    reason: str = ""
    upto: str = ""

    def __post_init__(self) -> None:
        if self.how not in KINDS:
            raise ValueError(f"{self.how} is no way to obtain a value")
        if self.within is not None and not self.reason:
            raise ValueError(f"{self.what}: a wider tolerance needs its reason")

    @property
    def tolerance(self) -> float:
        """Largest difference allowed."""
        return half_a_digit(self.printed) if self.within is None else self.within

    @property
    def span(self) -> tuple[float, float]:
        """Smallest and largest value allowed."""
        low, high = float(self.printed), float(self.upto or self.printed)
        return low - self.tolerance, high + self.tolerance


class Checks(list[Check]):
    """Checks being gathered."""

    def add(
        self,
        subject: str,
        what: str,
        printed: str,
        compute: Callable[[], Any],
        source: str,
        how: Kind = "derived",
        unit: str = "",
        within: float | None = None,
        reason: str = "",
        upto: str = "",
    ) -> None:
        """Add a check; see `Check`."""
        self.append(Check(subject, what, printed, compute, source, how, unit, within, reason, upto))


@dataclass(frozen=True, eq=False)
class Outcome:
    """A check done.

    Parameters
    ----------
    check : Check
    computed : float
    holds : bool
    """

    check: Check
    computed: float
    holds: bool

    @property
    def difference(self) -> float:
        """Computed less printed, 0 within a printed range."""
        low, high = float(self.check.printed), float(self.check.upto or self.check.printed)
        return self.computed - min(max(self.computed, low), high)


def half_a_digit(printed: str) -> float:
    """Return half a unit in the last printed digit.

    >>> half_a_digit("1.15568"), half_a_digit("398665"), half_a_digit("1.050e4")
    (5e-06, 0.5, 5.0)
    """
    exponent = Decimal(printed).as_tuple().exponent
    assert isinstance(exponent, int)
    return 0.5 * 10.0**exponent


def run(checks: Sequence[Check], on_progress: Callable[[int, int], None] | None = None) -> list[Outcome]:
    """Compute every check now."""
    done = []
    for number, check in enumerate(checks, start=1):
        value = float(check.compute())
        low, high = check.span
        # what is printed was rounded: a value just on the edge of the digit is within it
        slack = 1e-9 * max(abs(low), abs(high))
        done.append(Outcome(check, value, low - slack <= value <= high + slack))
        if on_progress is not None:
            on_progress(number, len(checks))
    return done

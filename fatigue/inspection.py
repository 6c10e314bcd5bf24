"""When to start looking at a row, and which row first."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.case.schema import InspectionTable
from fatigue.scatter import confidence_factor, first_of_many_factor

Array = NDArray[np.float64]


@dataclass(frozen=True)
class ThresholdFactor:
    """Factor from the median life of one hole to the inspection threshold of a row, and its two parts."""

    first_of_many: float
    confidence: float

    @property
    def total(self) -> float:
        """The product of both parts."""
        return self.first_of_many * self.confidence


def threshold_factor(settings: InspectionTable) -> ThresholdFactor:
    """Return the factor on the median life at which the first crack of a row is still unlikely.

    Parameters
    ----------
    settings : InspectionTable
        Reliability, holes per row, scatter; tests and confidence where the median rests on tests.
    """
    first = first_of_many_factor(settings.reliability, settings.holes_per_row, settings.scatter_log10)
    sure = 1.0
    if settings.tests is not None:
        sure = float(confidence_factor(settings.confidence, settings.tests, settings.scatter_log10))
    return ThresholdFactor(float(first), sure)


def inspection_priority(share_used: Array, threshold: Array, hidden: NDArray[np.bool_]) -> NDArray[np.int64]:
    """Return the order of inspection, 1 first.

    The largest share of the threshold used comes first; at equal share (nothing flown yet) the earlier threshold; at
    equal threshold a hidden face before a visible one.

    Parameters
    ----------
    share_used : ndarray, shape (L,)
        Flights flown over the threshold.
    threshold : ndarray, shape (L,)
        Flights at which inspection starts.
    hidden : ndarray of bool, shape (L,)
        Whether the crack starts where the eye cannot see it.
    """
    # shares that differ by rounding are the same
    used, due = (np.round(np.log10(np.clip(value, 1e-300, 1e300)), 9) for value in (share_used, threshold))
    order = np.lexsort((~hidden, due, -used))
    priority = np.empty(order.size, dtype=np.int64)
    priority[order] = np.arange(1, order.size + 1)
    return priority

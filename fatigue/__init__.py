"""Fatigue life of every fastener row and sheet of a splice.

>>> import fatigue
>>> case = fatigue.read_case(fatigue.demo_case())
>>> estimate = fatigue.estimate(case)
>>> list(estimate.rows.columns[:4])
['rank', 'row', 'sheet', 'face']
"""

from fatigue.case.build import Case, parse_case, read_case
from fatigue.case.shipped import demo_case, starter_text
from fatigue.life import Estimate, estimate
from fatigue.loads import CountedLoads, count_loads
from fatigue.splice import Splice
from spectra.faults import Fault, InputFaults

__all__ = [
    "Case",
    "CountedLoads",
    "Estimate",
    "Fault",
    "InputFaults",
    "Splice",
    "count_loads",
    "demo_case",
    "estimate",
    "parse_case",
    "read_case",
    "starter_text",
]

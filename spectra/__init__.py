"""Loads: histories, flight-by-flight spectra and block tables, counted into rainflow cycles.

>>> import spectra
>>> spectra.count([0.0, 100.0, 40.0, 80.0, 0.0]).merged().range
array([100.,  40.])
"""

from spectra.blocks import block_notes, count_blocks
from spectra.counting import count, turning_points
from spectra.cycles import Cycles
from spectra.faults import Fault, InputFaults
from spectra.history import History, read_history
from spectra.reader import read_spectrum, shipped
from spectra.spectrum import Phase, Spectrum

__all__ = [
    "Cycles",
    "Fault",
    "History",
    "InputFaults",
    "Phase",
    "Spectrum",
    "block_notes",
    "count",
    "count_blocks",
    "read_history",
    "read_spectrum",
    "shipped",
    "turning_points",
]

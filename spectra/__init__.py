"""Loads: histories, flight-by-flight spectra and block tables, counted into rainflow cycles.

>>> import spectra
>>> spectra.count([0.0, 100.0, 40.0, 80.0, 0.0]).merged().range
array([100.,  40.])
"""

from spectra.blocks import block_notes, count_blocks
from spectra.counting import count, turning_points
from spectra.cycles import Cycles
from spectra.faults import Fault, InputFaults
from spectra.flights import GroundRule
from spectra.history import History, read_history
from spectra.long import LongCount, count_long
from spectra.places import count_places
from spectra.reader import read_spectrum, shipped
from spectra.recording import Recording, read_recording
from spectra.spectrum import Phase, Spectrum

__all__ = [
    "Cycles",
    "Fault",
    "GroundRule",
    "History",
    "InputFaults",
    "LongCount",
    "Phase",
    "Recording",
    "Spectrum",
    "block_notes",
    "count",
    "count_blocks",
    "count_long",
    "count_places",
    "read_history",
    "read_recording",
    "read_spectrum",
    "shipped",
    "turning_points",
]

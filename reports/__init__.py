"""Tables, figures, the report page and the command line.

>>> import reports
>>> callable(reports.write), callable(reports.draw_section)
(True, True)
"""

from importlib import import_module
from typing import Any

_PLACES = {
    "write": "reports.writing",
    "draw_section": "reports.figures.section",
    "draw_makeup": "reports.figures.makeup",
    "draw_exceedances": "reports.figures.loads",
    "draw_damage_by_range": "reports.figures.loads",
    "draw_curve": "reports.figures.curve",
    "draw_range_mean": "reports.figures.cycles",
    "draw_ranges": "reports.figures.cycles",
    "draw_by_phase": "reports.figures.cycles",
    "draw_history": "reports.figures.history",
    "draw_life_against_fit": "reports.figures.fits",
    "draw_conditions": "reports.figures.fits",
    "draw_edge": "reports.figures.hole",
    "draw_loops": "reports.figures.loops",
    "draw_fit": "reports.figures.fit",
    "draw_family": "reports.figures.material",
    "ranked_text": "reports.tables",
}

__all__ = sorted(_PLACES)


def __getattr__(name: str) -> Any:
    # loaded on first use, so that `faying --help` does not wait for the plotting library
    if name in _PLACES:
        return getattr(import_module(_PLACES[name]), name)
    raise AttributeError(f"module 'reports' has no attribute {name!r}")

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
    "ranked_text": "reports.tables",
}

__all__ = sorted(_PLACES)


def __getattr__(name: str) -> Any:
    # loaded on first use, so that `faying --help` does not wait for the plotting library
    if name in _PLACES:
        return getattr(import_module(_PLACES[name]), name)
    raise AttributeError(f"module 'reports' has no attribute {name!r}")

"""Fastener kinds as data, and the hole conditions a comparison runs through."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib import resources
from typing import Any


@dataclass(frozen=True)
class FastenerKind:
    """What the trade knows of a kind of fastener.

    Parameters
    ----------
    name, words : str
        As in a case file, and in plain words.
    usual_fit : tuple of float
        Least and greatest usual interference over the hole diameter; negative is clearance.
    clamps, removable : str
    needs_locking : bool
    relative_cost : int
        Ordinal, 1 the cheapest in place.
    fit_source, source : str
        Where the fit and where the rest come from.
    """

    name: str
    words: str
    usual_fit: tuple[float, float]
    clamps: str
    removable: str
    needs_locking: bool
    relative_cost: int
    fit_source: str
    source: str


@dataclass(frozen=True)
class ShankStrength:
    """Ultimate shear strength of a driven or installed shank."""

    alloy: str
    driven_shear: float
    source: str
    how: str


@dataclass(frozen=True)
class Condition:
    """A hole condition to compare.

    Parameters
    ----------
    name : str
    fit : float
        Interference over the diameter; negative is clearance.
    cold_expansion : float
        Mandrel expansion over the diameter.
    words : str
    """

    name: str
    fit: float
    cold_expansion: float = 0.0
    words: str = ""


CONDITIONS = (
    Condition("open", -0.01, words="a pin so loose that it touches only where it bears"),
    Condition("clearance", -0.003, words="a usual clearance hole"),
    Condition("snug", 0.0, words="no gap and no interference"),
    Condition("light interference", 0.003, words="as a rivet well squeezed"),
    Condition("heavy interference", 0.008, words="as a tapered or a heavy straight pin"),
    Condition("cold-expanded", 0.0, 0.04, words="expanded 4 % by a mandrel, then a snug pin"),
    Condition("cold-expanded, interference", 0.003, 0.04, words="expanded 4 %, then light interference"),
)
"""What `compare` runs through by default."""

COMPARED_FITS = (-0.005, 0.01)
"""Span of the curve of life against fit."""


@cache
def _raw() -> dict[str, dict[str, Any]]:
    text = resources.files("fatigue.hole").joinpath("kinds.toml").read_text(encoding="utf-8")
    return tomllib.loads(text)


@cache
def fastener_kinds() -> dict[str, FastenerKind]:
    """Return the fastener kinds by name.

    Examples
    --------
    >>> fastener_kinds()["solid-rivet"].usual_fit
    (0.0, 0.008)
    """
    kinds = {}
    for name, entry in _raw().items():
        if name == "strength":
            continue
        low, high = entry["usual_fit_percent"]
        kinds[name] = FastenerKind(
            name=name,
            words=entry["words"],
            usual_fit=(low / 100, high / 100),
            clamps=entry["clamps"],
            removable=entry["removable"],
            needs_locking=entry["needs_locking"],
            relative_cost=entry["relative_cost"],
            fit_source=entry["fit_source"],
            source=entry["source"],
        )
    return kinds


@cache
def shank_strengths() -> dict[str, ShankStrength]:
    """Return the shear strength of installed shanks by alloy [MPa].

    References
    ----------
    MIL-HDBK-5J, from memory; key ``mil-hdbk-5j``.
    """
    return {
        alloy: ShankStrength(alloy, float(entry["driven_shear_MPa"]), entry["source"], entry["how"])
        for alloy, entry in _raw()["strength"].items()
    }

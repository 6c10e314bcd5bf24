"""The bibliography and the methods that rest on it."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib import resources

HERE = resources.files("fatigue")


@dataclass(frozen=True)
class Reference:
    """A publication or derivation and how its content was obtained."""

    key: str
    author: str
    year: int
    title: str
    where: str
    obtained: str

    def __str__(self) -> str:
        place = f", {self.where}" if self.where else ""
        return f"{self.author} ({self.year}). {self.title}{place} [{self.obtained}]"


@dataclass(frozen=True)
class Method:
    """A method of an estimate.

    Parameters
    ----------
    name, stage, formula, range : str
    keys : tuple of str
        Of the bibliography.
    code : str
        Where it is computed.
    evidence : str
        Subject of the published checks that hold it; empty where only laws and closed forms in the tests do.
    """

    name: str
    stage: str
    code: str
    evidence: str
    formula: str
    keys: tuple[str, ...]
    range: str


@cache
def references() -> dict[str, Reference]:
    """Return the bibliography by key."""
    raw = tomllib.loads(HERE.joinpath("references.toml").read_text(encoding="utf-8"))
    return {
        key: Reference(key, e["author"], e["year"], e["title"], e.get("where", ""), e["obtained"])
        for key, e in raw.items()
    }


@cache
def methods() -> tuple[Method, ...]:
    """Return the methods in the order an estimate uses them."""
    raw = tomllib.loads(HERE.joinpath("methods.toml").read_text(encoding="utf-8"))
    return tuple(Method(**{**entry, "keys": tuple(entry["keys"])}) for entry in raw["method"])

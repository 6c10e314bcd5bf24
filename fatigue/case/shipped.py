"""The case files that ship: the starter and the demo."""

from __future__ import annotations

from importlib import resources
from pathlib import Path

FOLDER = Path(str(resources.files("fatigue.case"))) / "cases"


def demo_case(name: str = "crown-lap") -> Path:
    """Return the path of a shipped demo case.

    Raises
    ------
    KeyError
        If there is none of that name.
    """
    path = FOLDER / f"{name}.toml"
    if name not in demo_names():
        raise KeyError(name)
    return path


def demo_names() -> list[str]:
    """Return the names of the shipped demo cases."""
    return sorted(path.stem for path in FOLDER.glob("*.toml") if path.stem != "starter")


def starter_text() -> str:
    """Return the commented starter case that `faying new` writes."""
    return (FOLDER / "starter.toml").read_text(encoding="utf-8")

"""Faults of a user's input: collected, reported together, in words that teach."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Any


@dataclass(frozen=True)
class Fault:
    """One thing wrong with an input.

    Parameters
    ----------
    where : str
        Path of the key, column or line, for instance ``row[2].hole_mm``.
    problem : str
        What was given and what is allowed.
    remedy : str
        What to do about it.
    """

    where: str
    problem: str
    remedy: str = ""

    def __str__(self) -> str:
        text = f"{self.where}: {self.problem}" if self.where else self.problem
        return f"{text} {self.remedy}".rstrip()


class InputFaults(ValueError):
    """Everything wrong with one input, together.

    Parameters
    ----------
    source : str
        Name of the file or option the faults were found in.
    faults : iterable of Fault
        At least one.
    """

    def __init__(self, source: str, faults: Iterable[Fault]) -> None:
        self.source = source
        self.faults: tuple[Fault, ...] = tuple(faults)
        super().__init__(str(self))

    def __str__(self) -> str:
        count = len(self.faults)
        head = f"{self.source}: {'one fault' if count == 1 else f'{count} faults'}"
        return "\n".join([head, *(f"  {fault}" for fault in self.faults)])


def show(value: Any, limit: int = 60) -> str:
    """Show a given value on one short line, true and false as a file has them."""
    text = str(value).lower() if isinstance(value, bool) else " ".join(repr(value).split())
    return text if len(text) <= limit else text[: limit - 3] + "..."


def listed(names: Sequence[str], conjunction: str = "or") -> str:
    """Join names as a sentence does: ``a, b or c``."""
    names = [str(name) for name in names]
    if len(names) < 2:
        return "".join(names)
    return f"{', '.join(names[:-1])} {conjunction} {names[-1]}"


def did_you_mean(name: str, known: Iterable[str], limit: int = 3) -> str:
    """Suggest the nearest known names, or list what there is."""
    names = list(known)
    near = difflib.get_close_matches(name.lower(), [n.lower() for n in names], n=limit, cutoff=0.6)
    if near:
        originals = [n for low in near for n in names if n.lower() == low]
        return f"Did you mean {listed(list(dict.fromkeys(originals)))}?"
    return f"Known: {listed(names)}." if names else ""

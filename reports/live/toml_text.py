"""Write a case's tables as TOML, in the order of a case file."""

from __future__ import annotations

import json
import math
import re
from typing import Any

from fatigue.case import schema

ORDER = ("title", "loads", "splice", "sheet", "row", "hole", "material", "fastener", "life", "inspection")
DEEPEST = 8
"""Levels of tables within tables; a case has four."""


def toml_text(document: dict[str, Any]) -> str:
    """Return a case's tables as the text of a case file.

    Parameters
    ----------
    document : dict
        As `tomllib` reads a case file. A value of None is left out.

    Returns
    -------
    str
        Reads back as the same tables.

    Raises
    ------
    ValueError
        If a value is of no type that TOML has, or tables are nested too deeply.

    Examples
    --------
    >>> print(toml_text({"title": "A lap", "row": [{"name": "A", "hole_mm": 4.0}], "hole": {"driven": {}}}), end="")
    title = "A lap"
    <BLANKLINE>
    [[row]]
    name = "A"
    hole_mm = 4.0
    <BLANKLINE>
    [hole.driven]
    """
    keys = [key for key in ORDER if key in document] + [key for key in document if key not in ORDER]
    lines: list[str] = [f"{_key(key)} = {_value(document[key])}" for key in keys if not _stands_alone(document[key])]
    for key in keys:
        value = document[key]
        if isinstance(value, list) and _stands_alone(value):
            for item in value:
                lines += ["", f"[[{_key(key)}]]", *_pairs(item)]
        elif (
            isinstance(value, dict)
            and value
            and key in schema.NAMED
            and all(isinstance(own, dict) for own in value.values())
        ):
            for name, own in value.items():
                lines += ["", f"[{_key(key)}.{_key(name)}]", *_pairs(own)]
        elif isinstance(value, dict):
            lines += ["", f"[{_key(key)}]", *_pairs(value)]
    return "\n".join(lines).lstrip("\n") + "\n"


def _stands_alone(value: Any) -> bool:
    """Tell whether a top-level value has a header of its own."""
    return isinstance(value, dict) or (
        isinstance(value, list) and bool(value) and all(isinstance(item, dict) for item in value)
    )


def _pairs(table: dict[str, Any]) -> list[str]:
    return [f"{_key(key)} = {_value(value)}" for key, value in table.items() if value is not None]


def _key(key: str) -> str:
    return key if re.fullmatch(r"[A-Za-z0-9_-]+", key) else _string(key)


def _string(text: str) -> str:
    # JSON's escapes are TOML's, but for DEL and for halves of a pair, which no text file can hold
    return json.dumps(text.encode("utf-8", "replace").decode(), ensure_ascii=False).replace("\x7f", "\\u007f")


def _value(value: Any, depth: int = 0) -> str:
    if depth > DEEPEST:
        raise ValueError("nested too deeply to be a case file")
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, int):
        return str(value)
    if isinstance(value, float):
        return repr(value) if math.isfinite(value) else {math.inf: "inf", -math.inf: "-inf"}.get(value, "nan")
    if isinstance(value, str):
        return _string(value)
    if isinstance(value, list):
        return "[" + ", ".join(_value(item, depth + 1) for item in value) + "]"
    if isinstance(value, dict):
        inner = [f"{_key(key)} = {_value(item, depth + 1)}" for key, item in value.items() if item is not None]
        return "{ " + ", ".join(inner) + " }" if inner else "{}"
    raise ValueError(f"a {type(value).__name__} cannot stand in a case file")

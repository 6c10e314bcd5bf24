"""What the page may put into each table: the case reader's own keys, kinds, limits and defaults."""

from __future__ import annotations

from types import NoneType
from typing import Any, Literal, get_args, get_origin

from pydantic import BaseModel
from pydantic.fields import FieldInfo

import spectra
from fatigue.case import schema
from fatigue.case.keys import model_of
from fatigue.material import library


def form() -> dict[str, Any]:
    """Return every table's keys, and the names that can be chosen."""
    tables = {**schema.SINGLE, **schema.LISTED, **schema.NAMED}
    return {
        "tables": {name: _keys(model) for name, model in tables.items()},
        "listed": list(schema.LISTED),
        "named": list(schema.NAMED),
        "names": {
            "material": list(library.materials()),
            "fastener": list(library.fasteners()),
            "spectrum": list(spectra.shipped()),
            "curve": list(library.families()),
        },
    }


def _keys(model: type[BaseModel]) -> dict[str, Any]:
    return {key: _key(field) for key, field in model.model_fields.items()}


def _key(field: FieldInfo) -> dict[str, Any]:
    """Return a key's kind, choices, limits, default and whether it must be there."""
    found: dict[str, Any] = {"required": field.is_required()}
    nested = model_of(field.annotation)
    if nested is not None:
        is_list = any(get_origin(part) is list for part in _parts(field.annotation))
        return {**found, "kind": "list" if is_list else "table", "keys": _keys(nested)}
    for part in _parts(field.annotation):
        if get_origin(part) is Literal:
            found |= {"kind": "choice", "choices": list(get_args(part))}
        elif part in (float, int, str, bool):
            found["kind"] = {float: "number", int: "whole", str: "text", bool: "switch"}[part]
    found.setdefault("kind", "other")
    if not field.is_required() and isinstance(field.default, float | int | str):
        found["default"] = field.default
    limits = [*field.metadata, *(m for part in _marked(field.annotation) for m in part)]
    for limit in limits:
        for own in (limit, *getattr(limit, "metadata", ())):
            for bound in ("gt", "ge", "lt", "le"):
                value = getattr(own, bound, None)
                if value is not None:
                    found["least" if bound in ("gt", "ge") else "most"] = value
    return found


def _parts(annotation: Any) -> list[Any]:
    """Return the alternatives of an annotation without None and without marks."""
    if hasattr(annotation, "__metadata__"):
        return _parts(get_args(annotation)[0])
    if get_origin(annotation) in (None, list, dict, Literal):
        return [] if annotation is NoneType else [annotation]
    return [inner for part in get_args(annotation) for inner in _parts(part)]


def _marked(annotation: Any) -> list[Any]:
    """Return the marks of every alternative."""
    own = [annotation.__metadata__] if hasattr(annotation, "__metadata__") else []
    if get_origin(annotation) is Literal:
        return own
    return own + [mark for part in get_args(annotation) for mark in _marked(part)]

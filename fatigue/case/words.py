"""What the schema's faults say: pydantic's error records turned into words that teach."""

from __future__ import annotations

from typing import Any

from pydantic import BaseModel, ValidationError

from spectra.faults import Fault, did_you_mean, listed, show
from spectra.units import pair_of, split_unit


def faults_of(error: ValidationError, model: type[BaseModel], where: str, skip: set[str]) -> list[Fault]:
    """Return a fault per error of a table, except for the paths another check has reported."""
    faults = []
    for record in error.errors():
        path = _path(where, record["loc"])
        if path not in skip:
            faults.append(_fault(dict(record), path, model))
    return faults


def _path(where: str, loc: tuple[int | str, ...]) -> str:
    """Write a location as the file has it; positions count from 1."""
    text = where
    for part in loc:
        text += f"[{part + 1}]" if isinstance(part, int) else f".{part}"
    return text


def _fault(record: dict[str, Any], path: str, model: type[BaseModel]) -> Fault:
    kind, context, given = record["type"], record.get("ctx", {}), show(record.get("input"))
    if kind == "missing":
        return Fault(path, "is missing.", f"Give {_both_units(str(record['loc'][-1]))}.")
    if kind == "extra_forbidden":
        return Fault(path, "is not a key of this table.", did_you_mean(str(record["loc"][-1]), _fields(record, model)))
    if kind == "literal_error":
        allowed = [part.strip("' ") for part in context["expected"].replace(" or ", ",").split(",")]
        return Fault(path, f"{given} is not allowed: it is one of {listed(allowed)}.", _nearest(record, allowed))
    limits = {
        "greater_than": ("gt", "must be greater than {}."),
        "greater_than_equal": ("ge", "must be at least {}."),
        "less_than": ("lt", "must be less than {}."),
        "less_than_equal": ("le", "must be at most {}."),
    }
    if kind in limits:
        name, words = limits[kind]
        return Fault(path, f"{given} {words.format(f'{context[name]:g}')}", _in_unit(path))
    types = {
        "float_type": "must be a number, written without quotes.",
        "int_type": "must be a whole number.",
        "int_from_float": "must be a whole number.",
        "string_type": 'must be text, written "like this".',
        "bool_type": "must be true or false.",
        "list_type": "must be a list, written [ ... ].",
        "dict_type": "must be a table, written { key = value }.",
        "model_type": "must be a table, written { key = value }.",
        "finite_number": "must be a finite number: NaN and infinity are not allowed.",
        "too_short": "must not be empty.",
        "string_too_short": "must not be empty.",
        "string_too_long": "is too long.",
    }
    return Fault(path, f"{given} {types.get(kind, record['msg'].lower() + '.')}")


def _fields(record: dict[str, Any], model: type[BaseModel]) -> list[str]:
    """Return the fields of the table, however deep, that an unknown key stood in."""
    from fatigue.case.keys import _model_of

    for part in record["loc"][:-1]:
        if isinstance(part, str) and part in model.model_fields:
            model = _model_of(model.model_fields[part].annotation) or model
    return list(model.model_fields)


def _both_units(key: str) -> str:
    name, unit = split_unit(key)
    if unit is None:
        return key
    pair = pair_of(unit)
    return f"{name}_{pair.si} or {name}_{pair.inch}"


def _in_unit(path: str) -> str:
    unit = split_unit(path)[1]
    return f"(In {unit}.)" if unit else ""


def _nearest(record: dict[str, Any], allowed: list[str]) -> str:
    value = record.get("input")
    suggestion = did_you_mean(value, allowed) if isinstance(value, str) else ""
    return suggestion if suggestion.startswith("Did") else ""

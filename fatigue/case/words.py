"""What the schema's faults say: pydantic's error records turned into words that teach."""

from __future__ import annotations

from typing import Any

from pydantic import BaseModel, ValidationError

from fatigue.case.keys import model_of
from spectra.faults import Fault, did_you_mean, listed, show
from spectra.units import from_si, pair_of, split_unit


def faults_of(
    error: ValidationError,
    model: type[BaseModel],
    where: str,
    skip: set[str],
    written: dict[str, tuple[str, Any]],
) -> list[Fault]:
    """Return a fault per error of a table, in the words of the file.

    Parameters
    ----------
    error : ValidationError
    model : type of BaseModel
        The table's model.
    where : str
        Path of the table.
    skip : set of str
        Paths that another check has reported.
    written : dict
        Path and value as they stand in the file, by the path of the SI key.
    """
    records: list[dict[str, Any]] = [dict(record) for record in error.errors()]
    meant = {
        (*record["loc"][:-1], nearest)
        for record in records
        if record["type"] == "extra_forbidden" and (nearest := _nearest_field(record, model))
    }
    faults = []
    for record in records:
        path = _path(where, record["loc"])
        # a key that is there but misspelt is not missing as well
        if path in skip or (record["type"] == "missing" and record["loc"] in meant):
            continue
        if path in written:
            path, record["input"] = written[path]
        faults.append(_fault(record, path, model))
    return faults


def _nearest_field(record: dict[str, Any], model: type[BaseModel]) -> str | None:
    """Return the SI key that an unknown key was meant for, None where nothing is near."""
    key = str(record["loc"][-1])
    near = did_you_mean(key, _fields(record, model), limit=1)
    if not near.startswith("Did"):
        return None
    name, unit = split_unit(near.removeprefix("Did you mean ").removesuffix("?"))
    return name if unit is None else f"{name}_{pair_of(unit).si}"


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
        choice = f"it is one of {listed(allowed)}." if len(allowed) > 1 else f"only {allowed[0]} is."
        return Fault(path, f"{given} is not allowed: {choice}", _nearest(record, allowed))
    limits = {
        "greater_than": ("gt", "greater than"),
        "greater_than_equal": ("ge", "at least"),
        "less_than": ("lt", "less than"),
        "less_than_equal": ("le", "at most"),
    }
    if kind in limits:
        name, words = limits[kind]
        unit = split_unit(path)[1]
        limit = (
            f"{from_si(float(context[name]), unit):g} {unit.replace('_per_', '/')}" if unit else f"{context[name]:g}"
        )
        return Fault(path, f"{given} must be {words} {limit}.")
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
        "string_too_long": f"is too long: {context.get('max_length')} characters are the most.",
        "string_pattern_mismatch": "must be without control characters, on one line.",
    }
    return Fault(path, f"{given} {types.get(kind, record['msg'].lower() + '.')}")


def _fields(record: dict[str, Any], model: type[BaseModel]) -> list[str]:
    """Return the fields of the table, however deep, that an unknown key stood in, in the unit it has."""
    for part in record["loc"][:-1]:
        if isinstance(part, str) and part in model.model_fields:
            model = model_of(model.model_fields[part].annotation) or model
    unit = split_unit(str(record["loc"][-1]))[1]
    if unit is None or unit == pair_of(unit).si:
        return list(model.model_fields)
    parts = [(field, *split_unit(field)) for field in model.model_fields]
    return [field if own is None else f"{name}_{pair_of(own).inch}" for field, name, own in parts]


def _both_units(key: str) -> str:
    name, unit = split_unit(key)
    if unit is None:
        return key
    pair = pair_of(unit)
    return f"{name}_{pair.si} or {name}_{pair.inch}"


def _nearest(record: dict[str, Any], allowed: list[str]) -> str:
    value = record.get("input")
    suggestion = did_you_mean(value, allowed) if isinstance(value, str) else ""
    return suggestion if suggestion.startswith("Did") else ""

"""Units at the door: every dimensional key of a table turned into its SI key, faults collected."""

from __future__ import annotations

from types import NoneType, UnionType
from typing import Any, Union, get_args, get_origin

from pydantic import BaseModel

from spectra.faults import Fault, show
from spectra.units import pair_of, split_unit, to_si


def to_si_keys(
    table: dict[str, Any],
    model: type[BaseModel],
    where: str,
    faults: list[Fault],
    faulty: set[str],
    written: dict[str, tuple[str, Any]],
) -> dict[str, Any]:
    """Return a copy of a table with SI keys, as deep as the model goes.

    Parameters
    ----------
    table : dict
        As read from the file.
    model : type of BaseModel
        The table's model; its dimensional fields end in SI units.
    where : str
        Path of the table, for the faults.
    faults : list of Fault
        Faults found are appended.
    faulty : set of str
        Paths that were reported here, so that nobody reports them again.
    written : dict
        Filled with the key's path and value as they stand in the file, by the path of the SI key.
    """
    fields = model.model_fields
    out: dict[str, Any] = {}
    for key, value in table.items():
        path = f"{where}.{key}"
        si_key, unit = _si_key(key, fields)
        if si_key is None:
            bare = next((f for f in fields if split_unit(f)[0] == key and split_unit(f)[1]), None)
            if bare is not None:
                pair = pair_of(split_unit(bare)[1] or "")
                faults.append(
                    Fault(
                        path,
                        f"{show(value)} has no unit.",
                        f"Write {key}_{pair.si} or {key}_{pair.inch}.",
                    )
                )
                faulty.add(f"{where}.{bare}")
                continue
            out[key] = value
            continue
        if si_key in out:
            faults.append(Fault(path, f"{split_unit(key)[0]} is given in both units.", "Keep one of them."))
            faulty.add(f"{where}.{si_key}")
            continue
        if unit is not None:
            written[f"{where}.{si_key}"] = (path, value)
        out[si_key] = _nested(_convert(value, unit), fields[si_key].annotation, path, faults, faulty, written)
    return out


def _si_key(key: str, fields: dict[str, Any]) -> tuple[str | None, str | None]:
    """Return the field a key means and the key's unit; no field where there is none."""
    name, unit = split_unit(key)
    if unit is None:
        return (key if key in fields else None), None
    si_key = f"{name}_{pair_of(unit).si}"
    return (si_key if si_key in fields else None), unit


def _convert(value: Any, unit: str | None) -> Any:
    if unit is None or isinstance(value, bool) or not isinstance(value, int | float):
        return value
    return to_si(float(value), unit)


def _nested(
    value: Any,
    annotation: Any,
    path: str,
    faults: list[Fault],
    faulty: set[str],
    written: dict[str, tuple[str, Any]],
) -> Any:
    """Go into tables and lists of tables."""
    model = model_of(annotation)
    if model is None:
        return value
    if isinstance(value, dict):
        return to_si_keys(value, model, path, faults, faulty, written)
    if isinstance(value, list):
        return [
            to_si_keys(item, model, f"{path}[{i}]", faults, faulty, written) if isinstance(item, dict) else item
            for i, item in enumerate(value, start=1)
        ]
    return value


def model_of(annotation: Any) -> type[BaseModel] | None:
    """Return the table model inside an annotation such as ``list[Model] | None``."""
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        return annotation
    if get_origin(annotation) in (Union, UnionType, list) or hasattr(annotation, "__metadata__"):
        for argument in get_args(annotation):
            if argument is not NoneType and (model := model_of(argument)) is not None:
                return model
    return None

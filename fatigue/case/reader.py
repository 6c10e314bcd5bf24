"""Read a case file: every fault found before anything is computed, all of them reported together."""

from __future__ import annotations

import hashlib
import tomllib
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, TypeVar

from pydantic import ValidationError

from fatigue.case import schema
from fatigue.case.keys import to_si_keys
from fatigue.case.words import faults_of
from spectra.faults import Fault, InputFaults, did_you_mean, show

T = TypeVar("T", bound=schema.Table)


@dataclass
class Tables:
    """The tables of one case file; None stands where a table's own faults are already known."""

    title: str = ""
    loads: schema.LoadsTable | None = None
    splice: schema.SpliceTable | None = None
    life: schema.LifeTable | None = None
    inspection: schema.InspectionTable | None = None
    sheets: list[schema.SheetTable | None] = field(default_factory=list)
    rows: list[schema.RowTable | None] = field(default_factory=list)
    holes: dict[str, schema.HoleTable | None] = field(default_factory=dict)
    materials: dict[str, schema.MaterialTable | None] = field(default_factory=dict)
    fasteners: dict[str, schema.FastenerTable | None] = field(default_factory=dict)
    echo: dict[str, Any] = field(default_factory=dict)


def read_text(path: Path) -> str:
    """Read a case file's text.

    Raises
    ------
    InputFaults
        If there is no such file, it is a folder, cannot be read, or is not UTF-8.
    """
    try:
        return path.read_bytes().decode("utf-8")
    except FileNotFoundError:
        problem, remedy = "there is no such file.", "Check the name, or write a starter with `faying new`."
    except IsADirectoryError:
        problem, remedy = "this is a folder, not a case file.", "Name the .toml file in it."
    except PermissionError:
        problem, remedy = "the file may not be read.", "Check its permissions."
    except OSError as error:
        problem, remedy = f"the file cannot be read ({error.strerror or error}).", ""
    except UnicodeDecodeError as error:
        problem, remedy = f"byte {error.start} is not UTF-8 text.", "Save the file as UTF-8."
    raise InputFaults(str(path), [Fault("", problem, remedy)])


def parse_toml(text: str, source: str) -> dict[str, Any]:
    """Parse TOML, with the line and column of a syntax error."""
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise InputFaults(
            source, [Fault("", f"not valid TOML: {error}.", "Mend the syntax there; nothing else was checked.")]
        ) from None
    except RecursionError:
        raise InputFaults(source, [Fault("", "nested too deeply to be a case file.")]) from None


def parse_tables(raw: dict[str, Any], faults: list[Fault]) -> Tables:
    """Validate each table on its own, appending the faults found."""
    tables = Tables()
    known = ["title", *schema.SINGLE, *schema.LISTED, *schema.NAMED]
    for key in raw:
        if key not in known:
            faults.append(Fault(key, "is not a table of a case file.", did_you_mean(key, known)))
    for key in schema.REQUIRED:
        # that there are no sheets or rows is found where they are counted
        if key not in raw and key not in schema.LISTED:
            shape = {"title": 'title = "..."'}.get(key, f"[{key}]")
            faults.append(Fault(key, "is missing.", f"Add {shape}; `faying new` writes a starter with all of them."))
    title = raw.get("title", "")
    if isinstance(title, str) and title.isprintable() and (title.strip() or "title" not in raw):
        tables.title = title
        tables.echo["title"] = title
    else:
        faults.append(Fault("title", f'{show(title)} must be text on one line, written "like this", and not empty.'))
    for key, model in schema.SINGLE.items():
        if key in raw or key not in schema.REQUIRED:
            setattr(tables, key, _table(raw.get(key, {}), model, key, faults, tables.echo))
    for key, model in schema.LISTED.items():
        setattr(tables, f"{key}s", _listed(raw.get(key, []), model, key, faults, tables.echo))
    for key, model in schema.NAMED.items():
        setattr(tables, f"{key}s", _named(raw.get(key, {}), model, key, faults, tables.echo))
    return tables


def _table(given: Any, model: type[T], where: str, faults: list[Fault], echo: dict[str, Any]) -> T | None:
    if not isinstance(given, dict):
        faults.append(Fault(where, f"{show(given)} must be a table.", f"Write [{where.split('[')[0]}] and its keys."))
        return None
    own: list[Fault] = []
    faulty: set[str] = set()
    written: dict[str, tuple[str, Any]] = {}
    si = to_si_keys(given, model, where, own, faulty, written)
    echo[where.rsplit(".", 1)[-1]] = si
    try:
        parsed = model.model_validate(si)
    except ValidationError as error:
        own += faults_of(error, model, where, faulty, written)
        parsed = None
    faults += own
    return None if own else parsed


def _listed(given: Any, model: type[T], key: str, faults: list[Fault], echo: dict[str, Any]) -> list[T | None]:
    if not isinstance(given, list):
        faults.append(Fault(key, "must be an array of tables.", f"Write [[{key}]] with two brackets."))
        return [None, None]  # something was given: that there is none of it is not to be said as well
    parsed: list[T | None] = []
    copies: list[Any] = []
    for position, item in enumerate(given, start=1):
        name = item.get("name") if isinstance(item, dict) else None
        where = f"{key}[{position}]" + (f' "{name}"' if isinstance(name, str) else "")
        copy: dict[str, Any] = {}
        parsed.append(_table(item, model, where, faults, copy))
        copies.extend(copy.values())
    echo[key] = copies
    return parsed


def _named(given: Any, model: type[T], key: str, faults: list[Fault], echo: dict[str, Any]) -> dict[str, T | None]:
    if not isinstance(given, dict):
        faults.append(Fault(key, "must hold named tables.", f"Write [{key}.NAME]."))
        return {}
    copies: dict[str, Any] = {}
    parsed = {}
    for name, item in given.items():
        copy: dict[str, Any] = {}
        parsed[name] = _table(item, model, f"{key}.{name}", faults, copy)
        copies[name] = next(iter(copy.values()), {})
    if copies:
        echo[key] = copies
    return parsed


def digest(text: str) -> str:
    """Return the SHA-256 of a case file's text, to tell two reports apart."""
    return hashlib.sha256(text.encode()).hexdigest()

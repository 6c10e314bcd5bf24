"""The shipped materials, fasteners and S-N families, and curve files of the user's own."""

from __future__ import annotations

import math
import tomllib
from collections.abc import Iterator
from functools import cache
from importlib import resources
from pathlib import Path
from typing import Any

from fatigue.material.curves import CurveFamily, Member
from fatigue.material.records import Fastener, Material
from spectra.faults import Fault, InputFaults, did_you_mean, show
from spectra.units import to_si

DATA = resources.files("fatigue.material.data")


@cache
def _table(name: str) -> dict[str, dict[str, Any]]:
    return tomllib.loads(DATA.joinpath(name).read_text(encoding="utf-8"))


@cache
def _curve_files() -> dict[str, str]:
    """Return the file of each shipped family by the family's name."""
    found = {}
    for entry in sorted(DATA.iterdir(), key=lambda entry: entry.name):
        if entry.name.endswith("-sheet.toml"):
            found[str(_table(entry.name)["name"])] = entry.name
    return found


def materials() -> tuple[str, ...]:
    """Return the names of the shipped materials."""
    return tuple(_table("materials.toml"))


def fasteners() -> tuple[str, ...]:
    """Return the names of the shipped fasteners."""
    return tuple(_table("fasteners.toml"))


def families() -> tuple[str, ...]:
    """Return the names of the shipped S-N families."""
    return tuple(_curve_files())


def material(name: str) -> Material:
    """Return a shipped material.

    Raises
    ------
    KeyError
        If there is none of that name.
    """
    entry = _table("materials.toml")[name]
    return Material(
        name=name,
        modulus=entry["modulus_MPa"],
        poisson=entry["poisson"],
        yield_stress=entry["yield_MPa"],
        ultimate=entry["ultimate_MPa"],
        curve=entry["curve"],
        source=entry["source"],
        how=entry["how"],
    )


def fastener(name: str) -> Fastener:
    """Return a shipped fastener.

    Raises
    ------
    KeyError
        If there is none of that name.
    """
    entry = _table("fasteners.toml")[name]
    return Fastener(
        name=name,
        kind=entry["kind"],
        modulus=entry["modulus_MPa"],
        poisson=entry["poisson"],
        source=entry["source"],
        how=entry["how"],
    )


def family(name: str, folder: Path = Path()) -> CurveFamily:
    """Return a shipped S-N family by name, or one read from a curve file.

    Parameters
    ----------
    name : str
        Name of a shipped family, or path of a file in the same form.
    folder : Path
        Where relative paths start.

    Raises
    ------
    InputFaults
        If the file cannot be read or has faults: all of them.
    """
    shipped = _curve_files()
    if name in shipped:
        return parse_family(_table(shipped[name]), shipped[name])
    path = folder / name
    try:
        raw = tomllib.loads(path.read_bytes().decode("utf-8"))
    except OSError as error:
        raise InputFaults(str(path), [Fault("", f"the curve file cannot be read ({error.strerror}).")]) from None
    except (tomllib.TOMLDecodeError, UnicodeDecodeError, RecursionError) as error:
        raise InputFaults(str(path), [Fault("", f"not a valid TOML file: {error}.")]) from None
    return parse_family(raw, str(path))


TEXTS = ("name", "alloy", "source", "how")
PAIRS = ("tested_cycles", "tested_ratio")
CONSTANTS = ("kt", "A1", "A2", "A3", "A4")


def parse_family(raw: dict[str, Any], source: str) -> CurveFamily:
    """Check a curve file's tables and turn them into a family with constants for MPa."""
    faults = list(_family_faults(raw))
    if faults:
        raise InputFaults(source, faults)
    factor = to_si(1.0, raw["stress_unit"])
    members = [
        Member(
            kt=float(entry["kt"]),
            # log10(c s) = log10 c + log10 s: the unit goes into A1 and A4 once
            a1=entry["A1"] - entry["A2"] * math.log10(factor),
            a2=float(entry["A2"]),
            a3=float(entry["A3"]),
            a4=entry["A4"] * factor,
            figure=entry.get("figure", ""),
        )
        for entry in sorted(raw["member"], key=lambda entry: float(entry["kt"]))
    ]
    return CurveFamily(
        name=raw["name"],
        members=tuple(members),
        tested_cycles=(float(raw["tested_cycles"][0]), float(raw["tested_cycles"][1])),
        tested_ratio=(float(raw["tested_ratio"][0]), float(raw["tested_ratio"][1])),
        source=raw["source"],
        how=raw["how"],
    )


def _family_faults(raw: dict[str, Any]) -> Iterator[Fault]:
    known = (*TEXTS, "stress_unit", *PAIRS, "member")
    for key in raw:
        if key not in known:
            yield Fault(key, "is not a key of a curve file.", did_you_mean(key, known))
    for key in TEXTS:
        if not isinstance(raw.get(key), str):
            yield Fault(key, "is missing or not text.", f'Write {key} = "...".')
    if raw.get("stress_unit") not in ("ksi", "MPa"):
        yield Fault("stress_unit", f"{show(raw.get('stress_unit'))} must be one of ksi and MPa.")
    for key in PAIRS:
        pair = raw.get(key)
        if not (isinstance(pair, list) and len(pair) == 2 and all(map(_number, pair)) and pair[0] < pair[1]):
            yield Fault(key, f"{show(pair)} must be two rising numbers.", f"Write {key} = [first, last].")
    pair = raw.get("tested_cycles")
    if isinstance(pair, list) and len(pair) == 2 and all(map(_number, pair)) and not 1 <= pair[0] < pair[1] <= 1e15:
        yield Fault("tested_cycles", f"{show(pair)} must lie within 1 and 1e15.")
    members = raw.get("member")
    if not (isinstance(members, list) and members and all(isinstance(entry, dict) for entry in members)):
        yield Fault("member", "is missing.", "Give one [[member]] table for each K_t.")
        return
    kts = []
    for position, entry in enumerate(members, start=1):
        yield from _member_faults(entry, f"member[{position}]")
        if _number(entry.get("kt")):
            kts.append(entry["kt"])
    if len(set(kts)) < len(kts):
        yield Fault("member", "two members have the same kt.", "Keep one for each K_t.")


def _member_faults(entry: dict[str, Any], where: str) -> Iterator[Fault]:
    known = (*CONSTANTS, "figure")
    for key in entry:
        if key not in known:
            yield Fault(f"{where}.{key}", "is not a key of a member.", did_you_mean(key, known))
    limits = {"kt": (1, 100), "A1": (-1e3, 1e3), "A2": (-1e3, -1e-3), "A3": (0, 1), "A4": (0, 1e4)}
    for key, (least, most) in limits.items():
        value = entry.get(key)
        if not _number(value) or not least <= value <= most:
            yield Fault(f"{where}.{key}", f"{show(value)} must be a number from {least:g} to {most:g}.")


def _number(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)



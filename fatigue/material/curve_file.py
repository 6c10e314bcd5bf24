"""Curve files: an S-N family as TOML, read strictly, every fault at once, and written.

A file holds the members' constants in ksi or MPa as printed, or it names another family and the factor its stresses
are multiplied by.
"""

from __future__ import annotations

import json
import math
from collections.abc import Callable, Iterator
from typing import Any

from fatigue.material.curves import CurveFamily
from fatigue.material.members import Member, out_of_order
from spectra.faults import Fault, InputFaults, did_you_mean, show
from spectra.units import to_si

TEXTS = ("name", "alloy", "source", "how")
SPANS = ("tested_cycles", "tested_ratio")
KEYS = (*TEXTS, "notes", "stress_unit", *SPANS, "member")
SCALED_KEYS = (*TEXTS, "notes", "of", "stress_factor")
LIMITS: dict[str, tuple[float, float]] = {
    "kt": (1, 100),
    "A1": (-1e3, 1e3),
    "A2": (-100, -0.1),
    "A3": (0, 1),
    "A4": (0, 1e4),
}
"""Constants of a member and where they may lie."""
MEMBER_KEYS = (*LIMITS, "figure", "scatter_log10", "tests", "run_outs")


def parse_family(raw: dict[str, Any], source: str, shipped: Callable[[str], CurveFamily]) -> CurveFamily:
    """Check a curve file's tables and turn them into a family with constants for MPa.

    Parameters
    ----------
    raw : dict
        The file's tables.
    source : str
        Name of the file, for the faults.
    shipped : callable
        Returns a shipped family by name, KeyError if there is none.

    Raises
    ------
    InputFaults
        With every fault.
    """
    if "of" in raw:
        return _scaled_family(raw, source, shipped)
    faults = list(_family_faults(raw))
    if faults:
        raise InputFaults(source, faults)
    factor = to_si(1.0, raw["stress_unit"])
    members = tuple(
        Member(
            kt=float(entry["kt"]),
            # log10(c s) = log10 c + log10 s: the unit goes into A1 and A4 once
            a1=entry["A1"] - entry["A2"] * math.log10(factor),
            a2=float(entry["A2"]),
            a3=float(entry["A3"]),
            a4=entry["A4"] * factor,
            figure=entry.get("figure", ""),
            scatter_log10=entry.get("scatter_log10"),
        )
        for entry in sorted(raw["member"], key=lambda entry: float(entry["kt"]))
    )
    first, last = (float(n) for n in raw["tested_cycles"])
    faults = [
        Fault(
            "member",
            f"K_t {one.lower:g} and {one.upper:g} are out of order at {10**one.log_life:.3g} cycles, within the tested "
            f"{first:g} to {last:g}: the sharper notch would stand more stress.",
            "Correct the constants, or narrow tested_cycles to where the order holds.",
        )
        for one in out_of_order(members, math.log10(first), math.log10(last))
    ]
    if faults:
        raise InputFaults(source, faults)
    return CurveFamily(
        name=raw["name"],
        members=members,
        tested_cycles=(first, last),
        tested_ratio=(float(raw["tested_ratio"][0]), float(raw["tested_ratio"][1])),
        source=raw["source"],
        how=raw["how"],
    )


def scaled(family: CurveFamily, factor: float, name: str, source: str, how: str) -> CurveFamily:
    """Return a family whose stresses are those of another times a factor."""
    members = tuple(
        Member(m.kt, m.a1 - m.a2 * math.log10(factor), m.a2, m.a3, m.a4 * factor, m.figure, m.scatter_log10)
        for m in family.members
    )
    return CurveFamily(name, members, family.tested_cycles, family.tested_ratio, source, how)


def family_text(raw: dict[str, Any]) -> str:
    """Write the tables of a curve file as TOML.

    Parameters
    ----------
    raw : dict
        As `parse_family` takes them: texts, numbers, lists of either, and ``member`` last.

    Examples
    --------
    >>> print(family_text({"name": "x", "tested_ratio": [-1.0, 0.5], "member": [{"kt": 1.0}]}))
    name = "x"
    tested_ratio = [-1.0, 0.5]
    <BLANKLINE>
    [[member]]
    kt = 1.0
    <BLANKLINE>
    """
    lines = [f"{key} = {_written(value)}" for key, value in raw.items() if key != "member"]
    for entry in raw["member"]:
        lines += ["", "[[member]]", *(f"{key} = {_written(value)}" for key, value in entry.items())]
    return "\n".join([*lines, ""])


def _written(value: Any) -> str:
    """Write a value as TOML; texts and numbers are the same in JSON."""
    if isinstance(value, list) and any(isinstance(part, str) for part in value):
        return "\n".join(["[", *(f"    {json.dumps(part, ensure_ascii=False)}," for part in value), "]"])
    return json.dumps(value, ensure_ascii=False)


def _scaled_family(raw: dict[str, Any], source: str, shipped: Callable[[str], CurveFamily]) -> CurveFamily:
    faults = [*_unknown(raw, SCALED_KEYS, "", "a curve file that scales another family"), *_texts(raw)]
    factor: Any = raw.get("stress_factor")
    if not _number(factor) or not 0 < factor <= 10:
        faults.append(Fault("stress_factor", f"{show(factor)} must be a number above 0, at most 10."))
    try:
        base = shipped(str(raw["of"]))
    except KeyError as error:
        known = error.args[1] if len(error.args) > 1 else ()
        faults.append(
            Fault("of", f"there is no shipped family {show(raw['of'])}.", did_you_mean(str(raw["of"]), known))
        )
    if faults:
        raise InputFaults(source, faults)
    return scaled(base, float(factor), raw["name"], raw["source"], raw["how"])


def _family_faults(raw: dict[str, Any]) -> Iterator[Fault]:
    yield from _unknown(raw, KEYS, "", "a curve file")
    yield from _texts(raw)
    if raw.get("stress_unit") not in ("ksi", "MPa"):
        yield Fault("stress_unit", f"{show(raw.get('stress_unit'))} must be one of ksi and MPa.")
    allowed = {"tested_cycles": (1.0, 1e15), "tested_ratio": (-1e3, 1.0)}
    for key in SPANS:
        pair: Any = raw.get(key)
        one_ratio = key == "tested_ratio"  # tests at one R have no span
        if not (isinstance(pair, list) and len(pair) == 2 and all(map(_number, pair))) or not (
            pair[0] < pair[1] or (one_ratio and pair[0] == pair[1])
        ):
            yield Fault(key, f"{show(pair)} must be two rising numbers.", f"Write {key} = [first, last].")
        elif not allowed[key][0] <= pair[0] <= pair[1] <= allowed[key][1]:
            yield Fault(key, f"{show(pair)} must lie within {allowed[key][0]:g} and {allowed[key][1]:g}.")
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
    yield from _unknown(entry, MEMBER_KEYS, f"{where}.", "a member")
    for key, (least, most) in LIMITS.items():
        value: Any = entry.get(key)
        if key == "A2" and _number(value) and value >= 0:
            yield Fault(f"{where}.A2", f"{value:g} makes life rise with stress.", "A2 is negative, usually -2 to -6.")
        elif not _number(value) or not least <= value <= most:
            yield Fault(f"{where}.{key}", f"{show(value)} must be a number from {least:g} to {most:g}.")
    scatter: Any = entry.get("scatter_log10")
    if scatter is not None and not (_number(scatter) and 0 < scatter <= 5):
        yield Fault(f"{where}.scatter_log10", f"{show(scatter)} must be a number above 0, at most 5.")
    for key in ("tests", "run_outs"):
        count: Any = entry.get(key)
        if count is not None and not (isinstance(count, int) and not isinstance(count, bool) and count >= 0):
            yield Fault(f"{where}.{key}", f"{show(count)} must be a whole number.")
    if not isinstance(entry.get("figure", ""), str):
        yield Fault(f"{where}.figure", f"{show(entry['figure'])} must be text.", 'Write figure = "...".')


def _texts(raw: dict[str, Any]) -> Iterator[Fault]:
    for key in TEXTS:
        if not isinstance(raw.get(key), str):
            yield Fault(key, "is missing or not text.", f'Write {key} = "...".')
    notes: Any = raw.get("notes", [])
    if not (isinstance(notes, list) and all(isinstance(line, str) for line in notes)):
        yield Fault("notes", f"{show(notes)} must be a list of texts.")


def _unknown(raw: dict[str, Any], known: tuple[str, ...], where: str, what: str) -> Iterator[Fault]:
    for key in raw:
        if key not in known:
            yield Fault(f"{where}{key}", f"is not a key of {what}.", did_you_mean(key, known))


def _number(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)

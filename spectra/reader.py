"""Read spectrum files: every fault of a file found and reported together."""

from __future__ import annotations

import math
import tomllib
from collections.abc import Iterator
from functools import cache
from importlib import resources
from pathlib import Path
from typing import Any

from spectra.exceedance_keys import KEYS as EXCEEDANCE_KEYS
from spectra.exceedance_keys import exceedance_faults, exceeded_of
from spectra.faults import Fault, InputFaults, did_you_mean, show
from spectra.spectrum import Phase, Spectrum
from spectra.units import split_unit, to_si

LIBRARY = resources.files("spectra.library")
MOST_POINTS = 50_000_000
"""Most points a block may have, so that a slip in a number does not fill the memory."""

FILE_KEYS = ("title", "invented", "seed", "notes", "channel", "flight", "phase")
CHANNEL_KEYS = (
    "unit",
    "MPa_per_unit",
    "ksi_per_unit",
    "radius_mm",
    "radius_in",
    "thickness_mm",
    "thickness_in",
    "share",
)
FLIGHT_KEYS = ("name", "number", "severity")
PHASE_KEYS = ("name", "steady", "repeated", "amplitude", "cycles", *EXCEEDANCE_KEYS)


@cache
def _shipped_files() -> dict[str, str]:
    return {
        entry.name.removesuffix(".toml"): entry.read_text(encoding="utf-8")
        for entry in sorted(LIBRARY.iterdir(), key=lambda entry: entry.name)
        if entry.name.endswith(".toml")
    }


def shipped() -> dict[str, str]:
    """Return the shipped spectra: name to title."""
    return {name: str(tomllib.loads(text)["title"]) for name, text in _shipped_files().items()}


def read_spectrum(name_or_path: str | Path) -> Spectrum:
    """Read a shipped spectrum by name, or a spectrum file.

    Parameters
    ----------
    name_or_path : str or Path

    Returns
    -------
    Spectrum

    Raises
    ------
    InputFaults
        With all faults of the file.

    Examples
    --------
    >>> read_spectrum("short-hops").flights["smooth"]
    1200
    """
    name = str(name_or_path)
    if name in _shipped_files():
        text, stem, folder = _shipped_files()[name], name, Path()
    else:
        try:
            path = Path(name_or_path)
            text, stem, folder = path.read_bytes().decode("utf-8"), path.stem, path.parent
        except FileNotFoundError:
            raise InputFaults(name, [Fault("", "there is no such spectrum.", did_you_mean(name, shipped()))]) from None
        except (OSError, UnicodeDecodeError) as error:
            raise InputFaults(name, [Fault("", f"the spectrum file cannot be read ({error}).")]) from None
    try:
        raw = tomllib.loads(text)
    except (tomllib.TOMLDecodeError, RecursionError) as error:
        raise InputFaults(name, [Fault("", f"not valid TOML: {error}.")]) from None
    faults = list(_faults(raw, folder))
    if faults:
        raise InputFaults(name, faults)
    return _build(raw, stem, folder)


def _build(raw: dict[str, Any], name: str, folder: Path) -> Spectrum:
    flights = sum(entry["number"] for entry in raw["flight"])
    phases = tuple(
        Phase(
            name=entry["name"],
            steady={channel: float(value) for channel, value in entry.get("steady", {}).items()},
            repeated=entry.get("repeated", ""),
            amplitude=tuple(float(value) for value in entry.get("amplitude", ())),
            cycles={kind: tuple(numbers) for kind, numbers in entry.get("cycles", {}).items()},
            exceeded=exceeded_of(entry, folder, flights) if _has_exceedances(entry) else None,
        )
        for entry in raw["phase"]
    )
    notes = (["invented example"] if raw.get("invented") else []) + ([raw["notes"]] if raw.get("notes") else [])
    return Spectrum(
        name=name,
        title=raw["title"],
        seed=raw["seed"],
        flights={entry["name"]: entry["number"] for entry in raw["flight"]},
        channels={channel: _stress_per_unit(table) for channel, table in raw["channel"].items()},
        phases=phases,
        notes=tuple(notes),
        severity={entry["name"]: float(entry["severity"]) for entry in raw["flight"] if "severity" in entry},
    )


def _stress_per_unit(table: dict[str, Any]) -> float:
    """Return a channel's remote gross stress per unit [MPa]: given, or the share of p R/t for a pressure."""
    if "MPa_per_unit" in table:
        return float(table["MPa_per_unit"])
    if "ksi_per_unit" in table:
        return to_si(float(table["ksi_per_unit"]), "ksi")
    size = {split_unit(k)[0]: to_si(float(v), split_unit(k)[1] or "") for k, v in table.items() if split_unit(k)[1]}
    pressure = to_si(1.0, table["unit"]) / 1000.0  # kPa in a MPa
    return float(table.get("share", 1.0)) * pressure * size["radius"] / size["thickness"]


def _faults(raw: dict[str, Any], folder: Path) -> Iterator[Fault]:
    for key in raw:
        if key not in FILE_KEYS:
            yield Fault(key, "is not a key of a spectrum file.", did_you_mean(key, FILE_KEYS))
    if not isinstance(raw.get("title"), str) or not raw.get("title"):
        yield Fault("title", "is missing or not text.", 'Write title = "...".')
    if not _whole(raw.get("seed")) or not 0 <= raw["seed"] < 2**63:
        yield Fault(
            "seed", f"{show(raw.get('seed'))} must be a whole number from 0.", "It makes the sequence repeatable."
        )
    channels = raw.get("channel")
    if not isinstance(channels, dict) or not channels:
        yield Fault("channel", "is missing.", "Give at least one [channel.NAME].")
        channels = {}
    for name, table in channels.items():
        yield from _channel_faults(table, f"channel.{name}")
    kinds: dict[str, int] = {}
    flights = raw.get("flight")
    if not isinstance(flights, list) or not flights:
        yield Fault("flight", "is missing.", "Give at least one [[flight]] with name and number.")
        flights = []
    for position, entry in enumerate(flights, start=1):
        where = f"flight[{position}]"
        if not isinstance(entry, dict) or not isinstance(entry.get("name"), str) or not _whole(entry.get("number")):
            yield Fault(where, "must have a name and a whole number.", 'Write name = "..." and number = ...')
        elif not 1 <= entry["number"] <= 10**7:
            yield Fault(f"{where}.number", f"{entry['number']} must be from 1 to 1e7 flights in a block.")
        elif entry["name"] in kinds:
            yield Fault(f"{where}.name", f'"{entry["name"]}" is used twice.')
        else:
            kinds[entry["name"]] = entry["number"]
            for key in entry:
                if key not in FLIGHT_KEYS:
                    yield Fault(f"{where}.{key}", "is not a key of a flight.", did_you_mean(key, FLIGHT_KEYS))
            severity = entry.get("severity", 1.0)
            if not _number(severity) or not 0.1 <= severity <= 10:
                yield Fault(
                    f"{where}.severity", f"{show(severity)} must be from 0.1 to 10.", "1 is the average flight."
                )
    phases = raw.get("phase")
    if not isinstance(phases, list) or not phases:
        yield Fault("phase", "is missing.", "Give at least one [[phase]], in the order flown.")
        return
    points = 0
    for position, entry in enumerate(phases, start=1):
        if not isinstance(entry, dict):
            yield Fault(f"phase[{position}]", "must be a table.")
            continue
        where = f"phase[{position}]"
        own = list(_phase_faults(entry, where, list(channels), list(kinds)))
        if _has_exceedances(entry):
            own += exceedance_faults(entry, where, folder, sum(kinds.values()))
        yield from own
        if not own and _has_exceedances(entry):
            points += 2 * int(exceeded_of(entry, folder, sum(kinds.values())).flown()[2][-1])
        elif not own:
            points += sum(
                number * max(1, 2 * sum(entry.get("cycles", {}).get(kind, ()))) for kind, number in kinds.items()
            )
    if points > MOST_POINTS:
        yield Fault("flight", f"the block would have {points:g} points; {MOST_POINTS:g} is the most.", "Shorten it.")


def _channel_faults(table: Any, where: str) -> Iterator[Fault]:
    if not isinstance(table, dict):
        yield Fault(where, f"{show(table)} must be a table.")
        return
    for key in table:
        if key not in CHANNEL_KEYS:
            yield Fault(f"{where}.{key}", "is not a key of a channel.", did_you_mean(key, CHANNEL_KEYS))
        elif key != "unit" and not _number(table[key]):
            yield Fault(f"{where}.{key}", f"{show(table[key])} must be a finite number.")
    given = [key for key in ("MPa_per_unit", "ksi_per_unit") if key in table]
    if len(given) > 1:
        yield Fault(where, "MPa_per_unit and ksi_per_unit are both given.", "Keep one.")
    elif not given:
        names = [split_unit(key)[0] for key in table if split_unit(key)[1]]
        if sorted(names) != ["radius", "thickness"] or table.get("unit") not in ("kPa", "psi"):
            yield Fault(
                where,
                "says neither its stress per unit nor how to get it.",
                'Give MPa_per_unit; or unit = "kPa" with radius_mm, thickness_mm and share, for share p R/t.',
            )
        elif not all(_number(table[k]) and table[k] > 0 for k in table if split_unit(k)[1]):
            yield Fault(where, "radius and thickness must be greater than 0.")


def _phase_faults(entry: dict[str, Any], where: str, channels: list[str], kinds: list[str]) -> Iterator[Fault]:
    for key in entry:
        if key not in PHASE_KEYS:
            yield Fault(f"{where}.{key}", "is not a key of a phase.", did_you_mean(key, PHASE_KEYS))
    if not isinstance(entry.get("name"), str):
        yield Fault(f"{where}.name", "is missing or not text.")
    steady = entry.get("steady", {})
    if not isinstance(steady, dict):
        yield Fault(f"{where}.steady", "must be a table of channels.")
        steady = {}
    for channel, value in steady.items():
        if channel not in channels:
            yield Fault(f"{where}.steady.{channel}", "is not a channel.", did_you_mean(channel, channels))
        if not _number(value):
            yield Fault(f"{where}.steady.{channel}", f"{show(value)} must be a finite number.")
    loads = [key for key in ("repeated", "amplitude", "cycles") if key in entry]
    if _has_exceedances(entry) and "repeated" not in entry:
        yield Fault(f"{where}.repeated", "is missing.", "Name the channel that the exceedances move.")
        return
    if not loads:
        return
    if entry.get("repeated", "") not in channels and "repeated" in entry:
        yield Fault(
            f"{where}.repeated",
            f"{show(entry['repeated'])} is not a channel.",
            did_you_mean(str(entry["repeated"]), channels),
        )
    if _has_exceedances(entry):
        return
    if len(loads) < 3:
        remedy = "Give all three or none; or repeated and exceedances or gust."
        yield Fault(where, "repeated loads need repeated, amplitude and cycles.", remedy)
        return
    levels = entry["amplitude"]
    if not isinstance(levels, list) or not levels or not all(_number(v) and v > 0 for v in levels):
        yield Fault(f"{where}.amplitude", f"{show(levels)} must be a list of positive numbers.")
        return
    cycles = entry["cycles"]
    if not isinstance(cycles, dict):
        yield Fault(f"{where}.cycles", "must be a table: flight type = [cycles of each level].")
        return
    for kind, numbers in cycles.items():
        if kind not in kinds:
            yield Fault(f"{where}.cycles.{kind}", "is not a flight type.", did_you_mean(kind, kinds))
        if not isinstance(numbers, list) or not all(_whole(n) and n >= 0 for n in numbers):
            yield Fault(f"{where}.cycles.{kind}", f"{show(numbers)} must be whole numbers, none negative.")
        elif len(numbers) != len(levels):
            yield Fault(
                f"{where}.cycles.{kind}", f"{len(numbers)} numbers for {len(levels)} amplitudes.", "Give one for each."
            )


def _has_exceedances(entry: dict[str, Any]) -> bool:
    return any(key in entry for key in EXCEEDANCE_KEYS)


def _number(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)


def _whole(value: Any) -> bool:
    return isinstance(value, int) and not isinstance(value, bool)

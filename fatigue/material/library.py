"""The shipped materials, fasteners, S-N families and strain-life constants, and curve files of the user's own."""

from __future__ import annotations

import tomllib
from functools import cache
from importlib import resources
from pathlib import Path
from typing import Any

from fatigue.material.curve_file import parse_family
from fatigue.material.curves import CurveFamily
from fatigue.material.records import Fastener, Material
from fatigue.material.strain import StrainLife
from spectra.faults import Fault, InputFaults, did_you_mean, listed

DATA = resources.files("fatigue.material.data")
TABLES = ("materials.toml", "fasteners.toml", "strain-life.toml")
"""Files of the data folder that are not S-N families."""


@cache
def _table(name: str) -> dict[str, dict[str, Any]]:
    return tomllib.loads(DATA.joinpath(name).read_text(encoding="utf-8"))


@cache
def _curve_files() -> dict[str, str]:
    """Return the file of each shipped family by the family's name."""
    files = sorted(entry.name for entry in DATA.iterdir() if entry.name.endswith(".toml") and entry.name not in TABLES)
    return {str(_table(name)["name"]): name for name in files}


def materials() -> tuple[str, ...]:
    """Return the names of the shipped materials."""
    return tuple(_table("materials.toml"))


def fasteners() -> tuple[str, ...]:
    """Return the names of the shipped fasteners."""
    return tuple(_table("fasteners.toml"))


def families() -> tuple[str, ...]:
    """Return the names of the shipped S-N families."""
    return tuple(_curve_files())


def strain_lives() -> tuple[str, ...]:
    """Return the names of the shipped strain-life constants."""
    return tuple(_table("strain-life.toml"))


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
        curve=entry.get("curve", ""),
        source=entry["source"],
        how=entry["how"],
        form=entry["form"],
        strain_life=entry.get("strain_life", ""),
        flag=entry.get("flag", ""),
        note=entry.get("note", ""),
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
        alloy=entry["alloy"],
    )


def strain_life(name: str) -> StrainLife:
    """Return shipped strain-life constants.

    Raises
    ------
    InputFaults
        If there are none of that name, or none at all (an empty name).

    Examples
    --------
    >>> strain_life("2024-T351").strength_coefficient
    1100.0
    """
    if name not in strain_lives():
        given = f'no strain-life constants "{name}".' if name else "the material has no strain-life constants."
        hint = f"{did_you_mean(name, strain_lives())} " if name else ""
        raise InputFaults(
            "strain_life",
            [
                Fault(
                    "",
                    given,
                    f"{hint}The local-strain life needs E, sf', b, ef', c, K' and n'; shipped are "
                    f"{listed(strain_lives(), 'and')}. Name one of them, or use the notched family.",
                )
            ],
        )
    entry = _table("strain-life.toml")[name]
    return StrainLife(
        name=name,
        modulus=float(entry["modulus_MPa"]),
        strength_coefficient=float(entry["strength_coefficient_MPa"]),
        strength_exponent=float(entry["strength_exponent"]),
        ductility_coefficient=float(entry["ductility_coefficient"]),
        ductility_exponent=float(entry["ductility_exponent"]),
        cyclic_strength=float(entry["cyclic_strength_MPa"]),
        cyclic_exponent=float(entry["cyclic_exponent"]),
        walker=float(entry["walker"]),
        notch_length=float(entry["notch_length_mm"]),
        source=entry["source"],
        how=entry["how"],
        walker_source=entry["walker_source"],
        notch_length_source=entry["notch_length_source"],
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
    if not name:
        raise InputFaults(
            "curve",
            [
                Fault(
                    "",
                    "the material has no S-N family: none was found with constants that could be defended.",
                    'Give your own: [material."..."] with curve = "your-file.toml"; `faying fit` makes one from tests.',
                )
            ],
        )
    if name in _curve_files():
        return _shipped(name)
    path = folder / name
    try:
        raw = tomllib.loads(path.read_bytes().decode("utf-8"))
    except OSError as error:
        raise InputFaults(str(path), [Fault("", f"the curve file cannot be read ({error.strerror}).")]) from None
    except (tomllib.TOMLDecodeError, UnicodeDecodeError, RecursionError) as error:
        raise InputFaults(str(path), [Fault("", f"not a valid TOML file: {error}.")]) from None
    return parse_family(raw, str(path), _shipped)


@cache
def _shipped(name: str) -> CurveFamily:
    """Return a shipped family; the KeyError for an unknown name also carries the known ones."""
    files = _curve_files()
    if name not in files:
        raise KeyError(name, families())
    return parse_family(_table(files[name]), files[name], _shipped)

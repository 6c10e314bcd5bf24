"""Records of what sheets and fasteners are made of."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Material:
    """A sheet material.

    Parameters
    ----------
    name : str
    modulus : float
        Young's modulus [MPa].
    poisson : float
    yield_stress : float
        Tensile yield, 0.2 % [MPa].
    ultimate : float
        Tensile strength [MPa].
    curve : str
        Name of the S-N family, or path of a curve file.
    source, how : str
        Where the values stand, and how they were obtained.
    form : str
        Product and thickness the values hold for.
    strain_life : str
        Name of the strain-life constants; empty where there are none.
    note : str
        What the reader must know before using it.
    flag : str
        What is said of every location in it.
    """

    name: str
    modulus: float
    poisson: float
    yield_stress: float
    ultimate: float
    curve: str
    source: str = ""
    how: str = ""
    form: str = ""
    strain_life: str = ""
    note: str = ""
    flag: str = ""


@dataclass(frozen=True)
class Fastener:
    """A fastener, by kind and alloy.

    Parameters
    ----------
    name : str
    kind : str
        ``solid-rivet``, ``clearance-bolt``, ``close-fit-bolt``, ``interference-pin``, ``tapered-pin`` or
        ``blind-rivet``.
    modulus : float
        Young's modulus of the shank [MPa].
    poisson : float
    source, how : str
    alloy : str
        Of the shank; what the trade knows of the kind and the shank's strength are in `fatigue.hole.kinds`.
    """

    name: str
    kind: str
    modulus: float
    poisson: float
    source: str = ""
    how: str = ""
    alloy: str = ""

    @property
    def riveted(self) -> bool:
        """Tell whether flexibility formulas treat it as a rivet rather than a bolt or pin."""
        return self.kind in ("solid-rivet", "blind-rivet")

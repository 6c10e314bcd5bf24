"""Where every number comes from, as text for the terminal."""

from __future__ import annotations

from textwrap import fill

import spectra
from fatigue.hole.kinds import fastener_kinds, shank_strengths
from fatigue.material import library
from fatigue.references import methods, references


def sources_text(topic: str | None = None) -> str:
    """Return the provenance of one topic, or of all."""
    topics = {
        "materials": _materials,
        "fasteners": _fasteners,
        "curves": _curves,
        "spectra": _spectra,
        "methods": _methods,
    }
    chosen = [topic] if topic else list(topics)
    return "\n\n".join("\n".join([name.upper(), *topics[name]()]) for name in chosen)


def _materials() -> list[str]:
    lines = []
    for name in library.materials():
        m = library.material(name)
        lines += [
            f"  {name}: E {m.modulus:g} MPa, nu {m.poisson:g}, yield {m.yield_stress:g} MPa, "
            f"strength {m.ultimate:g} MPa",
            f"    {m.form}; {m.source} [{m.how}]",
            f"    S-N family {m.curve or 'none: give your own in [material]'}; strain life {m.strain_life or 'none'}",
            *(f"    note: {text}" for text in (m.note, m.flag) if text),
        ]
    return lines


def _fasteners() -> list[str]:
    lines = []
    for name in library.fasteners():
        f = library.fastener(name)
        shank = f", {f.alloy}" if f.alloy else ""
        lines += [
            f"  {name}: {f.kind}{shank}, E {f.modulus:g} MPa, nu {f.poisson:g}",
            f"    {f.source} [{f.how}]",
        ]
    lines += ["", "  Kinds, for the practice factors, the flexibility formulas and `faying compare --kinds`:"]
    for kind in fastener_kinds().values():
        low, high = (100 * fit for fit in kind.usual_fit)
        lines += [
            f"  {kind.name}: {kind.words}",
            f"    usual fit {low:+g} to {high:+g} % of the hole [{kind.fit_source}]",
            f"    clamps {kind.clamps}; removable: {kind.removable}; needs locking: "
            f"{'yes' if kind.needs_locking else 'no'}; relative cost {kind.relative_cost} of 5 [{kind.source}]",
        ]
    lines += ["", "  Ultimate shear strength of installed shanks:"]
    for strength in shank_strengths().values():
        lines.append(f"  {strength.alloy}: {strength.driven_shear:g} MPa, {strength.source} [{strength.how}]")
    return lines


def _curves() -> list[str]:
    lines = []
    for name in library.families():
        family = library.family(name)
        lines += [
            f"  {name}: {family.source} [{family.how}]",
            f"    tested N {family.tested_cycles[0]:g} to {family.tested_cycles[1]:g}, "
            f"R {family.tested_ratio[0]:g} to {family.tested_ratio[1]:g}; constants for MPa:",
        ]
        lines += [
            f"    K_t {m.kt:<4g} A1 {m.a1:7.4f}  A2 {m.a2:6.3f}  A3 {m.a3:5.3f}  A4 {m.a4:7.3f}  figure {m.figure}"
            for m in family.members
        ]
    return lines


def _spectra() -> list[str]:
    lines = []
    for name, title in spectra.shipped().items():
        spectrum = spectra.read_spectrum(name)
        lines.append(f"  {name}: {title}; {sum(spectrum.flights.values())} flights a block, seed {spectrum.seed}")
    return lines


def _methods() -> list[str]:
    lines = []
    for m in methods():
        lines += [f"  {m.name} ({m.stage})", fill(m.formula, 96, initial_indent="    ", subsequent_indent="      ")]
        proof = f"evidence: faying evidence --subject '{m.evidence}'" if m.evidence else "evidence: laws in the tests"
        lines += [f"    code: {m.code}; {proof}"]
        lines += [fill(f"range: {m.range}", 96, initial_indent="    ", subsequent_indent="      ")]
        lines += [fill(str(references()[key]), 96, initial_indent="    ", subsequent_indent="      ") for key in m.keys]
    return lines


def theory_text() -> str:
    """Return the methods as a short page of theory, in Markdown."""
    lines = [
        "# What faying computes",
        "",
        "Written by `python -m tests.golden.samples` from the registry that `faying sources methods` prints.",
    ]
    stage = ""
    titles = {
        "loads": "Loads",
        "joint": "The joint",
        "hole": "The hole's edge",
        "life": "Life",
        "decision": "Decisions",
    }
    for m in methods():
        if m.stage != stage:
            stage = m.stage
            lines += ["", f"## {titles[stage]}"]
        proof = f"`faying evidence --subject '{m.evidence}'`" if m.evidence else "laws in the tests"
        lines += [
            "",
            f"**{m.name}**",
            "",
            f"    {m.formula}",
            "",
            f"Range: {m.range}. Code: `{m.code}`. Held by: {proof}.",
        ]
        lines += ["", *(f"- {references()[key]}" for key in m.keys)]
    return "\n".join(lines) + "\n"

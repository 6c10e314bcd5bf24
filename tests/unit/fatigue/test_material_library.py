"""The shipped library: every entry complete, sourced, and consistent with the others."""

import pytest

from fatigue.hole.kinds import fastener_kinds, shank_strengths
from fatigue.material import library
from spectra.faults import InputFaults

HOW = ("from memory", "read second-hand", "printed", "derived")


@pytest.mark.parametrize("name", library.materials())
def test_materials(name):
    m = library.material(name)
    assert 60e3 < m.modulus < 220e3
    assert 0.25 < m.poisson < 0.36
    assert 0 < m.yield_stress < m.ultimate < 2000
    assert m.source
    assert m.how.startswith(HOW)
    assert m.form
    assert m.curve in library.families() or (m.curve == "" and "no S-N family" in m.note)
    if m.strain_life:
        k = library.strain_life(m.strain_life)
        assert k.modulus == pytest.approx(m.modulus, rel=0.05)


@pytest.mark.parametrize("name", library.fasteners())
def test_fasteners(name):
    f = library.fastener(name)
    assert f.kind in fastener_kinds()
    assert f.alloy in shank_strengths()
    assert name.startswith(f.kind)
    assert f.source
    assert f.how.startswith(HOW)


@pytest.mark.parametrize("name", library.families())
def test_families(name):
    family = library.family(name)
    assert family.name == name
    assert family.source
    assert family.how
    assert (family.kt[1:] > family.kt[:-1]).all()


@pytest.mark.parametrize("name", library.strain_lives())
def test_strain_life_constants_hang_together(name):
    """The cyclic 0.2 % stress is near the yield of the materials that use the constants."""
    k = library.strain_life(name)
    assert k.source
    assert k.walker_source
    assert k.how.startswith(HOW)
    users = [m for m in map(library.material, library.materials()) if m.strain_life == name]
    assert users
    for user in users:
        assert 0.7 < k.cyclic_strength * 0.002**k.cyclic_exponent / user.yield_stress < 1.6


def test_unknown_names():
    for find in (library.material, library.fastener):
        with pytest.raises(KeyError):
            find("unobtainium")
    with pytest.raises(InputFaults, match=r'no strain-life constants "2024-T35"\. Did you mean 2024-T351'):
        library.strain_life("2024-T35")
    with pytest.raises(InputFaults, match="the material has no strain-life constants"):
        library.strain_life("")

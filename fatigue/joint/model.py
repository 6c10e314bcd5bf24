"""The joint solved: what every location carries, passes on and bends by."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.joint.beam import Beam, bend, build_beam
from fatigue.joint.chain import build_chain, in_double_shear, present
from fatigue.joint.transfer import solve_springs
from fatigue.splice import Splice
from spectra.faults import Fault

Array = NDArray[np.float64]

NEGLIGIBLE_BENDING = 1e-9
"""Bending below this share of the remote stress is rounding, and belongs to no face."""


@dataclass(frozen=True, eq=False)
class Joint:
    """Row loads and bending of a splice; arrays over locations follow `splice.locations`, shape (L,).

    Parameters
    ----------
    splice : Splice
    row, sheet : ndarray of int
    thickness : ndarray
        At the hole [mm].
    incoming, bypass, transfer : ndarray
        Load of the more and of the less loaded side of the row in that sheet, and the difference the fasteners take
        out of it or bring in, each over the remote load P = S W t.
    bypass_per_stress, transfer_per_stress : ndarray
        Bypass load/(W t) and transferred load/(W t), over S.
    bearing_per_stress : ndarray
        Load of one fastener/(d t), over S.
    remote_per_stress : ndarray, shape (sheets,)
        Each sheet's own remote gross stress over S; 0 where a sheet ends within the splice.
    face : tuple of str
        ``upper`` or ``lower``: the face in bending tension; empty where a location does not bend.
    hidden : ndarray of bool
        Whether that face lies against another sheet; without bending, whether either face does.
    flexibility : ndarray, shape (interfaces,)
        Per total fastener load [mm/N].
    equilibrium_residual : float
        Largest out-of-balance force over the remote load.
    beam : Beam
    """

    splice: Splice
    row: NDArray[np.int64]
    sheet: NDArray[np.int64]
    thickness: Array
    incoming: Array
    bypass: Array
    transfer: Array
    bypass_per_stress: Array
    transfer_per_stress: Array
    bearing_per_stress: Array
    remote_per_stress: Array
    face: tuple[str, ...]
    hidden: NDArray[np.bool_]
    interfaces: tuple[tuple[int, int, int, int], ...]
    flexibility: Array
    equilibrium_residual: float
    beam: Beam

    def bending(self, levels: Array) -> Array:
        """Return the bending stress at each location's face, shape (L, n) [MPa]; tension positive.

        Parameters
        ----------
        levels : ndarray, shape (n,)
            Remote gross stress [MPa].
        """
        levels = np.asarray(levels, dtype=np.float64)
        if self.splice.bending == "none":
            return np.zeros((self.row.size, levels.size))
        upper = bend(self.splice, self.beam, levels).upper
        sign = np.array([{"upper": 1.0, "lower": -1.0, "": 0.0}[face] for face in self.face])
        return np.asarray(upper * sign[:, None])


def solve_joint(splice: Splice) -> Joint:
    """Solve row loads and bending of a splice.

    Parameters
    ----------
    splice : Splice

    Returns
    -------
    Joint

    Raises
    ------
    ValueError
        If `joint_faults` would have found the splice impossible.
    """
    chain = build_chain(splice)
    try:
        solution = solve_springs(chain.incidence, chain.stiffness, chain.load)
    except np.linalg.LinAlgError:
        raise ValueError("some sheet of the splice is held by nothing") from None
    sheets, rows, width = splice.sheets, splice.rows, splice.width
    row, sheet = np.array(splice.locations, dtype=np.int64).T
    before, after = np.zeros(row.size), np.zeros(row.size)
    gained = np.zeros((len(rows), len(sheets)))
    for r, upper, lower, spring in chain.interfaces:
        gained[r, upper] += solution.force[spring]
        gained[r, lower] -= solution.force[spring]
    for i, (r, s) in enumerate(splice.locations):
        own = sheets[s]
        if r > own.first_row:
            before[i] = solution.force[chain.bays[r - 1, s]]
        elif own.start == "loaded":
            before[i] = 1.0
        after[i] = before[i] - gained[r, s]
    tidy = np.abs(after) < 1e-12
    after[tidy] = 0.0
    bigger = np.abs(before) >= np.abs(after)
    incoming = np.where(bigger, before, after)
    bypass = np.where(bigger, after, before)
    transfer = np.abs(before - after)
    first = sheets[splice.first_loaded]
    remote = first.thickness_after(first.first_row - 1)
    thickness = np.array([sheets[s].thickness_at(r) for r, s in splice.locations])
    diameter = np.array([rows[r].hole_diameter for r in row])
    pitch = np.array([rows[r].pitch for r in row])
    own_remote = np.zeros(len(sheets))
    for i, (r, s) in enumerate(splice.locations):
        if sheets[s].start == "loaded" and r == sheets[s].first_row:
            own_remote[s] = before[i] * remote / sheets[s].thickness_after(r - 1)
        if sheets[s].end != "free" and r == sheets[s].last_row:
            own_remote[s] = after[i] * remote / sheets[s].thickness_after(r)
    beam = build_beam(splice)
    face, hidden = _faces(splice, beam)
    return Joint(
        splice=splice,
        row=row,
        sheet=sheet,
        thickness=thickness,
        incoming=np.abs(incoming),
        bypass=bypass * np.sign(incoming),
        transfer=transfer,
        bypass_per_stress=bypass * np.sign(incoming) * remote / thickness,
        transfer_per_stress=transfer * remote / thickness,
        bearing_per_stress=transfer * remote * pitch / (diameter * thickness),
        remote_per_stress=own_remote,
        face=face,
        hidden=hidden,
        interfaces=chain.interfaces,
        flexibility=chain.flexibility,
        equilibrium_residual=float(solution.residual),
        beam=beam,
    )


def _faces(splice: Splice, beam: Beam) -> tuple[tuple[str, ...], NDArray[np.bool_]]:
    """Return the face of each location that bending puts in tension, and whether another sheet covers it."""
    faces, hidden = [], []
    upper = np.zeros(len(splice.locations))
    if splice.bending != "none":
        upper = bend(splice, beam, np.array([1.0])).upper[:, 0]
    for (r, s), stress in zip(splice.locations, upper, strict=True):
        stack = present(splice, r)
        covered = {"upper": s != stack[0], "lower": s != stack[-1]}
        face = "" if abs(stress) < NEGLIGIBLE_BENDING else ("upper" if stress > 0 else "lower")
        faces.append(face)
        hidden.append(covered[face] if face else any(covered.values()))
    return tuple(faces), np.array(hidden)


def joint_faults(splice: Splice) -> list[Fault]:
    """Return what makes a splice impossible as a mechanism, in words.

    Parameters
    ----------
    splice : Splice
        Names and geometry already checked one by one.
    """
    faults = []
    for r, row in enumerate(splice.rows):
        stack = present(splice, r)
        if len(stack) < 2:
            names = f"only {splice.sheets[stack[0]].name}" if stack else "no sheet"
            faults.append(
                Fault(f'row "{row.name}"', f"has its holes in {names}.", "A row joins two sheets at least.")
            )
        if in_double_shear(splice, r) and splice.flexibility != "huth" and row.flexibility is None:
            faults.append(
                Fault(
                    "splice.flexibility",
                    f'"{splice.flexibility}" is a single-shear formula and row {row.name} is in double shear.',
                    'Use "huth" or give flexibility_mm_per_N.',
                )
            )
    return faults + _disconnected(splice)


def _disconnected(splice: Splice) -> list[Fault]:
    """Return a fault for every sheet that no chain of fasteners ties to the one the load comes in by."""
    reached = {splice.first_loaded}
    stacks = [set(present(splice, r)) for r in range(len(splice.rows))]
    while new := {s for stack in stacks if stack & reached for s in stack} - reached:
        reached |= new
    faults = [
        Fault(f'sheet "{sheet.name}"', "shares no row with the sheets that carry the load.", "Extend it or its neighbours.")
        for s, sheet in enumerate(splice.sheets)
        if s not in reached
    ]
    return list(dict.fromkeys(faults))

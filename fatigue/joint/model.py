"""The joint solved: what every location carries, passes on and bends by."""

from __future__ import annotations

from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.joint.beam import Beam, Bender, bending_stress, build_bender, face_sign
from fatigue.joint.flexibility import FORMULAS, SINGLE_SHEAR_ONLY
from fatigue.joint.layout import JointArrays, Layout, arrays_of, layout_of
from fatigue.joint.locations import LocationStress, location_loads, location_stress
from fatigue.joint.slack import SlackPath, follow_slack
from fatigue.joint.transfer import row_loads, segment_loads
from fatigue.splice import Splice

Array = NDArray[np.float64]

FACES = {1: "upper", -1: "lower", 0: ""}
"""Names of the faces by the sign of the bending stress at the upper one."""


@dataclass(frozen=True, eq=False)
class Joint:
    """Row loads and bending of a splice; arrays over locations follow `splice.locations`, shape (L,).

    Where rows have slack the loads are not in proportion to S: what is given here over P or S is then the limit of a
    heavy load, with every gap closed and forgotten, and `loads` gives the loads at any stress.

    Parameters
    ----------
    splice : Splice
    row, sheet : ndarray of int
    thickness : ndarray
        At the hole [mm].
    incoming, bypass, transfer : ndarray
        Load of the more and of the less loaded side of the row in that sheet, and the difference the fasteners take
        out of it or bring in, each over the remote load P = S W t.
    incoming_before : ndarray of bool
        Whether the more loaded side is the one before the row.
    bypass_per_stress, transfer_per_stress : ndarray
        Bypass load/(W t) and transferred load/(W t), over S.
    bearing_per_stress : ndarray
        Load of one fastener/(d t), over S; without the share that friction carries.
    remote_per_stress : ndarray, shape (sheets,)
        Each sheet's own remote gross stress over S; 0 where a sheet ends within the splice.
    segment_load : ndarray, shape (rows + 1, sheets)
        Load of every sheet before the first row, after it, ... over P.
    face : tuple of str
        ``upper`` or ``lower``: the face in bending tension at the stress the joint was solved with; empty where a
        location does not bend.
    hidden : ndarray of bool
        Whether that face lies against another sheet; without bending, whether either face does.
    interfaces : tuple of (row, upper sheet, lower sheet)
        The shear planes.
    flexibility : ndarray, shape (interfaces,)
        Per total fastener load [mm/N].
    closing_stress : ndarray, shape (interfaces,)
        Remote stress at which a shear plane first carries load: 0 where it is tight, infinite where it never does
        [MPa].
    equilibrium_residual, free_body : float
        Largest out-of-balance force of a sheet, and of all sheets of one cut, over the remote load.
    beam : Beam
    """

    splice: Splice
    row: NDArray[np.int64]
    sheet: NDArray[np.int64]
    thickness: Array
    incoming: Array
    bypass: Array
    transfer: Array
    incoming_before: NDArray[np.bool_]
    bypass_per_stress: Array
    transfer_per_stress: Array
    bearing_per_stress: Array
    remote_per_stress: Array
    segment_load: Array
    face: tuple[str, ...]
    hidden: NDArray[np.bool_]
    interfaces: tuple[tuple[int, int, int], ...]
    flexibility: Array
    closing_stress: Array
    equilibrium_residual: float
    free_body: float
    beam: Beam
    layout: Layout
    arrays: JointArrays
    tight_shear: Array
    slack: SlackPath | None
    bender: Bender

    def __post_init__(self) -> None:
        for field in fields(self):
            value = getattr(self, field.name)
            if isinstance(value, np.ndarray):
                value.setflags(write=False)

    def bending(self, levels: ArrayLike) -> Array:
        """Return the bending stress at each location's face, tension positive.

        The face is the one in tension at the stress the joint was solved with; at another the sign may turn. In
        compression the arm of a vanishing load is held.

        Parameters
        ----------
        levels : array_like, shape (n,)
            Remote gross stress [MPa].

        Returns
        -------
        ndarray, shape (L, n)
            [MPa]
        """
        levels = np.atleast_1d(np.asarray(levels, dtype=np.float64))
        return bending_stress(self.layout, self.bender, levels)

    def k_bend_ratio(self, level: float) -> Array:
        """Return bending over tension, k_b, of every location at a remote stress, shape (L,).

        Tension is the gross stress of the sheet on the more loaded side of the row; NaN where it carries none.
        """
        bend = self.bending(level)[:, 0]
        tension = self.loads(level).incoming[:, 0]
        ratio = np.full(bend.shape, np.nan)
        np.divide(bend, tension, out=ratio, where=tension != 0.0)
        return ratio

    def loads(self, levels: ArrayLike) -> LocationStress:
        """Return incoming, bypass, transfer and bearing stress of every location, signed as the load is.

        Parameters
        ----------
        levels : array_like, shape (n,)
            Remote gross stress [MPa].

        Returns
        -------
        LocationStress
            Of shape (L, n) [MPa].
        """
        levels = np.atleast_1d(np.asarray(levels, dtype=np.float64))
        segment = segment_loads(self.layout, self.shear(levels).T)
        own = location_stress(self.layout, self.arrays, location_loads(self.layout, segment))
        return LocationStress(
            incoming=own.incoming.T * levels,
            bypass=own.bypass.T * levels,
            transfer=own.transfer.T * levels,
            bearing=own.bearing.T * levels,
        )

    def shear(self, levels: ArrayLike) -> Array:
        """Return the load of every shear plane over the remote load at remote stresses, shape (interfaces, n)."""
        levels = np.atleast_1d(np.asarray(levels, dtype=np.float64))
        if self.slack is None:
            return np.outer(self.tight_shear, np.ones_like(levels))
        at = np.where(levels == 0.0, 1e-12, levels)
        remote = at * float(self.arrays.width * self.arrays.first_thickness(self.layout))
        return np.asarray((self.slack.at(at) / remote[:, None]).T)


def solve_joint(splice: Splice, stress: float | None = None) -> Joint:
    """Solve row loads and bending of a splice.

    Parameters
    ----------
    splice : Splice
    stress : float, optional
        Remote gross stress, above 0, at which the side of each row that bends harder and its face in tension are found:
        best the largest of the spectrum. A strain of 1/720 if not given [MPa].

    Returns
    -------
    Joint

    Raises
    ------
    ValueError
        If `joint_faults` would have found the splice impossible.

    Examples
    --------
    >>> import fatigue
    >>> joint = solve_joint(fatigue.read_case(fatigue.demo_case()).splice)
    >>> joint.face[:2], joint.hidden[:2].tolist()
    (('lower', 'upper'), [True, True])
    """
    layout, arrays = layout_of(splice), arrays_of(splice)
    chain = row_loads(layout, arrays)
    loads = location_loads(layout, chain.segment)
    per_stress = location_stress(layout, arrays, loads)
    path = follow_slack(layout, arrays) if (arrays.slack > 0.0).any() else None
    bender = build_bender(layout, arrays, stress)
    sign = face_sign(bender.upper) if layout.bends else np.zeros(layout.row.size)
    return Joint(
        splice=splice,
        row=layout.row,
        sheet=layout.sheet,
        thickness=arrays.at_holes[layout.row, layout.sheet],
        incoming=loads.incoming,
        bypass=loads.bypass,
        transfer=loads.transfer,
        incoming_before=loads.incoming_before,
        bypass_per_stress=per_stress.bypass,
        transfer_per_stress=per_stress.transfer,
        bearing_per_stress=per_stress.bearing,
        remote_per_stress=remote_stress(layout, arrays, chain.segment),
        segment_load=chain.segment,
        face=tuple(FACES[int(s)] for s in sign),
        hidden=hidden_faces(layout, sign),
        interfaces=tuple(zip(layout.interface_row.tolist(), layout.upper.tolist(), layout.lower.tolist(), strict=True)),
        flexibility=chain.flexibility,
        closing_stress=np.zeros(layout.upper.size) if path is None else path.closing,
        equilibrium_residual=float(chain.residual),
        free_body=float(chain.free_body),
        beam=bender.beam,
        layout=layout,
        arrays=arrays,
        tight_shear=chain.shear,
        slack=path,
        bender=bender,
    )


def remote_stress(layout: Layout, arrays: JointArrays, segment: Array) -> Array:
    """Return each sheet's own gross stress far from the rows over S, shape (..., s); 0 where it ends within them."""
    far = np.where(segment[..., 0, :] != 0.0, 0, layout.rows)
    load = np.where(far == 0, segment[..., 0, :], segment[..., -1, :])
    thickness = np.where(far == 0, arrays.thickness[..., 0, :], arrays.thickness[..., -1, :])
    return np.asarray(load * arrays.first_thickness(layout)[..., None] / thickness)


def hidden_faces(layout: Layout, sign: Array) -> NDArray[np.bool_]:
    """Tell of every location whether its face lies against another sheet; without a face, whether either does."""
    holes = layout.holes.astype(np.int64)
    so_far = np.cumsum(holes, axis=1)[layout.row, layout.sheet]
    above, below = so_far > 1, so_far < holes.sum(axis=1)[layout.row]
    return np.asarray(np.where(sign > 0, above, np.where(sign < 0, below, above | below)))


def compare_flexibilities(splice: Splice) -> dict[str, Joint]:
    """Return the joint solved with every published flexibility, by the formula's name.

    Measured values give way to the formulas, which is the point; a formula that does not hold for the splice, being
    for single shear only, is left out.

    Parameters
    ----------
    splice : Splice
    """
    plain = replace(splice, rows=tuple(replace(row, flexibility=None) for row in splice.rows))
    double = bool((layout_of(splice).planes == 2).any())
    return {
        name: solve_joint(replace(plain, flexibility=name))
        for name in FORMULAS
        if not (double and name in SINGLE_SHEAR_ONLY)
    }

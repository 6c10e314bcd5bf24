"""Row loads: sheets as chains of axial springs, fasteners as shear springs between them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class SpringSolution:
    """Displacements and forces of a network of springs, with leading batch dimensions.

    Parameters
    ----------
    displacement : ndarray, shape (..., N)
        Of every free node along the load [mm].
    force : ndarray, shape (..., m)
        In every spring, positive when its `to` node moves ahead of its `from` node [N].
    residual : ndarray, shape (...)
        Largest out-of-balance force of any node over the largest applied one.
    """

    displacement: Array
    force: Array
    residual: Array


def solve_springs(incidence: Array, stiffness: Array, load: Array) -> SpringSolution:
    """Solve a network of springs for any number of variants at once.

    With the incidence matrix B (a row per spring: -1 at its `from` node, +1 at its `to` node, nothing for ground) the
    elongations are B u, the forces k B u, and equilibrium is B^T diag(k) B u = p.

    Parameters
    ----------
    incidence : ndarray, shape (m, N)
    stiffness : ndarray, shape (..., m)
        Spring stiffnesses, positive; zero takes a spring out [N/mm].
    load : ndarray, shape (..., N)
        Applied forces [N].

    Returns
    -------
    SpringSolution

    Raises
    ------
    numpy.linalg.LinAlgError
        If some node is held by nothing.
    """
    matrix = (incidence.T * stiffness[..., None, :]) @ incidence
    displacement = np.linalg.solve(matrix, load[..., None])[..., 0]
    force = stiffness * (displacement @ incidence.T)
    balance = force @ incidence - load
    return SpringSolution(displacement, force, np.abs(balance).max(axis=-1) / np.abs(load).max(axis=-1))

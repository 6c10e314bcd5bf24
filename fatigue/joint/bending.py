"""Secondary bending by the neutral-line model (Schijve 1972; Hartman and Schijve 1969).

The load's line of action is straight between its supports; u(x) is its height above the neutral line of the bent
joint. In a segment of constant section u'' = alpha^2 u with alpha^2 = P/(E I); where the neutral line jumps, u jumps by
as much the other way while u' goes on. Sections are taken per unit width.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

LIGHTEST = {"pinned": 1e-7, "clamped": 1e-4}
"""Largest alpha L of the segments at which a load counts as vanishing. Arms then differ from the limit by its square;
between two clamped ends less would lose digits, as it is the bending by the load alone that says where it acts."""


def section(modulus: ArrayLike, thickness: ArrayLike, height: ArrayLike) -> tuple[Array, Array]:
    """Return neutral height and bending stiffness of sheets bent as one solid beam.

    Parameters
    ----------
    modulus, thickness, height : array_like, shape (..., sheets)
        Young's moduli [MPa], thicknesses (0 where a sheet is absent) and heights of the mid-planes [mm].

    Returns
    -------
    neutral_height : ndarray, shape (...)
        [mm]
    stiffness : ndarray, shape (...)
        E I per unit width [N mm].
    """
    e, t, z = (np.asarray(value, dtype=np.float64) for value in (modulus, thickness, height))
    stretch = e * t
    neutral = np.einsum("...s,...s->...", stretch, z) / np.einsum("...s->...", stretch)
    arm = z - neutral[..., None]
    return neutral, np.einsum("...s,...s->...", stretch, t * t / 12 + arm * arm)


def lever_arms(
    length: ArrayLike, stiffness: ArrayLike, neutral_height: ArrayLike, load: ArrayLike, ends: str, symmetric: bool
) -> tuple[Array, Array]:
    """Return the lever arm of the load at both ends of every segment.

    Within a segment w = u + (neutral height) has w'' = alpha^2 (w - neutral height), and w and w' are continuous all
    along. The unknowns are w at the stations between the segments; continuity of w' at each makes a tridiagonal system
    with off-diagonals alpha/sinh(alpha L) and an excess of the diagonal over them of alpha tanh(alpha L/2) per
    neighbour. Eliminating with the excess instead of the diagonal needs no subtraction (after Grassmann, Taksar and
    Heyman 1985), so that neither long, highly loaded nor short, lightly loaded segments lose digits.

    Parameters
    ----------
    length, stiffness, neutral_height : array_like, shape (m, ...)
        Of the m segments in order along the load: length [mm], E I per unit width [N mm], height of the neutral line
        [mm]. What follows the first axis are batch dimensions.
    load : array_like, shape (...)
        Load per unit width, broadcasting with those [N/mm]. Below (1e-7)^2 E I/L^2 of the softest segment, in
        compression too, the limit of a vanishing tension is taken.
    ends : str
        ``pinned`` or ``clamped``: the far ends of the free lengths.
    symmetric : bool
        The last segment ends at a line of symmetry rather than at a support.

    Returns
    -------
    at_start, at_end : ndarray, shape (m, ...)
        Height of the load above the neutral line at each segment's two ends [mm].

    References
    ----------
    Schijve 1972, Hartman and Schijve 1969; keys ``schijve-1972``, ``hartman-schijve-1969``, ``gth-1985``.

    Examples
    --------
    An equal lap of 2 mm sheets under 100 MPa: 6 u/t is its bending ratio just outside the overlap.

    >>> single, double = 72e3 * 2**3 / 12, 72e3 * 4**3 / 12
    >>> arms = lever_arms([150, 56, 150], [single, double, single], [1, 0, -1], 200.0, "pinned", False)
    >>> round(6 * abs(float(arms[1][0])) / 2, 5)
    1.15568
    """
    length, stiffness, z, load = (np.asarray(v, dtype=np.float64) for v in (length, stiffness, neutral_height, load))
    batch = np.broadcast_shapes(length.shape[1:], stiffness.shape[1:], z.shape[1:], load.shape)
    # batch dimensions that the segments lack are leading ones of the load
    length, stiffness, z = (
        v.reshape(len(v), *[1] * (len(batch) - v.ndim + 1), *v.shape[1:]) for v in (length, stiffness, z)
    )
    spring = stiffness / length**2
    limit = LIGHTEST["pinned" if symmetric else ends]
    root_load = np.sqrt(np.maximum(load, limit**2 * spring.min(axis=0)))
    stations = station_heights(length, np.sqrt(1 / stiffness), z, root_load, ends == "clamped", symmetric)
    at = np.stack([np.broadcast_to(w, batch) for w in stations])
    return at[:-1] - z, at[1:] - z


def station_heights(
    length: Array, root_softness: Array, z: Array, root_load: Array, clamped: bool, symmetric: bool
) -> list[Array]:
    """Return w = u + (neutral height) at every station, the ends of the beam included.

    Parameters
    ----------
    length, root_softness, z : ndarray, shape (m, ...)
        Of the segments: length [mm], 1/sqrt(E I), neutral height [mm].
    root_load : ndarray, shape (...)
        Square root of the load, above 0.
    clamped, symmetric : bool

    Returns
    -------
    list of ndarray, m + 1 of shape (...)
        [mm]
    """
    m = len(length)
    coupling: list[Array] = []
    excess: list[Array] = []
    pull: list[Array] = []
    for i in range(m):
        if i and np.array_equal(length[i], length[i - 1]) and np.array_equal(root_softness[i], root_softness[i - 1]):
            coupling.append(coupling[-1])  # equal bays behave alike
            excess.append(excess[-1])
            pull.append(pull[-1] if np.array_equal(z[i], z[i - 1]) else excess[-1] * z[i])
            continue
        half = root_load * (root_softness[i] * 0.5)
        tanh = np.tanh(half * length[i])
        own = half * tanh
        across = half / tanh
        across -= own
        own += own
        coupling.append(across)
        excess.append(own)
        pull.append(own * z[i])
    if not clamped or symmetric:
        return _sweep(coupling, excess, pull, z, clamped, symmetric, 0.0)
    # both ends keep their direction: the line of action tilts by what brings its far end back to its height
    level = _sweep(coupling, excess, pull, z, True, False, 0.0)
    nothing = [np.zeros_like(p) for p in pull]
    tilted = _sweep(coupling, excess, nothing, 0 * z, True, False, 1.0)
    tilt = (level[-1] - level[0]) / (length.sum(axis=0) - (tilted[-1] - tilted[0]))
    return [w + tilt * per_tilt for w, per_tilt in zip(level, tilted, strict=True)]


def _sweep(
    coupling: list[Array], excess: list[Array], pull: list[Array], z: Array, clamped: bool, symmetric: bool, tilt: float
) -> list[Array]:
    """Eliminate station by station: w_i = value_i + ratio_i w_(i+1), then back."""
    m = len(coupling)
    ratio = [coupling[0]] * m
    value: list[Array] = [z[0] + np.zeros_like(coupling[0])]
    kept = coupling[0]  # how hard the stations so far hold the next one
    if clamped:
        pivot = coupling[0] + excess[0]
        ratio[0] = coupling[0] / pivot
        value[0] = (pull[0] - tilt) / pivot
        kept = excess[0] * ratio[0]
    for i in range(1, m):
        over = excess[i - 1] + excess[i]
        over += kept
        per_pivot = np.reciprocal(over + coupling[i])
        towards = coupling[i] * per_pivot
        gain = coupling[i - 1] * value[i - 1]
        gain += pull[i - 1]
        gain += pull[i]
        gain *= per_pivot
        value.append(gain)
        ratio[i] = towards
        kept = over
        kept *= towards
    if clamped or symmetric:
        last = coupling[m - 1] * value[m - 1] + pull[m - 1] + tilt
        last /= excess[m - 1] + kept
    else:
        last = z[m - 1] + np.zeros_like(coupling[0])
    value.append(last)
    for i in range(m - 1, -1 if clamped else 0, -1):
        value[i] += ratio[i] * value[i + 1]
    return value

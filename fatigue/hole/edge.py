"""Route `contact`: hoop stress at fixed points of the hole's edge against load, by the solved pin contact."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from fatigue.hole.contact import POINTS, Contact, Pin, PinInHole
from fatigue.hole.sheet import Edge, sheet_edge

Array = NDArray[np.float64]

CRITICAL = np.arange(45.0, 136.0)
"""Points of the edge a crack may start at, from the load axis on the pin-load side [deg]."""
CRITICAL.setflags(write=False)
FRICTION_BEARING, FRICTION_BYPASS = 0.62, 0.20
"""Rise of the pin's part and of the bypass part per unit of friction, snug pin: 12 and 4 % at 0.2."""


@dataclass(frozen=True, eq=False)
class EdgeMaps:
    """Hoop stress around the edge of every location's hole against load.

    Parameters
    ----------
    theta : ndarray, shape (T,)
        From the load axis on the pin-load side [deg].
    resisted, outside : ndarray, shape (L, T, n)
        Hoop stress by the two ways of adding secondary bending: the pin resists the ovalling it causes, or it adds to
        the solved contact. Neither is always the safe one: let the shorter life govern [MPa].
    contact_from, contact_to : ndarray, shape (L, n)
        Ends of the contact, bending left out; NaN where nothing touches [deg].
    separates : ndarray of bool, shape (L,)
        Whether contact is lost anywhere on the edge at any level.
    open_factor : ndarray, shape (L,)
        Factor on gross bypass stress of the same hole left open, at 90 deg.
    residual : ndarray, shape (L,)
        Stress left on the sheet's boundary by the collocation, over unit load.
    """

    theta: Array
    resisted: Array
    outside: Array
    contact_from: Array
    contact_to: Array
    separates: NDArray[np.bool_]
    open_factor: Array
    residual: Array

    def __post_init__(self) -> None:
        for array in (self.resisted, self.outside, self.contact_from, self.contact_to, self.open_factor):
            array.setflags(write=False)


@lru_cache(maxsize=32)
def pin_in_hole(
    edge: Edge,
    width_ratio: float,
    end_ratio: float,
    modulus: float,
    poisson: float,
    pin_modulus: float,
    pin_poisson: float,
    points: int = POINTS,
) -> PinInHole:
    """Return a pin in a hole, made once for all that share it; see `sheet_edge` and `PinInHole`."""
    return PinInHole(sheet_edge(edge, width_ratio, end_ratio, poisson), modulus, Pin(pin_modulus, pin_poisson), points)


def solve_outwards(hole: PinInHole, bypass: Array, bearing: Array, fit: float) -> Contact:
    """Solve the contact at levels in ascending order, each way from the one nearest to no load."""
    start = int(np.argmin(np.abs(bypass) + np.abs(bearing)))
    order = np.concatenate([np.arange(start, bypass.size), np.arange(start - 1, -1, -1)])
    up = hole.solve(bypass[start:], bearing[start:], fit)
    if start == 0:
        return up
    down = hole.solve(bypass[:start][::-1], bearing[:start][::-1], fit)
    back = np.argsort(order)
    parts = (
        np.concatenate([getattr(up, name), getattr(down, name)])[back] for name in ("pressure", "gap", "shift", "hoop")
    )
    return Contact(up.theta, *parts)


def bending_around(theta: ArrayLike, k_bend: ArrayLike) -> Array:
    """Return hoop stress around an open hole per unit bending stress: 1 - (K_bend - 1) cos 2t.

    Exact for a thin sheet, where K_bend = (5 + 3 nu)/(3 + nu); scaled to K_bend at 90 deg otherwise.

    References
    ----------
    Goodier 1936; key ``goodier-1936``.
    """
    return np.asarray(1 - (np.asarray(k_bend) - 1) * np.cos(2 * np.radians(theta)))


def raised_loads(
    bypass: Array, bearing: Array, width_ratio: float, tilt: float = 1.0, friction: float = 0.0
) -> tuple[Array, Array]:
    """Return bypass and bearing with what tilt and friction do to them, as stated multipliers [MPa].

    Both raise the pin's pressure where it is worst, not its load on the sheet: half the extra reaction is taken off the
    bypass again.

    Parameters
    ----------
    bypass, bearing : ndarray
        [MPa]
    width_ratio : float
        d/W.
    tilt : float
        Peak over mean pressure through the thickness.
    friction : float
        Coefficient, to 0.3.

    Notes
    -----
    Friction is not solved: its multipliers are those of a snug pin in plane-stress elements with Coulomb friction,
    where 0.2 raised the peak by 11-12 % under the pin load alone, by 4 % under bypass alone and by 6-8 % under both.
    Interference fits with friction were not computed.

    References
    ----------
    Key ``friction-elements``.
    """
    raised = tilt * (1 + FRICTION_BEARING * friction)
    passing = (1 + FRICTION_BYPASS * friction) * bypass - (raised - 1) * width_ratio * bearing / 2
    return np.asarray(passing), np.asarray(raised * bearing)


def edge_maps(
    *,
    bypass: Array,
    bearing: Array,
    bend: Array,
    edge: Edge,
    width_ratio: ArrayLike,
    end_ratio: ArrayLike = np.inf,
    modulus: ArrayLike,
    poisson: ArrayLike,
    pin_modulus: ArrayLike,
    pin_poisson: ArrayLike,
    fit: ArrayLike,
    k_bend: ArrayLike,
    sink: ArrayLike = 1.0,
    tilt: ArrayLike = 1.0,
    friction: ArrayLike = 0.0,
    theta: Array = CRITICAL,
) -> EdgeMaps:
    """Map load to hoop stress at fixed points of the edge, for every location.

    Parameters
    ----------
    bypass, bearing, bend : ndarray, shape (L, n)
        Bypass load/(W t), F/(d t) and nominal bending stress at the levels, signed by the load: bearing is positive
        where the pin pushes towards theta = 0, away from where the pin's load comes from [MPa].
    edge : str
        ``row``, ``strip`` or ``wide``.
    width_ratio, end_ratio : array_like, shape (L,)
        d/W; end distance/d on the pin-load side, infinite where no end is near.
    modulus, poisson, pin_modulus, pin_poisson : array_like, shape (L,)
        [MPa]
    fit : array_like, shape (L,)
        Interference over the hole diameter; negative is clearance.
    k_bend : array_like, shape (L,)
        Factor on the bending stress.
    sink, tilt : array_like, shape (L,)
        Countersink factor, on all but bending; head-fixity factor, on the pin's pressure.
    friction : array_like, shape (L,)
        Coefficient of friction: raises the pin's part by 0.62 of it and the bypass by 0.20 of it.
    theta : ndarray, shape (T,)
        Whole degrees from 0 to 180.

    Returns
    -------
    EdgeMaps

    Raises
    ------
    ValueError
        If theta does not lie on the grid.

    References
    ----------
    Contact solution derived for this project; keys ``pin-contact``, ``sheet-collocation``.

    Examples
    --------
    >>> import numpy as np
    >>> one = np.array([[0.0, 100.0]])
    >>> maps = edge_maps(bypass=one, bearing=0 * one, bend=0 * one, edge="wide", width_ratio=0.0, modulus=72e3,
    ...     poisson=0.33, pin_modulus=72e3, pin_poisson=0.33, fit=0.005, k_bend=1.8)
    >>> hoop = maps.resisted[0, maps.theta == 90.0][0]
    >>> round(float(hoop[1] - hoop[0]), 1)
    175.0
    """
    bypass, bearing, bend = np.broadcast_arrays(*np.atleast_2d(bypass, bearing, bend))
    places, levels = bypass.shape
    x, end, e, nu, ep, nup, fits, k_bends, sinks, tilts, mus = (
        np.broadcast_to(np.asarray(value, dtype=np.float64), (places,))
        for value in (
            width_ratio, end_ratio, modulus, poisson, pin_modulus, pin_poisson, fit, k_bend, sink, tilt, friction,
        )
    )  # fmt: skip
    step = 180 / (POINTS - 1)
    points = np.rint(theta / step).astype(np.int64)
    if not np.allclose(points * step, theta) or points.min() < 0 or points.max() >= POINTS:
        raise ValueError("theta must lie on the grid of whole degrees from 0 to 180")
    resisted = np.empty((places, theta.size, levels))
    outside = np.empty_like(resisted)
    ends = np.empty((2, places, levels))
    separates = np.zeros(places, dtype=np.bool_)
    open_factor, residual = np.empty(places), np.empty(places)
    alike = _first_alike(
        np.column_stack([bypass, bearing, bend, x, end, e, nu, ep, nup, fits, k_bends, sinks, tilts, mus])
    )
    for i in np.unique(alike).tolist():
        hole = pin_in_hole(edge, *(float(v[i]) for v in (x, end, e, nu, ep, nup)))
        open_factor[i], residual[i] = hole.sheet.open_factor, hole.sheet.residual
        passing, pressing = raised_loads(bypass[i], bearing[i], float(x[i]), float(tilts[i]), float(mus[i]))
        plain = solve_outwards(hole, passing, pressing, float(fits[i]))
        ends[:, i] = contact_ends(plain)
        separates[i] = not plain.closed.all()
        outside[i] = sinks[i] * plain.hoop[:, points].T + bend[i] * bending_around(theta, k_bends[i])[:, None]
        if bend[i].any():
            ovalled = passing + k_bends[i] / (open_factor[i] * sinks[i]) * bend[i]
            bent = solve_outwards(hole, ovalled, pressing, float(fits[i]))
            resisted[i] = sinks[i] * bent.hoop[:, points].T
        else:
            resisted[i] = outside[i]
    return EdgeMaps(
        theta,
        resisted[alike],
        outside[alike],
        ends[0][alike],
        ends[1][alike],
        separates[alike],
        open_factor[alike],
        residual[alike],
    )


def _first_alike(inputs: Array) -> NDArray[np.intp]:
    """Return for each line the first one that differs from it by rounding only: a symmetric joint is solved once."""
    with np.errstate(divide="ignore"):
        digits = 10.0 ** (10 - np.ceil(np.log10(np.abs(inputs).max(axis=0, where=np.isfinite(inputs), initial=1e-9))))
    rounded = np.where(np.isfinite(inputs), np.round(inputs * digits), inputs) + 0.0
    _, first, inverse = np.unique(rounded, axis=0, return_index=True, return_inverse=True)
    return np.asarray(first[inverse.reshape(-1)])


def contact_ends(contact: Contact) -> tuple[Array, Array]:
    """Return the first and last angle in contact at each load, NaN where nothing touches [deg]."""
    closed = contact.closed
    any_closed = closed.any(axis=1)
    degrees = np.degrees(contact.theta)
    first = np.where(any_closed, degrees[np.argmax(closed, axis=1)], np.nan)
    last = np.where(any_closed, degrees[closed.shape[1] - 1 - np.argmax(closed[:, ::-1], axis=1)], np.nan)
    return first, last


@dataclass(frozen=True, eq=False)
class Worth:
    """What a filled hole makes of the stress at each point of its edge over the whole span of load, shape (L, T).

    Parameters
    ----------
    range_factor : ndarray
        Range of hoop stress over that of the untreated peak.
    mean_shift : ndarray
        Its middle less that of the untreated peak [MPa].
    """

    range_factor: Array
    mean_shift: Array


def worth(hoop: Array, untreated: Array) -> Worth:
    """Compare an edge map with the untreated peak of the same locations.

    Parameters
    ----------
    hoop : ndarray, shape (L, T, n)
        Edge map at the levels [MPa].
    untreated : ndarray, shape (L, n)
        Peak by route `none` at the same levels [MPa].

    Returns
    -------
    Worth

    Examples
    --------
    >>> import numpy as np
    >>> result = worth(np.array([[[50.0, 200.0]]]), np.array([[0.0, 300.0]]))
    >>> float(result.range_factor[0, 0]), float(result.mean_shift[0, 0])
    (0.5, -25.0)
    """
    high, low = hoop.max(axis=2), hoop.min(axis=2)
    top, bottom = untreated.max(axis=1)[:, None], untreated.min(axis=1)[:, None]
    span = np.where(top > bottom, top - bottom, np.nan)
    return Worth(np.asarray((high - low) / span), np.asarray((high + low - top - bottom) / 2))


def uncredited(fit: ArrayLike) -> Array:
    """Return the fit to map with when no credit is taken: min(fit, 0).

    The life without credit is the lower of route `none` and the contact at this fit, since a snug or loose pin presses
    harder than the cosine of route `none`.
    """
    return np.minimum(np.asarray(fit, dtype=np.float64), 0.0)

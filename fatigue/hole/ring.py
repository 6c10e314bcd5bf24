"""A hole expanded past yield in a hardening sheet, followed step by step: expand, let go, press a pin in.

Axially symmetric plane stress in rings around the hole, small strains, Mises yield with bilinear hardening of which a
share moves the yield surface (Bauschinger effect). The stress update is the radial return of Simo and Taylor (1986),
which uncouples in the sum and the difference of the two stresses.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import solve_banded

Array = NDArray[np.float64]

RINGS = 120
REACH = 12.0
"""Radius of the rings over the hole's; beyond, the sheet is wide and elastic."""
STEPS = 16
"""Steps of each stage: 60 move the residual stress by under 0.5 MPa."""
LARGEST_EXPANSION = 0.15
"""Beyond this nothing is computed; small strains are good to about 6 %."""


@dataclass(frozen=True)
class Metal:
    """An elastic-plastic sheet with bilinear hardening.

    Parameters
    ----------
    modulus, poisson : float
        [MPa], -
    yield_stress : float
        [MPa]
    hardening : float
        Slope of stress over plastic strain; 0 is perfectly plastic [MPa].
    kinematic : float
        Share of the hardening that moves the yield surface: 1 keeps its size (full Bauschinger effect), 0 its place.
    """

    modulus: float
    poisson: float
    yield_stress: float
    hardening: float = 0.0
    kinematic: float = 1.0


@dataclass(frozen=True, eq=False)
class RingState:
    """Stress from the edge outwards at one moment.

    Parameters
    ----------
    radius : ndarray, shape (K,)
        Over the hole radius.
    radial, hoop : ndarray, shape (K,)
        [MPa]
    opening : float
        Movement of the edge over the hole radius.
    pressure : float
        At the edge [MPa].
    plastic : ndarray, shape (K,)
        Equivalent plastic strain so far.
    """

    radius: Array
    radial: Array
    hoop: Array
    opening: float
    pressure: float
    plastic: Array

    @property
    def edge_hoop(self) -> float:
        """Hoop stress carried to the edge from the first rings [MPa]."""
        return float(self.hoop[0] + (1 - self.radius[0]) * (self.hoop[1] - self.hoop[0]) / np.diff(self.radius)[0])

    @property
    def zone(self) -> float:
        """Radius of the plastic zone over the hole's; 1 where nothing yielded."""
        yielded = np.flatnonzero(self.plastic > 1e-8)
        return float(self.radius[yielded[-1]]) if yielded.size else 1.0


@dataclass(eq=False)
class _Rings:
    """The sheet in rings, and what they remember."""

    metal: Metal
    nodes: Array = field(init=False)
    opening: Array = field(init=False)
    plastic_sum: Array = field(init=False)
    plastic_difference: Array = field(init=False)
    back_sum: Array = field(init=False)
    back_difference: Array = field(init=False)
    equivalent: Array = field(init=False)
    elastic: Array = field(init=False)
    stress: tuple[Array, Array] = field(init=False)

    def __post_init__(self) -> None:
        self.nodes = np.geomspace(1.0, REACH, RINGS + 1)
        self.opening = np.zeros(RINGS + 1)
        for name in ("plastic_sum", "plastic_difference", "back_sum", "back_difference", "equivalent"):
            setattr(self, name, np.zeros(RINGS))
        self.elastic = self.balance(self.opening, 0.0, 0.0)[1]

    @property
    def centre(self) -> Array:
        return (self.nodes[1:] + self.nodes[:-1]) / 2

    def strain(self, opening: Array) -> tuple[Array, Array]:
        """Return sum and difference (hoop less radial) of the strains, over sqrt(2)."""
        radial = np.diff(opening) / np.diff(self.nodes)
        hoop = (opening[1:] + opening[:-1]) / 2 / self.centre
        return (hoop + radial) / np.sqrt(2), (hoop - radial) / np.sqrt(2)

    def update(self, opening: Array) -> tuple[Array, ...]:
        """Return stresses, their derivatives to strain and the memory after a trial opening.

        In the sum s and difference d (over sqrt 2) of the stresses less the back stress, Mises' 2/3 of the squared
        equivalent is s^2/3 + d^2, and the return divides s and d by a factor each, both of one unknown.
        """
        m = self.metal
        bulk, shear = m.modulus / (1 - m.poisson), m.modulus / (1 + m.poisson)
        move, swell = 2 / 3 * m.kinematic * m.hardening, (1 - m.kinematic) * m.hardening
        total_sum, total_difference = self.strain(opening)
        trial_s = bulk * (total_sum - self.plastic_sum) - self.back_sum
        trial_d = shear * (total_difference - self.plastic_difference) - self.back_difference
        size = m.yield_stress + swell * self.equivalent
        flow = np.zeros_like(trial_s)
        over = trial_s**2 / 3 + trial_d**2 > 2 / 3 * size**2
        rate_s, rate_d = move + bulk / 3, move + shear
        for _ in range(30):
            fs, fd = 1 + rate_s * flow, 1 + rate_d * flow
            norm = np.sqrt((trial_s / fs) ** 2 / 3 + (trial_d / fd) ** 2)
            fall = (trial_s / fs) ** 2 * rate_s / fs / 3 + (trial_d / fd) ** 2 * rate_d / fd
            slope = -fall / np.maximum(norm, 1e-30)
            grown = np.sqrt(2 / 3) * flow * norm
            limit = np.sqrt(2 / 3) * (size + swell * grown)
            excess = np.where(over, norm - limit, 0.0)
            if np.abs(excess).max() < 1e-10 * m.yield_stress:
                break
            steep = slope - 2 / 3 * swell * (norm + flow * slope)
            flow = np.maximum(flow - np.where(over, excess / steep, 0.0), 0.0)
        s, d = trial_s / fs, trial_d / fd
        # derivative of (s, d) to the trials, the flow following them
        with np.errstate(divide="ignore", invalid="ignore"):
            grad_s, grad_d = s / (3 * norm * fs), d / (norm * fd)
            weight = 1 - 2 / 3 * swell * flow
            steep = slope * weight - 2 / 3 * swell * norm
            flow_s, flow_d = (np.where(over, -weight * g / steep, 0.0) for g in (grad_s, grad_d))
        ss = 1 / fs - s * rate_s / fs * flow_s
        sd = -s * rate_s / fs * flow_d
        ds = -d * rate_d / fd * flow_s
        dd = 1 / fd - d * rate_d / fd * flow_d
        back_s, back_d = self.back_sum + move * flow * s, self.back_difference + move * flow * d
        # the stress moves with the back stress too: d(back) = move (flow ds + s dflow)
        tangent = (
            bulk * (ss + move * (flow * ss + s * flow_s)),
            shear * (sd + move * (flow * sd + s * flow_d)),
            bulk * (ds + move * (flow * ds + d * flow_s)),
            shear * (dd + move * (flow * dd + d * flow_d)),
        )
        memory = (
            self.plastic_sum + flow * s / 3,
            self.plastic_difference + flow * d,
            back_s,
            back_d,
            self.equivalent + np.sqrt(2 / 3) * flow * norm,
        )
        return s + back_s, d + back_d, *tangent, *memory

    def balance(self, opening: Array, pressure: float, spring: float) -> tuple[Array, Array, tuple[Array, ...]]:
        """Return forces out of balance, their banded derivative, and what `update` returned.

        The edge is pressed by `pressure - spring * opening`.
        """
        result = self.update(opening)
        s, d, ss, sd, ds, dd = result[:6]
        width, centre = np.diff(self.nodes), self.centre
        area = width * centre
        # strain sum and difference per opening at the inner and outer node of a ring
        hoop = 0.5 / centre
        b_s = np.array([(hoop - 1 / width), (hoop + 1 / width)]) / np.sqrt(2)
        b_d = np.array([(hoop + 1 / width), (hoop - 1 / width)]) / np.sqrt(2)
        force = np.zeros(RINGS + 1)
        band = np.zeros((3, RINGS + 1))
        for i in range(2):
            inner = area * (b_s[i] * s + b_d[i] * d)
            force[i : RINGS + i] += inner
            for j in range(2):
                k = area * (b_s[i] * (ss * b_s[j] + sd * b_d[j]) + b_d[i] * (ds * b_s[j] + dd * b_d[j]))
                band[1 + i - j, j : RINGS + j] += k
        m = self.metal
        wide = m.modulus / (1 + m.poisson)
        force[-1] += wide * opening[-1]
        band[1, -1] += wide
        force[0] -= pressure - spring * opening[0]
        band[1, 0] += spring
        return force, band, result

    def step(self, pressure: float, spring: float) -> None:
        """Find the opening under a pressure that falls with the opening, and remember it."""
        opening = self.opening.copy()
        for trial in range(60):
            force, band, result = self.balance(opening, pressure, spring)
            if np.abs(force).max() < 1e-8 * self.metal.yield_stress:
                break
            if trial == 0:
                # what is on its yield surface may be about to leave it
                band = self.elastic.copy()
                band[1, 0] += spring
            opening -= solve_banded((1, 1), band, force)
            if not np.abs(opening).max() < 1.0:
                raise ArithmeticError("the expanded hole ran away")
        else:
            raise ArithmeticError("the expanded hole did not settle")
        self.opening = opening
        (
            self.plastic_sum,
            self.plastic_difference,
            self.back_sum,
            self.back_difference,
            self.equivalent,
        ) = result[6:]
        self.stress = result[0], result[1]

    def state(self, pressure: float) -> RingState:
        """Return the present state."""
        s, d = self.stress
        return RingState(
            radius=self.centre,
            radial=np.asarray((s - d) / np.sqrt(2)),
            hoop=np.asarray((s + d) / np.sqrt(2)),
            opening=float(self.opening[0]),
            pressure=pressure,
            plastic=self.equivalent.copy(),
        )


@dataclass(frozen=True, eq=False)
class Expanded:
    """A hole expanded, let go, and filled with a pin.

    Parameters
    ----------
    loaded, free, filled : RingState
        At full expansion; with nothing in the hole; with the pin in.
    retained_fit : float
        Interference of an elastic pin in an elastic sheet that presses as hard, over the diameter.
    residual : RingState
        With the pin taken out again.
    """

    loaded: RingState
    free: RingState
    filled: RingState
    retained_fit: float
    residual: RingState


@lru_cache(maxsize=256)
def expand(metal: Metal, expansion: float, fit: float = 0.0, pin_compliance: float = 0.0) -> Expanded:
    """Expand a hole, let it go, and press a pin in.

    Parameters
    ----------
    metal : Metal
    expansion : float
        Movement of the edge over the hole radius, which is the diametral expansion over the diameter; 0 for none.
    fit : float
        Interference of the pin in the hole as it is then, over the diameter; none below 0.
    pin_compliance : float
        Shrinkage of the pin's radius per unit pressure, (1 - nu)/E [1/MPa].

    Returns
    -------
    Expanded

    Raises
    ------
    ValueError
        If the expansion is negative or beyond 0.15.

    Notes
    -----
    Small strains: good to about 6 % expansion.

    References
    ----------
    Simo and Taylor 1986; key ``simo-taylor-1986``.

    Examples
    --------
    >>> hole = expand(Metal(72e3, 0.33, 345.0), 0.04)
    >>> hole.residual.edge_hoop < -300
    True
    """
    if not 0 <= expansion <= LARGEST_EXPANSION:
        raise ValueError(f"expansion must lie from 0 to {LARGEST_EXPANSION:g}, not {expansion:g}")
    rings = _Rings(metal)
    stiff = 1e3 * metal.modulus
    pressure = 0.0
    rings.step(0.0, 0.0)
    if expansion > 0:
        _follow(rings, 0.0, stiff * expansion, stiff)  # a stiff mandrel sets the opening
        pressure = stiff * (expansion - float(rings.opening[0]))
    loaded = rings.state(pressure)
    _release(rings, pressure)
    free = rings.state(0.0)
    pressure = 0.0
    if fit > 0:
        spring = 1 / max(pin_compliance, 1 / stiff)
        start = spring * free.opening
        _follow(rings, start, start + spring * fit, spring)
        pressure = start + spring * (fit - float(rings.opening[0]))
    filled = rings.state(pressure)
    elastic = (1 + metal.poisson) / metal.modulus + max(pin_compliance, 1 / stiff)
    _release(rings, pressure)
    return Expanded(loaded, free, filled, pressure * elastic, rings.state(0.0))


def _follow(rings: _Rings, start: float, end: float, spring: float) -> None:
    """Press from one pressure to another in steps, halved where they are too long."""
    done, step = 0.0, 1 / STEPS
    while done < 1:
        wish = min(done + step, 1.0)
        try:
            rings.step(start + (end - start) * wish, spring)
        except ArithmeticError:
            step /= 2
            if step < 1e-5:
                raise
        else:
            done = wish


def _release(rings: _Rings, pressure: float) -> None:
    if pressure > 0:
        _follow(rings, pressure, 0.0, 0.0)

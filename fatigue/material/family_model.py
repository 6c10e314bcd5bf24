"""What an S-N family fit assumes, its parameters with their bounds, and its likelihood in closed form."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from fatigue.material.coupons import Coupons
from fatigue.material.likelihood import log_likelihood_terms
from fatigue.material.maximise import Objective

Array = NDArray[np.float64]

LN10 = float(np.log(10.0))
FORMS = ("handbook", "power")
SCATTERS = ("constant", "growing")
STEEPEST, SHALLOWEST = -40.0, -0.2
"""Bounds of A2."""


@dataclass(frozen=True)
class Model:
    """What is fitted.

    Parameters
    ----------
    form : str
        ``handbook``: log10 N = A1 + A2 log10(Seq - A4); ``power``: A4 = 0. Seq = S_max (1 - R)^A3.
    scatter : str
        ``constant``; ``growing``: log s = log s0 - g x with x the log10 of the test's S_max (1-R)^0.5 less the mean
        over its K_t.
    law : str
        ``lognormal`` or ``weibull``.
    exponent : float or None
        A3 held at a value; None fits it.
    shared_exponent : bool
        One A3 for all K_t, or one each.
    """

    form: str = "handbook"
    scatter: str = "constant"
    law: str = "lognormal"
    exponent: float | None = None
    shared_exponent: bool = True


@dataclass(frozen=True, eq=False)
class Layout:
    """Where each K_t's constants stand among the parameters, and their bounds; log s and the growth stand last."""

    names: tuple[str, ...]
    place: NDArray[np.int64]
    lower: Array
    upper: Array


def relative_stress(coupons: Coupons, kts: Array) -> Array:
    """Return log10 S_max (1-R)^0.5 of every test less the mean over its K_t."""
    x = np.log10(coupons.top) + 0.5 * np.log10(1.0 - coupons.ratio)
    member = np.searchsorted(kts, coupons.kt)
    return np.asarray(x - (np.bincount(member, x) / np.bincount(member))[member])


def layout_of(kts: Array, model: Model) -> Layout:
    """Return where each K_t's constants stand among the parameters, and their bounds."""
    names: list[str] = []
    bounds: list[tuple[float, float]] = []
    place = np.zeros((kts.size, 4), dtype=np.int64)
    a3 = (0.0, 1.0) if model.exponent is None else (model.exponent, model.exponent)
    a4 = (0.0, 1e4) if model.form == "handbook" else (0.0, 0.0)
    limits = {"A1": (-1e3, 1e3), "A2": (STEEPEST, SHALLOWEST), "A3": a3, "A4": a4}
    for k, kt in enumerate(kts):
        for column, (name, span) in enumerate(limits.items()):
            if name == "A3" and model.shared_exponent and k > 0:
                place[k, column] = place[0, column]
                continue
            place[k, column] = len(names)
            shared = name == "A3" and model.shared_exponent
            names.append(name if shared or kts.size == 1 else f"{name}, K_t {kt:g}")
            bounds.append(span)
    growth = (-30.0, 30.0) if model.scatter == "growing" else (0.0, 0.0)
    bounds += [(float(np.log(1e-4)), float(np.log(5.0))), growth]
    lower, upper = (np.array(side) for side in zip(*bounds, strict=True))
    return Layout((*names, "log s", "growth"), place, lower, upper)


def objective_of(coupons: Coupons, kts: Array, layout: Layout, law: str) -> Objective:
    """Return the log likelihood with gradient and Hessian, all in closed form."""
    y, failed, top = coupons.log_life, coupons.failed, coupons.top
    x, q = relative_stress(coupons, kts), np.log(1.0 - coupons.ratio)
    place = layout.place[np.searchsorted(kts, coupons.kt)]  # (n, 4)
    p = len(layout.names)
    pairs = [(a, b) for a in range(4) for b in range(4)]
    flat = np.stack([place[:, a] * p + place[:, b] for a, b in pairs])

    def objective(point: Array) -> tuple[float, Array, Array]:
        a1, a2, a3, a4 = point[place].T
        seq = top * np.exp(q * a3)
        excess = seq - a4
        live = excess > 0.0
        excess = np.where(live, excess, 1.0)
        log_excess = np.log10(excess)
        mu = np.where(live, a1 + a2 * log_excess, np.inf)
        terms = log_likelihood_terms(y, failed, mu, point[-2] - point[-1] * x, law)
        value = float(terms.value.sum())
        d = 1.0 / (LN10 * excess)
        zero = np.zeros_like(d)
        first = np.stack([zero + 1.0, log_excess, a2 * d * seq * q, -a2 * d])
        second = {
            (1, 2): d * seq * q,
            (1, 3): -d,
            (2, 2): -a2 * d * q * q * seq * a4 / excess,
            (2, 3): a2 * d * seq * q / excess,
            (3, 3): -a2 * d / excess,
        }
        gradient, hessian = np.zeros(p), np.zeros(p * p)
        for a in range(4):
            gradient += np.bincount(place[:, a], terms.by_mu * first[a], minlength=p)
        weights = np.stack([terms.by_mu_mu * first[a] * first[b] for a, b in pairs])
        for row, (a, b) in enumerate(pairs):
            bent = second.get((min(a, b), max(a, b)))
            if bent is not None:
                weights[row] += terms.by_mu * bent
        hessian += np.bincount(flat.ravel(), weights.ravel(), minlength=p * p)
        square = hessian.reshape(p, p)
        for column, factor in ((p - 2, 1.0), (p - 1, -x)):
            gradient[column] = float((terms.by_log_s * factor).sum())
            for a in range(4):
                cross = np.bincount(place[:, a], terms.by_mu_log_s * factor * first[a], minlength=p)
                square[:, column] += cross
                square[column, :] += cross
        square[p - 2, p - 2] = float(terms.by_log_s_log_s.sum())
        square[p - 1, p - 1] = float((terms.by_log_s_log_s * x * x).sum())
        square[p - 2, p - 1] = square[p - 1, p - 2] = -float((terms.by_log_s_log_s * x).sum())
        return value, gradient, square

    return objective

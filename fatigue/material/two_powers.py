"""The one equation behind notch rules and strain lives: a sum of two powers that equals a target.

a exp(p x) + c exp(q x) = w, with p and q of one sign, has one root x. Once scaled it depends on one number only,
the distance d of the two roots that each power would have alone, so that one table per pair of exponents serves every
cycle: with e^(P h) + e^(Q (h - d)) = 1 the root is h beyond the first power's own.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]

REACH = 38.0
"""Exponent at which the lesser power is below the rounding of the greater."""
FINENESS = 0.05
"""Step of the table times the greater exponent."""


def log_root(
    log_first: ArrayLike, first_power: float, log_second: ArrayLike, second_power: float, log_target: ArrayLike
) -> Array:
    """Return x with first e^(p x) + second e^(q x) = target, all three given by their natural logarithms.

    Parameters
    ----------
    log_first, log_second : array_like
        -inf where a power is absent; not both.
    first_power, second_power : float
        p and q, both above or both below 0.
    log_target : array_like

    Returns
    -------
    ndarray
        Broadcast; within 1e-9.

    Raises
    ------
    ValueError
        If the exponents are not of one sign.

    Examples
    --------
    >>> round(float(log_root(0.0, 1.0, 0.0, 2.0, np.log(6.0))), 6)  # 2 + 2^2 = 6
    0.693147
    """
    if first_power * second_power <= 0:
        raise ValueError("the exponents must both be positive or both negative")
    if abs(first_power) > abs(second_power):
        return log_root(log_second, second_power, log_first, first_power, log_target)
    sign = np.sign(first_power)
    p, q = abs(first_power), abs(second_power)
    alone_first = (np.asarray(log_target) - np.asarray(log_first)) / p
    alone_second = (np.asarray(log_target) - np.asarray(log_second)) / q
    apart = alone_second - alone_first
    table = _table(p, q)
    place = (np.clip(apart, table.start, table.end) - table.start) / table.step
    cell = np.minimum(place.astype(np.int64), table.cubic.shape[0] - 1)
    t = place - cell
    c = table.cubic[cell]
    beyond = c[..., 0] + t * (c[..., 1] + t * (c[..., 2] + t * c[..., 3]))
    return np.asarray(sign * np.where(apart < table.start, alone_second, alone_first + beyond))


@dataclass(frozen=True, eq=False)
class _Table:
    """h(d) as cubics on even steps."""

    start: float
    end: float
    step: float
    cubic: Array


@lru_cache(maxsize=64)
def _table(p: float, q: float) -> _Table:
    step = FINENESS / q
    start, end = -REACH / p, REACH / q
    apart = start + step * np.arange(int(np.ceil((end - start) / step)) + 1)
    h = np.minimum(0.0, apart)  # each power alone: the root lies below both
    for _ in range(60):
        first, second = np.exp(p * h), np.exp(q * (h - apart))
        move = (first + second - 1.0) / (p * first + q * second)
        h = h - move
        if np.abs(move).max() < 1e-15:
            break
    first, second = p * np.exp(p * h), q * np.exp(q * (h - apart))
    slope = step * second / (first + second)
    rise = np.diff(h)
    cubic = np.stack(
        [h[:-1], slope[:-1], 3 * rise - 2 * slope[:-1] - slope[1:], slope[:-1] + slope[1:] - 2 * rise], axis=-1
    )
    return _Table(start, float(apart[-1]), step, cubic)

"""What the largest loads leave of the stress that was put into a hole before service."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


def neuber_stress(elastic: ArrayLike, modulus: ArrayLike, strength: ArrayLike, exponent: ArrayLike) -> Array:
    """Return the stress of an elastic-plastic notch: sigma^2/E + sigma (sigma/K')^(1/n') = elastic^2/E.

    Parameters
    ----------
    elastic : array_like
        Stress were the sheet elastic, of either sign [MPa].
    modulus, strength, exponent : array_like
        E, K' [MPa] and n' of the cyclic curve (Ramberg and Osgood).

    Returns
    -------
    ndarray
        Of the same sign [MPa].

    References
    ----------
    Neuber 1961, Ramberg and Osgood 1943; keys ``neuber-1961``, ``ramberg-osgood-1943``.

    Examples
    --------
    >>> round(float(neuber_stress(600.0, 73.1e3, 662.0, 0.07)), 1)
    454.4
    """
    target, e, k, n = np.broadcast_arrays(
        *(np.asarray(v, dtype=np.float64) for v in (elastic, modulus, strength, exponent))
    )
    size = np.abs(target)
    # in logs the rule is convex and rising, and Newton from above falls onto the root
    want = np.log(np.maximum(size, 1e-12) ** 2 / e)
    guess = np.log(np.maximum(size, 1e-12))
    for _ in range(60):
        stress = np.exp(guess)
        elastic_part = stress**2 / e
        plastic_part = stress * (stress / k) ** (1 / n)
        whole = elastic_part + plastic_part
        move = (np.log(whole) - want) * whole / (2 * elastic_part + (1 + 1 / n) * plastic_part)
        guess = guess - move
        if np.abs(move).max(initial=0.0) < 1e-13:
            break
    return np.asarray(np.sign(target) * np.exp(guess) * (size > 0))


def surviving(
    initial: ArrayLike,
    top: ArrayLike,
    bottom: ArrayLike,
    modulus: ArrayLike,
    strength: ArrayLike,
    exponent: ArrayLike,
) -> Array:
    """Return what is left of a residual stress after the largest and the smallest load.

    Compression is lost where the edge yields in compression: at the smallest load, the more so if the largest had
    yielded it in tension before, which leaves it that much lower. With N for Neuber's rule,

        low = bottom + N(top) - top,    left = N(low) - N(low - initial);

    for an initial tension the same with top and bottom changed round. What a notch without residual stress would lose
    as well is not counted, since the coupons of a notched family lost it too.

    Parameters
    ----------
    initial : array_like
        Residual stress [MPa].
    top, bottom : array_like
        Elastic stress at the largest and smallest load, the residual stress included [MPa].
    modulus, strength, exponent : array_like
        E, K' [MPa], n'.

    Returns
    -------
    ndarray
        Of the same sign as the initial stress and no larger [MPa].

    References
    ----------
    Neuber 1961, applied to a residual stress for this project; keys ``neuber-1961``, ``initial-stress``.

    Examples
    --------
    >>> kept = surviving(-300.0, 250.0, -300.0, 73.1e3, 662.0, 0.07)
    >>> washed = surviving(-300.0, 1200.0, -300.0, 73.1e3, 662.0, 0.07)
    >>> bool(kept < -295), bool(washed > -60)
    (True, True)
    """

    def rule(stress: ArrayLike) -> Array:
        return neuber_stress(stress, modulus, strength, exponent)

    first = np.asarray(initial, dtype=np.float64)
    sign = np.where(first > 0, -1.0, 1.0)
    before = sign * np.where(first > 0, bottom, top)
    after = sign * np.where(first > 0, top, bottom) + rule(before) - before
    left = rule(after) - rule(after - sign * first)
    return np.asarray(sign * np.clip(left, -np.abs(first), 0.0))


@dataclass(frozen=True, eq=False)
class Settled:
    """Hoop stress at the edge once the first block has run.

    Parameters
    ----------
    hoop : ndarray, shape (L, T, n)
        With what is left of the residual stress [MPa].
    left : ndarray, shape (L, T)
        Of the residual stress [MPa].
    credit_left : ndarray, shape (L, T)
        Share of it; 1 where there was none.
    yields : ndarray of bool, shape (L, T)
        Whether the largest load takes the edge more than 2 % past its elastic stress.
    """

    hoop: Array
    left: Array
    credit_left: Array
    yields: NDArray[np.bool_]


def settle(hoop: Array, residual: ArrayLike, modulus: ArrayLike, strength: ArrayLike, exponent: ArrayLike) -> Settled:
    """Add the residual stress to an edge map and let the largest and smallest load wash out what they can.

    The tension an interference fit puts around the edge is part of the map and stays: it may yield away in service, as
    the mean stress of a notched coupon does, which the coupon's family already holds.

    Parameters
    ----------
    hoop : ndarray, shape (L, T, n)
        Edge map of the contact over the spectrum's whole span of load [MPa].
    residual : array_like, shape (L,)
        Residual hoop stress at the edge [MPa].
    modulus, strength, exponent : array_like, shape (L,)
        E, K' [MPa] and n' of each sheet's cyclic curve.

    Returns
    -------
    Settled
    """
    res, e, k, n = (
        np.broadcast_to(np.asarray(v, dtype=np.float64), hoop.shape[:1])[:, None]
        for v in (residual, modulus, strength, exponent)
    )
    top, bottom = hoop.max(axis=2) + res, hoop.min(axis=2) + res
    left = surviving(np.broadcast_to(res, top.shape), top, bottom, e, k, n)
    with np.errstate(divide="ignore", invalid="ignore"):
        share = np.where(res == 0.0, 1.0, left / res)
    return Settled(hoop + left[:, :, None], left, share, neuber_stress(top, e, k, n) < 0.98 * top)

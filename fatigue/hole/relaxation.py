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
    """Return what is left of an initial stress after the largest and then the smallest load.

    At each the notch follows Neuber's rule; what survives is the difference it makes, N(with) - N(without). A coupon
    without initial stress yields too, so nothing is taken from its own maxima.

    Parameters
    ----------
    initial : array_like
        Stress at no load, of fit and residual [MPa].
    top, bottom : array_like
        Elastic stress at the largest and smallest load, the initial stress included [MPa].
    modulus, strength, exponent : array_like
        E, K' [MPa], n'.

    Returns
    -------
    ndarray
        Of the same sign as the initial stress and no larger [MPa].

    References
    ----------
    Neuber 1961, applied to an initial stress for this project; keys ``neuber-1961``, ``initial-stress``.

    Examples
    --------
    >>> low = surviving(-300.0, 100.0, -350.0, 73.1e3, 662.0, 0.07)
    >>> washed = surviving(300.0, 900.0, 300.0, 73.1e3, 662.0, 0.07)
    >>> bool(low < -280), bool(washed < 60)
    (True, True)
    """
    first = np.asarray(initial, dtype=np.float64)
    high, low = np.asarray(top, dtype=np.float64), np.asarray(bottom, dtype=np.float64)
    after = neuber_stress(high, modulus, strength, exponent) - neuber_stress(high - first, modulus, strength, exponent)
    low = low + (after - first)
    rest = neuber_stress(low, modulus, strength, exponent) - neuber_stress(low - after, modulus, strength, exponent)
    return np.asarray(np.sign(first) * np.minimum(np.abs(rest), np.abs(first)))


@dataclass(frozen=True, eq=False)
class Settled:
    """Hoop stress at the edge once the first block has run.

    Parameters
    ----------
    hoop : ndarray, shape (L, T, n)
        With what is left of fit and residual [MPa].
    initial, left : ndarray, shape (L, T)
        Stress at no load before and after the first block [MPa].
    """

    hoop: Array
    initial: Array
    left: Array

    @property
    def credit_left(self) -> Array:
        """Share of the initial stress left, shape (L, T); 1 where there was none."""
        with np.errstate(divide="ignore", invalid="ignore"):
            return np.where(np.abs(self.initial) > 1e-9, self.left / self.initial, 1.0)


def settle(
    hoop: Array,
    unloaded: Array,
    residual: ArrayLike,
    modulus: ArrayLike,
    strength: ArrayLike,
    exponent: ArrayLike,
) -> Settled:
    """Add the residual stress to an edge map and let the largest and smallest load wash out what they can.

    Parameters
    ----------
    hoop : ndarray, shape (L, T, n)
        Edge map of the contact over the spectrum's whole span of load [MPa].
    unloaded : ndarray, shape (L, T)
        The map at no load: the stress of the fit [MPa].
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
    initial = unloaded + res
    top, bottom = hoop.max(axis=2) + res, hoop.min(axis=2) + res
    left = surviving(initial, top, bottom, e, k, n)
    return Settled(hoop + (left - unloaded)[:, :, None], initial, left)

"""A family of 200 specimens, and local strain at six locations: python -m tests.benchmarks.fit_speed."""

from __future__ import annotations

from time import perf_counter

import numpy as np
from scipy.optimize import brentq

from fatigue.material.coupons import Coupons
from fatigue.material.fit import fit_coupons
from fatigue.material.library import strain_life
from fatigue.material.local_strain import local_strain_life
from fatigue.material.strain import StrainLife


def family_tests(count: int) -> Coupons:
    """Return invented tests of two K_t at two stress ratios, with run-outs."""
    random = np.random.default_rng(3)
    kt = np.where(np.arange(count) % 2 == 0, 2.0, 4.0)
    ratio = np.where(np.arange(count) % 4 < 2, 0.1, 0.4)
    top = np.where(kt == 2.0, 1.0, 0.62) * random.choice([150.0, 165.0, 190.0, 220.0, 260.0, 320.0], count)
    top = np.where(ratio > 0.2, 1.3 * top, top)
    equivalent = top * (1 - ratio) ** 0.65
    a1, a2, a4 = np.where(kt == 2.0, [[11.5], [-3.1], [80.0]], [[11.0], [-3.1], [45.0]])
    location = a1 + a2 * np.log10(np.maximum(equivalent - a4, 1.0))
    life = 10 ** (location + random.normal(0, 0.15, count))
    return Coupons("drawn", "", top, ratio, np.minimum(life, 3e6), life < 3e6, kt)


def by_root_finding(low: np.ndarray, high: np.ndarray, k: StrainLife) -> np.ndarray:
    """Return cycles to failure of cycles that each run alone, by scalar root finds: Neuber twice, then the life."""
    lives = []
    for bottom, top in zip(low, high, strict=True):

        def neuber(stress: float, elastic: float, twice: float) -> float:
            strain = stress / k.modulus + twice * (stress / (twice * k.cyclic_strength)) ** (1 / k.cyclic_exponent)
            return stress * strain - elastic**2 / k.modulus

        peak = brentq(neuber, 0.0, top, args=(top, 1.0), xtol=1e-10)
        span = brentq(neuber, 0.0, top - bottom, args=(top - bottom, 2.0), xtol=1e-10)
        strain = span / k.modulus + 2 * (span / (2 * k.cyclic_strength)) ** (1 / k.cyclic_exponent)
        product = peak * strain / 2

        def swt(log_n: float, product: float) -> float:
            n = 2 * 10**log_n
            elastic = k.strength_coefficient**2 / k.modulus * n ** (2 * k.strength_exponent)
            plastic = k.strength_coefficient * k.ductility_coefficient
            return elastic + plastic * n ** (k.strength_exponent + k.ductility_exponent) - product

        lives.append(10 ** brentq(swt, -1.0, 14.0, args=(product,), xtol=1e-12))
    return np.array(lives)


def measure_fit(count: int) -> float:
    """Return the seconds of a whole fit with intervals."""
    begin = perf_counter()
    fit_coupons(family_tests(count), name="drawn", fatigue_limit=False)
    return perf_counter() - begin


def measure_strain(cycles: int, looped: int) -> tuple[float, float, float]:
    """Return seconds a cycle in one call and by root finding, and the largest difference of the lives."""
    random = np.random.default_rng(4)
    k = strain_life("2024-T351")
    high = random.uniform(250.0, 600.0, (6, cycles))
    low = np.zeros_like(high)
    # the largest loop leads; what hangs on it has its own peak only where both start from nothing
    begin = perf_counter()
    found = local_strain_life(low, high, np.ones(cycles), k)
    call = (perf_counter() - begin) / high.size
    begin = perf_counter()
    alone = by_root_finding(low[0, :looped], high[0, :looped], k)
    loop = (perf_counter() - begin) / looped
    single = np.array(
        [local_strain_life([[0.0]], [[top]], [1.0], k).cycles_to_failure[0, 0] for top in high[0, :looped]]
    )
    return call, loop, float(np.abs(single / alone - 1).max()) if found.life.size else np.inf


def main() -> None:
    """Print both."""
    print(f"family of 200 tests with profile intervals: {measure_fit(200):.2f} s")
    call, loop, difference = measure_strain(10_000, 300)
    print(f"10,000 cycles at six locations: {1e9 * call:.0f} ns a cycle, scalar root finds {1e6 * loop:.0f} us a cycle")
    print(f"ratio {loop / call:.0f}; largest difference of a life {difference:.1e}")


if __name__ == "__main__":
    main()

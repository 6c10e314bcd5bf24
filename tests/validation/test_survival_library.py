"""Censored fits against a general survival-analysis library (lifelines), to 1e-4."""

import numpy as np
import pandas as pd
import pytest
from lifelines import LogNormalAFTFitter, LogNormalFitter, WeibullAFTFitter, WeibullFitter

from fatigue.material.coupons import Coupons
from fatigue.material.family_fit import fit_family
from fatigue.material.family_model import Model
from fatigue.material.life_sample import fit_lives
from reports.evidence.lives import lives_1969


def censored(seed, n=40):
    random = np.random.default_rng(seed)
    life = 10 ** random.normal(5.4, 0.2, n)
    stop = np.quantile(life, 0.7)
    return np.minimum(life, stop), life < stop


SETS = [(lives_1969(), np.ones(101, dtype=bool)), *(censored(seed) for seed in range(4))]


@pytest.mark.parametrize(("life", "failed"), SETS)
def test_lognormal_lives(life, failed):
    theirs = LogNormalFitter().fit(life, failed)
    own = fit_lives(life, failed)
    assert own.median == pytest.approx(theirs.median_survival_time_, rel=1e-4)
    assert own.scale == pytest.approx(theirs.sigma_ / np.log(10), rel=1e-4)


@pytest.mark.parametrize(("life", "failed"), SETS)
def test_weibull_lives(life, failed):
    theirs = WeibullFitter().fit(life, failed)
    own = fit_lives(life, failed, "weibull")
    assert own.weibull_shape == pytest.approx(theirs.rho_, rel=1e-4)
    assert own.weibull_scale == pytest.approx(theirs.lambda_, rel=1e-4)


def coupons(seed):
    random = np.random.default_rng(seed)
    top = np.repeat([140.0, 160.0, 190.0, 230.0, 280.0], 6)
    life = 10 ** (16.0 - 4.8 * np.log10(top) + random.normal(0, 0.15, top.size))
    stop = 6e5
    return Coupons(
        "drawn", "", top, np.full(top.size, 0.1), np.minimum(life, stop), life < stop, np.full(top.size, 1.0)
    )


@pytest.mark.parametrize("seed", range(4))
@pytest.mark.parametrize(("law", "fitter"), [("lognormal", LogNormalAFTFitter), ("weibull", WeibullAFTFitter)])
def test_power_law_with_run_outs(seed, law, fitter):
    tests = coupons(seed)
    assert not tests.failed.all()
    frame = pd.DataFrame({"life": tests.cycles, "failed": tests.failed, "x": np.log(tests.top * (1 - 0.1) ** 0.5)})
    theirs = fitter().fit(frame, "life", "failed")
    own = fit_family(tests, Model("power", "constant", law=law))
    name = "mu_" if law == "lognormal" else "lambda_"
    assert own.constants[0, 1] == pytest.approx(theirs.params_[name, "x"], rel=1e-4)
    assert own.constants[0, 0] * np.log(10) == pytest.approx(theirs.params_[name, "Intercept"], rel=1e-4)
    logs = theirs.params_["sigma_" if law == "lognormal" else "rho_", "Intercept"]
    scale = np.exp(logs if law == "lognormal" else -logs)
    assert own.scatter == pytest.approx(scale / np.log(10), rel=1e-4)

"""Each prior's map from the unconstrained coordinate against the family's own quantiles and density in scipy.stats."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from pullback.inverse.priors import Flat, FlatLog, HalfNormal, LogNormal, Normal, Uniform, log_prior

PROPER = {
    "normal": (Normal(-2.0, 0.7), stats.norm(-2.0, 0.7)),
    "log-normal": (LogNormal(0.3, 1.8), stats.lognorm(np.log(1.8), scale=0.3)),
    "uniform": (Uniform(-1.0, 4.0), stats.uniform(-1.0, 5.0)),
    "half-normal": (HalfNormal(0.05), stats.halfnorm(scale=0.05)),
}
TWICE = {
    "normal": stats.norm(-2.0, 1.4),
    "log-normal": stats.lognorm(2.0 * np.log(1.8), scale=0.3),
    "uniform": stats.uniform(-3.5, 10.0),
    "half-normal": stats.halfnorm(scale=0.1),
}
HALF = {
    "normal": stats.norm(-2.0, 0.35),
    "log-normal": stats.lognorm(0.5 * np.log(1.8), scale=0.3),
    "uniform": stats.uniform(0.25, 2.5),
    "half-normal": stats.halfnorm(scale=0.025),
}
Z = np.array([-6.0, -3.0, -1.2, -0.1, 0.0, 0.4, 1.7, 3.3, 6.0])
FLAT = {"flat": Flat(0.2, 0.05), "flat in log": FlatLog(0.2, 0.3)}


@pytest.mark.parametrize("name", PROPER)
def test_value_is_the_quantile(name):
    prior, family = PROPER[name]
    quantile = np.where(Z < 0.0, family.ppf(stats.norm.cdf(Z)), family.isf(stats.norm.sf(Z)))
    assert prior.value(Z) == pytest.approx(quantile, rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("name", PROPER)
def test_density_by_change_of_variable(name):
    prior, family = PROPER[name]
    log_density = log_prior(prior, Z) - 0.5 * np.log(2.0 * np.pi) - np.log(np.abs(prior.slope(Z)))
    assert log_density == pytest.approx(family.logpdf(prior.value(Z)), rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("name", PROPER)
@pytest.mark.parametrize("factor, other", [(2.0, TWICE), (0.5, HALF)])
def test_log_ratio_is_the_wider_or_narrower_density_over_its_own(name, factor, other):
    prior, family = PROPER[name]
    x = prior.value(Z)
    wanted = other[name].logpdf(x) - family.logpdf(x)
    assert prior.log_ratio(Z, factor) == pytest.approx(wanted, rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("prior", [*(p for p, _ in PROPER.values()), *FLAT.values(), LogNormal(-0.01, 2.0)], ids=str)
def test_coordinate_and_slope(prior):
    z = Z[1:-1]
    assert prior.coordinate(prior.value(z)) == pytest.approx(z, rel=1e-9, abs=1e-9)
    h = 1e-4
    by_difference = (8.0 * (prior.value(z + h) - prior.value(z - h)) - prior.value(z + 2 * h) + prior.value(z - 2 * h))
    assert prior.slope(z) == pytest.approx(by_difference / (12.0 * h), rel=1e-8, abs=1e-12)


def test_negative_median_mirrors():
    assert LogNormal(-0.01, 2.0).value(Z) == pytest.approx(-LogNormal(0.01, 2.0).value(Z))


@pytest.mark.parametrize("prior", FLAT.values(), ids=str)
def test_flat_prior_has_no_density_of_its_own(prior):
    assert not prior.proper
    assert np.all(log_prior(prior, Z) == 0.0) and np.all(prior.log_ratio(Z, 2.0) == 0.0)

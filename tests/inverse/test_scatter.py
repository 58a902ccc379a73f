"""Derivatives of both families of strength scatter against central differences, and their forms in agreement."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from pullback.inverse.scatter import scatter

FAMILIES = {"weibull": (4.2, 9.0), "lognormal": (4.2, 0.12)}
STEP, WITHIN = 1e-4, 1e-7
"""Relative step of the differences (five points: truncation 1e-16 times the fifth derivative, rounding 1e-11)."""


def differences(f, x):
    """df/dlog x at each lane's own x."""
    up, down, up2, down2 = (f(x * np.exp(k * STEP)) for k in (1.0, -1.0, 2.0, -2.0))
    return (8.0 * (up - down) - (up2 - down2)) / (12.0 * STEP)


def bundle(name):
    rng = np.random.default_rng(3)
    first, second = (v * np.exp(0.05 * rng.standard_normal(4)) for v in FAMILIES[name])
    return scatter(name, 396.0), first, second, rng


@pytest.mark.parametrize("name", FAMILIES)
def test_coupons(name):
    family, first, second, rng = bundle(name)
    measure, volume = 4.0 * np.exp(0.1 * rng.standard_normal(9)), rng.uniform(200.0, 600.0, 9)
    broke = np.arange(9) % 3 > 0

    def log_density(a, b):
        return family.coupon_log_density(measure, volume, broke, (a, b))[0]

    by = family.coupon_log_density(measure, volume, broke, (first, second))[1]
    assert by[0] * first == pytest.approx(differences(lambda a: log_density(a, second), first), rel=WITHIN, abs=1e-7)
    assert by[1] * second == pytest.approx(differences(lambda b: log_density(first, b), second), rel=WITHIN, abs=1e-7)


@pytest.mark.parametrize("name, family", [("weibull", stats.weibull_min), ("lognormal", stats.lognorm)])
def test_coupons_against_scipy(name, family):
    """A coupon of the reference volume has the family's own density, and its upper tail where it held."""
    first, second = FAMILIES[name]
    theirs = family(second, scale=first)
    measure, broke = np.array([3.1, 3.9, 4.4, 4.6]), np.array([True, True, False, True])
    wanted = np.where(broke, theirs.logpdf(measure), theirs.logsf(measure)).sum()
    ours = scatter(name, 396.0)
    parameters = (np.array([first]), np.array([second]))
    assert ours.coupon_log_density(measure, np.full(4, 396.0), broke, parameters)[0] == pytest.approx(wanted, rel=1e-12)
    hazard = ours.coupon_hazard(measure, np.full(4, 396.0), parameters)[:, 0]
    assert hazard == pytest.approx(-theirs.logsf(measure), rel=1e-12)


@pytest.mark.parametrize("name", FAMILIES)
def test_hazard_of_a_body(name):
    family, first, second, rng = bundle(name)
    measure, volume = rng.uniform(2.5, 4.5, (7, 4)), rng.uniform(50.0, 150.0, (7, 4))

    def hazard(m=measure, v=volume, a=first, b=second):
        return family.hazard(m, v, (a, b))[0]

    total, by_measure, by_log_volume, (by_first, by_second) = family.hazard(measure, volume, (first, second))
    assert by_first * first == pytest.approx(differences(lambda a: hazard(a=a), first), rel=WITHIN)
    assert by_second * second == pytest.approx(differences(lambda b: hazard(b=b), second), rel=WITHIN)
    for i in range(7):
        row = np.arange(7)[:, None] == i
        along = differences(lambda x, r=row: hazard(m=np.where(r, measure * x, measure)), np.ones(4))
        assert by_measure[i] * measure[i] == pytest.approx(along, rel=WITHIN, abs=1e-9)
        along = differences(lambda x, r=row: hazard(v=np.where(r, volume * x, volume)), np.ones(4))
        assert by_log_volume[i] == pytest.approx(along, rel=WITHIN, abs=1e-9)
    one = [family.log_hazard(np.log(measure[:, k]), volume[:, k], first[k], second[k]) for k in range(4)]
    assert np.exp(one) == pytest.approx(total, rel=1e-12)


@pytest.mark.parametrize("name", FAMILIES)
def test_where_it_fails(name):
    """Shares add up to one; for the weakest link they are shares of the hazard, else all at the most stressed."""
    family, (first, second) = scatter(name, 396.0), FAMILIES[name]
    measure, volume = np.array([[3.0], [4.0], [3.9], [-np.inf]]), np.array([[100.0], [20.0], [80.0], [50.0]])
    with np.errstate(invalid="ignore"):
        log = np.log(np.where(measure > 0.0, measure, 0.0), where=measure > 0.0, out=np.full((4, 1), -np.inf))
    shares = family.shares(log, volume, first, second)
    assert shares.sum() == pytest.approx(1.0)
    hazard = np.where(measure > 0.0, np.maximum(measure, 0.0) ** second * volume, 0.0)
    wanted = hazard / hazard.sum() if name == "weibull" else (np.arange(4)[:, None] == 1).astype(float)
    assert shares == pytest.approx(wanted, rel=1e-12)

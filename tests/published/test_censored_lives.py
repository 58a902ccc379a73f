"""Weibull fit to censored lives through the likelihood of coupon strength.

NIST/SEMATECH e-Handbook, 8.2.2.1 and 8.4.1.3: shape 1.7207, scale 606.5280 h, log-likelihood −75.135. More digits, and
standard errors from the observed information, were computed apart from this package; scipy's
weibull_min.fit(CensoredData) gives shape 1.72079718, scale 606.527565.
"""

import numpy as np
import pytest
from scipy.optimize import minimize

from pullback.datasets import load
from pullback.inverse.scatter.weibull import Weibull

LIVES = load("nist_censored_lives").data
BROKE = LIVES["failed"] == 1
VOLUME = np.full(LIVES["life"].size, 7.0)
FAMILY = Weibull(7.0)


def log_density(scale, modulus):
    value, by = FAMILY.coupon_log_density(LIVES["life"], VOLUME, BROKE, (np.array([scale]), np.array([modulus])))
    return float(value[0]), np.array([float(by[0][0]), float(by[1][0])])


def minus(z):
    value, by = log_density(*np.exp(z))
    return -value, -by * np.exp(z)


@pytest.fixture(scope="module")
def optimum():
    return np.exp(minimize(minus, np.log([300.0, 1.0]), jac=True, method="BFGS", options={"gtol": 1e-9}).x)


def test_published_optimum(optimum):
    scale, modulus = optimum
    assert modulus == pytest.approx(1.7207972608, rel=1e-7)
    assert scale == pytest.approx(606.52755800, rel=1e-7)
    assert log_density(*optimum)[0] == pytest.approx(-75.1346181645, abs=1e-9)
    assert (modulus, scale) == pytest.approx((1.7207, 606.5280), rel=1e-4)


def test_observed_information(optimum):
    """From central differences of the gradient with a step of 1e-4 of each parameter."""
    step = 1e-4 * optimum
    rows = []
    for i in range(2):
        h = np.eye(2)[i] * step[i]
        rows.append((log_density(*(optimum + h))[1] - log_density(*(optimum - h))[1]) / (2.0 * step[i]))
    covariance = np.linalg.inv(-np.array(rows))
    se_scale, se_modulus = np.sqrt(np.diag(covariance))
    assert se_modulus == pytest.approx(0.50215, rel=2e-5)
    assert se_scale == pytest.approx(124.911, rel=1e-5)
    assert covariance[0, 1] / (se_scale * se_modulus) == pytest.approx(-0.4514, abs=6e-5)


def test_survivors_count(optimum):
    """Leaving out the units that did not fail moves the scale far outside the tolerance above."""
    lives, failed = LIVES["life"][BROKE], BROKE[BROKE]
    value = FAMILY.coupon_log_density(lives, VOLUME[BROKE], failed, (np.array([optimum[0]]), np.array([optimum[1]])))
    assert abs(float(value[1][0][0]) * optimum[0]) > 1.0

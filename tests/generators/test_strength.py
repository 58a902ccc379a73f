"""Capacity of invented parts against closed forms."""

import numpy as np
import pytest
from scipy.special import ndtri

from generators.laws import stress
from generators.strength import Loading, Strength, capacity

YEOH = {"c10": 0.3, "c20": -0.004, "c30": 2e-4}
X = np.linspace(0.0, 100.0, 121)
PARTS = 10_000


def uniform(weight: float = 0.0, stiffness: float = 1.0) -> Loading:
    area = np.full((PARTS, X.size), 20.0)
    return Loading(X, area, weight * (1.0 - X / 100.0) + 0.0 * area, np.full(PARTS, stiffness), "yeoh", YEOH)


@pytest.mark.parametrize("share", [0.01, 0.1, 0.5])
def test_weakest_link_of_a_uniform_part(share):
    """P(survive) = exp(−(e/e0)^m V/V0), so the elongation at a share q is e0 (−ln(1−q) V0/V)^(1/m)."""
    strength = Strength("elongation", "weibull", 3.6, 12.0, 396.0)
    force = capacity(uniform(stiffness=1.1), strength, np.random.default_rng(1))
    elongation = 3.6 * (-np.log(1.0 - share) * 396.0 / 2000.0) ** (1.0 / 12.0)
    assert np.quantile(force, share) == pytest.approx(20.0 * 1.1 * stress("yeoh", YEOH, 1.0 + elongation), rel=0.025)


def test_weakest_link_in_nominal_stress():
    strength = Strength("nominal stress", "weibull", 6.0, 10.0, 396.0)
    force = capacity(uniform(), strength, np.random.default_rng(2))
    median = 20.0 * 6.0 * (np.log(2.0) * 396.0 / 2000.0) ** 0.1
    assert np.quantile(force, 0.5) == pytest.approx(median, rel=0.006)


def test_weakest_link_of_a_hanging_part():
    """Nominal stress falls linearly along it: the integral of (a + b u)^m over u in 0..1 has a closed form."""
    strength = Strength("nominal stress", "weibull", 6.0, 10.0, 396.0)
    force = capacity(uniform(weight=30.0), strength, np.random.default_rng(3))
    median = np.quantile(force, 0.5)
    low, high = median / 20.0 / 6.0, (median + 30.0) / 20.0 / 6.0
    mean_hazard = (high**11 - low**11) / 11.0 / (high - low)
    assert mean_hazard * 2000.0 / 396.0 == pytest.approx(np.log(2.0), rel=0.05)


@pytest.mark.parametrize("criterion", ["elongation", "nominal stress"])
def test_lognormal_at_the_most_loaded_section(criterion):
    strength = Strength(criterion, "lognormal", 3.0, 0.1, 396.0)
    force = capacity(uniform(weight=10.0), strength, np.random.default_rng(4))
    tenth = 3.0 * np.exp(0.1 * ndtri(0.1))
    nominal = stress("yeoh", YEOH, 1.0 + tenth) if criterion == "elongation" else tenth
    assert np.quantile(force, 0.1) == pytest.approx(20.0 * nominal - 10.0, rel=0.02)


def test_coupons_follow_their_distribution():
    draws = Strength("elongation", "weibull", 3.6, 12.0, 396.0).draw(20_000, np.random.default_rng(6))
    assert np.quantile(draws, 1.0 - np.exp(-1.0)) == pytest.approx(3.6, rel=0.005)
    assert np.quantile(draws, 0.05) == pytest.approx(3.6 * (-np.log(0.95)) ** (1 / 12), rel=0.01)

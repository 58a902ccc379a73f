"""Moments of the invented sections."""

import numpy as np
import pytest

from generators.field import Outline, gaussian_process


def test_covariance_of_the_gaussian_process():
    x = np.linspace(0.0, 120.0, 61)
    draws = gaussian_process(x, 0.05, 12.0, 40_000, np.random.default_rng(5))
    wanted = 0.05**2 * np.exp(-0.5 * ((x[:, None] - x[None, :]) / 12.0) ** 2)
    # An entry of the sample covariance has a standard error of at most sqrt(2/40000) = 0.7 % of the variance.
    assert np.abs(np.cov(draws.T) - wanted).max() < 0.04 * 0.05**2
    assert np.abs(draws.mean(axis=0)).max() < 5.0 * 0.05 / 200.0
    excess = (draws**4).mean() / (draws**2).mean() ** 2
    assert excess == pytest.approx(3.0, abs=0.05)


def test_outline_is_linear_in_its_sides():
    outline = Outline((0.0, 50.0, 100.0), (10.0, 20.0, 10.0), (2.0, 2.0, 4.0))
    assert outline.area(np.array([0.0, 25.0, 75.0, 100.0])) == pytest.approx([20.0, 30.0, 45.0, 40.0])

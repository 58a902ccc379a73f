"""The sampler's coordinates: exact where the model is linear, and with the right determinant and gradient elsewhere."""

from __future__ import annotations

import numpy as np
import pytest
from every_gauge import model
from inverse_linear import problem

from pullback.inverse.fit import fit
from pullback.inverse.laplace import laplace

STEP = 2e-3


@pytest.fixture(scope="module")
def whole():
    """Laplace approximation of the study of every gauge."""
    return laplace(fit(model().posterior, 3), 400, 3)


@pytest.fixture(scope="module")
def linear():
    """The same of sections alone, whose log is linear in the field given spread and correlation length."""
    found = fit(problem()[0], 1)
    return laplace(found, 400, 1), found.free, found.hyper


def test_a_linear_problem_is_standard_normal_at_every_spread_and_length(linear):
    """log-density + |u|²/2 does not depend on u, far from the fit's hyper-parameters too."""
    around, free, hyper = linear
    density = around.whitening.density(around.posterior.value_and_gradient)
    rng = np.random.default_rng(1)
    for h in ([0.0, 0.0], [-2.0, 1.5], [2.0, -1.0], [-3.0, -2.0]):
        y = rng.standard_normal((16, around.posterior.layout.dim))
        y[:, hyper] = h
        left = density(y)[0] + 0.5 * np.sum(y[:, free] ** 2, axis=1)
        assert np.ptp(left) < 1e-4


def test_without_the_mean_it_is_not(linear, monkeypatch):
    """Negative control: a map that forgets what the data pull at."""
    around, free, hyper = linear
    monkeypatch.setattr(around.whitening, "pull", 0.0 * around.whitening.pull)
    density = around.whitening.density(around.posterior.value_and_gradient)
    y = np.random.default_rng(1).standard_normal((16, around.posterior.layout.dim))
    y[:, hyper] = 0.0
    assert np.ptp(density(y)[0] + 0.5 * np.sum(y[:, free] ** 2, axis=1)) > 1.0


def test_determinant_against_differences(whole):
    y, w = whole.y[3:4], whole.whitening
    shift = 1e-5 * np.eye(y.shape[1])
    jacobian = (w.to_q(y + shift) - w.to_q(y - shift)).T / 2e-5
    value = w.density(whole.posterior.value_and_gradient)(y)[0] - whole.posterior.log_density(w.to_q(y))
    assert value == pytest.approx(np.linalg.slogdet(jacobian)[1], abs=1e-5)


def test_gradient_against_differences(whole):
    """Five points at 2e-3; the equilibrium is solved to 1e-9, which leaves some 1e-4 in a hyper-parameter's."""
    density = whole.whitening.density(whole.posterior.value_and_gradient)
    y = whole.y[5:6]
    gradient = density(y)[1][0]
    for i in range(y.shape[1]):
        t = np.repeat(y, 4, axis=0)
        t[:, i] += STEP * np.array([1.0, -1.0, 2.0, -2.0])
        f = density(t)[0]
        difference = (8.0 * (f[0] - f[1]) - (f[2] - f[3])) / (12.0 * STEP)
        assert gradient[i] == pytest.approx(difference, rel=1e-3, abs=1e-3), whole.posterior.layout.names()[i]


def test_hyper_parameters_out_of_reach_have_no_density(whole):
    y = whole.y[:2].copy()
    y[0, whole.posterior.layout.slices["spread"]] = 7.0
    value, gradient = whole.whitening.density(whole.posterior.value_and_gradient)(y)
    assert value[0] == -np.inf and np.all(gradient[0] == 0.0) and np.isfinite(value[1])

"""Laplace evidence over spread and correlation length, where it can be had exactly: sections of known error, nothing
else, so that their logarithms are jointly normal for given (spread, ell).

    log section = log outline + offset + Phi beta + error,   offset and beta normal
    => readings are normal, covariance Phi W² Phiᵀ + offset sd² 1 1ᵀ + error² I.
"""

from __future__ import annotations

import numpy as np
import pytest
from inverse_linear import ELL, ERROR, OFFSET, SPREAD, STATION, problem
from scipy import stats

from pullback.inverse.area_field import Basis
from pullback.inverse.evidence import Surface
from pullback.inverse.fit import Fit, fit


def exact(z: np.ndarray, off: np.ndarray, basis: Basis) -> float:
    """log of the readings' density times the prior's, at the coordinates z of (spread, ell)."""
    spread, ell = SPREAD.value(z[:1]), ELL.value(z[1:])
    root = basis.at(STATION) * np.exp(basis.log_weight(spread, ell))[:, 0]
    cov = root @ root.T + OFFSET**2 + ERROR**2 * np.eye(29)
    return float(stats.multivariate_normal(np.zeros(29), cov).logpdf(off) - 0.5 * z @ z)


@pytest.fixture(scope="module")
def fitted() -> tuple[Fit, np.ndarray, Basis]:
    posterior, off, basis = problem()
    return fit(posterior, 1), off, basis


def test_evidence_is_the_marginal_likelihood(fitted):
    """At every node, to 1e-4. The unit normal prior of each free coordinate enters without its 1/sqrt(2 pi)."""
    found, off, basis = fitted
    missing = 0.5 * found.free.size * np.log(2.0 * np.pi)
    wanted = [exact(n.hyper, off, basis) for n in found.nodes]
    assert len(found.nodes) >= 15
    assert [n.log_evidence - missing for n in found.nodes] == pytest.approx(wanted, abs=1e-4)


def quadrature(f) -> tuple[np.ndarray, np.ndarray]:
    """Mean and standard deviation of z under exp(f(z)) on a grid of ±4.5."""
    axis = np.linspace(-4.5, 4.5, 61)
    z = np.stack(np.meshgrid(axis, axis, indexing="ij"), axis=-1).reshape(-1, 2)
    log = np.array([f(p) for p in z])
    w = np.exp(log - log.max())
    w /= w.sum()
    mean = w @ z
    return mean, np.sqrt(w @ (z - mean) ** 2)


def test_surface_has_about_the_exact_moments(fitted):
    """From some twenty nodes, for a start of the sampler: means within half a standard deviation (0.36 and 0.11 here),
    standard deviations within 20 %."""
    found, off, basis = fitted
    mean, sd = quadrature(lambda z: exact(z, off, basis))
    surface = Surface(found.nodes)
    got, covariance = surface.moments()
    assert np.all(np.abs(got - mean) < 0.5 * sd)
    assert np.sqrt(np.diag(covariance)) == pytest.approx(sd, rel=0.2)
    # The truth is within two of them, and draws are of the surface.
    truth = np.array([SPREAD.coordinate(0.04), ELL.coordinate(18.0)])
    assert np.all(np.abs(truth - mean) < 2.0 * sd)
    draws = surface.draw(4000, np.random.default_rng(2))
    assert np.all(np.abs(draws.mean(axis=0) - got) < 4.0 * sd / np.sqrt(4000))
    assert draws.std(axis=0) == pytest.approx(np.sqrt(np.diag(covariance)), rel=0.06)


def test_joint_mode_is_far_off(fitted):
    """Why the two are never optimised with the rest: log-density at the nodes grows where the evidence has fallen."""
    found, _, _ = fitted
    by_mode = max(found.nodes, key=lambda n: n.log_density)
    assert by_mode.log_evidence < found.best.log_evidence - 0.5
    assert SPREAD.value(by_mode.hyper[:1])[0] > 1.3 * SPREAD.value(found.best.hyper[:1])[0]

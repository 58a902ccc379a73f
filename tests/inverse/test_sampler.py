"""The Hamiltonian sampler on a normal distribution of twenty dimensions whose mean and covariance are known."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
import pytest
from emcee.state import State

from pullback.inverse.laplace import Laplace
from pullback.inverse.layout import Layout, Scalar
from pullback.inverse.priors import Flat
from pullback.inverse.sampling.loop import sample
from pullback.inverse.sampling.moves.hamiltonian import Hamiltonian

DIM = 20


@dataclass
class Target:
    """Normal with a strong correlation and standard deviations over two decades; `flip`: coordinates whose gradient
    has the wrong sign; `widen`: factor on the log-density and its gradient."""

    flip: int = 0
    widen: float = 1.0
    layout: Layout = field(default_factory=lambda: Layout([Scalar(f"x{k}", "", Flat(0.0, 1.0)) for k in range(DIM)]))

    def __post_init__(self):
        sd = np.geomspace(0.1, 10.0, DIM)
        k = np.arange(DIM)
        self.mean = np.sin(k)
        self.covariance = np.outer(sd, sd) * 0.9 ** np.abs(k[:, None] - k)
        self.precision = np.linalg.inv(self.covariance)

    def value_and_gradient(self, q):
        off = q - self.mean
        gradient = self.widen * -off @ self.precision
        gradient[:, : self.flip] *= -1.0
        return self.widen * -0.5 * np.einsum("wi,ij,wj->w", off, self.precision, off), gradient

    def log_density(self, q):
        return self.value_and_gradient(q)[0]


class Unchanged:
    """Coordinates of the sampler that are the unknowns' own."""

    def to_q(self, y):
        return y

    def density(self, of_q):
        return of_q


def start(target, seed=5):
    """A poor Laplace approximation: the variances right, the correlations left out, the mean off."""
    rng = np.random.default_rng(seed)
    sd = np.sqrt(np.diag(target.covariance))
    mean = target.mean + 0.5 * sd
    draws = mean + sd * rng.standard_normal((50, DIM))
    return Laplace(target, Unchanged(), draws, draws, np.diag(sd**2))


def z_scores(target, draws):
    """Means, variances and neighbours' correlations in standard errors, with the least effective size."""
    x, n = draws.q.reshape(-1, DIM), draws.diagnosis.least
    sd = np.sqrt(np.diag(target.covariance))
    z = [(x.mean(axis=0) - target.mean) / sd * np.sqrt(n), (x.var(axis=0) / sd**2 - 1.0) * np.sqrt(0.5 * n)]
    r = np.corrcoef(x.T)[np.arange(DIM - 1), np.arange(1, DIM)]
    z.append((np.arctanh(r) - np.arctanh(0.9)) * np.sqrt(n))
    return z


@pytest.fixture(scope="module")
def drawn():
    target = Target()
    return target, sample(start(target), 11, 2000, 2.0)


def test_mean_and_covariance(drawn):
    """59 figures, each within four standard errors."""
    target, draws = drawn
    for z in z_scores(target, draws):
        assert np.abs(z).max() < 4.0
    # Standard errors are not made wide by an effective size that is too small: the figures do scatter by about one.
    assert 0.2 < np.std(np.concatenate(z_scores(target, draws)[:2])) < 1.6


def test_chains_are_sound(drawn):
    _, draws = drawn
    assert draws.stopped == "every unknown has 2000 effective draws"
    assert 0.7 < draws.acceptance.mean() < 0.95 and draws.diverging.sum() == 0
    assert draws.acceptance.shape == draws.log_density.shape == draws.energy.shape == draws.q.shape[:2]
    # Trajectories of about a quarter period leave hardly any memory: not below a fifth of a draw each.
    assert draws.diagnosis.least / draws.q[..., 0].size > 0.2


def test_log_density_and_energy_belong_to_the_draws(drawn):
    target, draws = drawn
    for k in (0, 100):
        assert draws.log_density[:, k] == pytest.approx(target.log_density(draws.q[:, k]), rel=1e-9)
    # −log density is half a chi-square of 20 degrees, the momentum's energy another.
    assert draws.energy.mean() == pytest.approx(DIM, rel=0.03)


def test_same_seed_same_draws_and_another_others(drawn):
    target, draws = drawn
    again, other = sample(start(target), 11, 2000, 2.0), sample(start(target), 12, 500, 2.0)
    assert np.array_equal(draws.q, again.q)
    n = other.q.shape[1]
    assert np.mean(np.abs(draws.q[:, :n] - other.q) > 1e-9) > 0.99


def test_walkers_do_not_share_random_numbers():
    move = Hamiltonian(Target().value_and_gradient, np.eye(DIM), 3, 0.5)
    first = move._random(4, DIM)[0]
    move.iteration = 1
    second = move._random(4, DIM)[0]
    both = np.concatenate((first, second))
    assert np.unique(both).size == both.size


def test_kept_gradient_is_that_of_the_point_where_the_walker_stands():
    """After a trajectory of which some walkers' are accepted and others' rejected."""
    target = Target()
    move = Hamiltonian(target.value_and_gradient, np.linalg.cholesky(target.covariance), 3, 1.0)
    q = target.mean + np.random.default_rng(1).standard_normal((40, DIM)) @ np.linalg.cholesky(target.covariance).T
    state = State(q.copy(), log_prob=target.log_density(q))
    state, accepted = move.propose(None, state)
    assert 3 < accepted.sum() < 37
    assert np.all((state.coords != q).any(axis=1) == accepted)
    before = move.evaluations
    assert move._gradient(state.coords) == pytest.approx(target.value_and_gradient(state.coords)[1], rel=1e-12)
    assert move.evaluations == before  # kept, not computed again
    assert state.log_prob == pytest.approx(target.log_density(state.coords), rel=1e-12)


def test_wrong_gradient_is_punished():
    """Negative control: with the sign of two derivatives wrong energy is not kept; the step shrinks to nothing for it
    and the chains stand nearly still."""
    draws = sample(start(Target(flip=2)), 11, 2000, 0.02)
    assert draws.step < 0.02 and draws.diagnosis.least < 100.0 and draws.diagnosis.rhat_max > 1.01


def test_wrong_density_misses_the_target():
    """Negative control: from a log-density 0.85 times the true one variances come out 18 % too large."""
    target = Target(widen=0.85)
    draws = sample(start(target), 11, 2000, 2.0)
    assert np.abs(z_scores(target, draws)[1]).min() > 2.0 and np.abs(z_scores(target, draws)[1]).max() > 4.0

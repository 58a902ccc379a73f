"""Warm-up, sampling in blocks, and the stop rule; all counted in draws, never in seconds but for the last limit."""

from __future__ import annotations

import time
from collections.abc import Callable
from dataclasses import dataclass
from functools import partial

import emcee
import numpy as np
from numpy.typing import NDArray

from pullback.inverse.laplace import Laplace
from pullback.inverse.root import root
from pullback.inverse.sampling.diagnose import Diagnosis, diagnose
from pullback.inverse.sampling.moves import Hamiltonian
from pullback.inverse.whitening import Density

Array = NDArray[np.float64]
Progress = Callable[[str, float], None]

WALKERS = 8
SETTLE, ESTIMATE, TUNE = 60, 240, 60
"""Warm-up: settle the step, estimate the metric, tune the step to it; then both are frozen."""
LEAST_DRAWS, BLOCK, MOST_DRAWS = 500, 250, 20_000


@dataclass(frozen=True)
class Draws:
    """Draws (chains, draws, dim) of the posterior with what the sampler says of them."""

    q: Array
    log_density: Array
    acceptance: Array
    energy: Array
    diverging: NDArray[np.bool_]
    diagnosis: Diagnosis
    step: float
    leaps: float
    evaluations: int
    warm_up: int
    seconds: float
    stopped: str


def sample(
    start: Laplace, seed: int, effective: int, max_minutes: float, progress: Progress = lambda stage, share: None
) -> Draws:
    """Sample the posterior from its Laplace approximation until every unknown has `effective` draws."""
    began, posterior = time.monotonic(), start.posterior
    dim = posterior.layout.dim
    density = start.whitening.density(posterior.value_and_gradient)
    move = Hamiltonian(density, root(start.covariance), seed, 0.5 * dim**-0.25)
    sampler = emcee.EnsembleSampler(WALKERS, dim, lambda y: density(y)[0], moves=move, vectorize=True)
    state = emcee.State(_starting_points(start, density), log_prob=None)
    state = _warm_up(sampler, move, state, start, progress)
    chain, log_p, stopped = np.empty((WALKERS, 0, dim)), np.empty((WALKERS, 0)), ""
    while not stopped:
        tick = partial(_tick, progress, chain.shape[1], max(BLOCK, LEAST_DRAWS - chain.shape[1]))
        state = _run(sampler, state, BLOCK, tick)
        new = start.whitening.to_q(sampler.get_chain(flat=True)).reshape(BLOCK, WALKERS, dim)
        chain = np.concatenate((chain, new.swapaxes(0, 1)), axis=1)
        log_p = np.concatenate((log_p, sampler.get_log_prob().T), axis=1)
        sampler.reset()
        diagnosis = diagnose(chain, posterior.layout.names())
        stopped = _stop(diagnosis, effective, began, max_minutes)
    return Draws(
        chain, log_p, np.array(move.acceptance).T, np.array(move.energy).T, np.array(move.diverged).T, diagnosis,
        move.step, float(np.mean(move.leaps)), move.evaluations, SETTLE + ESTIMATE + TUNE,
        time.monotonic() - began, stopped,
    )  # fmt: skip


def _tick(progress: Progress, done: int, n: int, k: int) -> None:
    progress("sampling", (done + k) / (done + n))


def _starting_points(start: Laplace, density: Density) -> Array:
    """Laplace draws with finite density, drawn in towards their mean where they have none."""
    points, mean = start.y[:WALKERS].copy(), start.y.mean(axis=0)
    for pull in (1.0, 0.7, 0.4, 0.2, 0.0):
        bad = ~np.isfinite(density(points)[0])
        if not np.any(bad):
            return points
        points[bad] = mean + pull * (start.y[:WALKERS][bad] - mean)
    raise RuntimeError("no starting point with finite density near the fit")


def _warm_up(
    sampler: emcee.EnsembleSampler, move: Hamiltonian, state: emcee.State, start: Laplace, progress: Progress
) -> emcee.State:
    total = SETTLE + ESTIMATE + TUNE
    move.adapt()
    state = _run(sampler, state, SETTLE, lambda k: progress("warm-up", k / total))
    sampler.reset()
    state = _run(sampler, state, ESTIMATE, lambda k: progress("warm-up", (SETTLE + k) / total))
    seen = sampler.get_chain(flat=True)
    sampler.reset()
    n, dim = seen.shape
    # Shrinkage n/(n + 5 dim) towards Laplace: few draws must not invent directions.
    share = n / (n + 5.0 * dim)
    move.root = root(share * np.cov(seen.T).reshape(dim, dim) + (1.0 - share) * start.covariance)
    move.freeze()
    move.adapt()
    state = _run(sampler, state, TUNE, lambda k: progress("warm-up", (SETTLE + ESTIMATE + k) / total))
    sampler.reset()
    move.freeze()
    move.forget()
    return state


def _run(sampler: emcee.EnsembleSampler, state: emcee.State, n: int, tick: Callable[[int], None]) -> emcee.State:
    for k, last in enumerate(sampler.sample(state, iterations=n, skip_initial_state_check=True), 1):
        state = last
        if k % 10 == 0:
            tick(k)
    return state


def _stop(diagnosis: Diagnosis, effective: int, began: float, max_minutes: float) -> str:
    if diagnosis.draws >= LEAST_DRAWS and diagnosis.least >= effective and diagnosis.rhat_max <= 1.01:
        return f"every unknown has {effective} effective draws"
    if (time.monotonic() - began) / 60.0 >= max_minutes:
        return f"the limit of {max_minutes:g} minutes was reached"
    if diagnosis.draws >= MOST_DRAWS:
        return f"the limit of {MOST_DRAWS} draws a chain was reached"
    return ""

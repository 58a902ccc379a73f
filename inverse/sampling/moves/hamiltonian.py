"""Hamiltonian dynamics in whitened coordinates, all walkers in one batch. Duane et al., Phys. Lett. B 195 (1987) 216.

With metric and step frozen the walkers do not interact: each is a chain in its own right. Step size by dual averaging
(Hoffman & Gelman, J. Mach. Learn. Res. 15 (2014) 1593, eq. 6). Random numbers come by counter from (seed, walker,
iteration), so that no state of a generator has to be kept.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np
from emcee.moves import Move
from emcee.state import State
from numpy.typing import NDArray

Array = NDArray[np.float64]
Density = Callable[[Array], tuple[Array, Array]]

_DIVERGED = 1000.0
_MOST_LEAPS = 50
_SHARED = 2**32


@dataclass
class DualAveraging:
    """Step size that brings the mean acceptance to `target`."""

    step: float
    target: float = 0.8
    count: int = 0
    mean_error: float = 0.0
    log_average: float = 0.0
    centre: float = field(init=False)

    def __post_init__(self) -> None:
        self.centre = np.log(4.0 * self.step)

    def update(self, acceptance: float) -> None:
        """One iteration's mean acceptance probability."""
        self.count += 1
        eta = 1.0 / (self.count + 10.0)
        self.mean_error += eta * (self.target - acceptance - self.mean_error)
        log_step = self.centre - np.sqrt(self.count) / 0.05 * self.mean_error
        weight = self.count**-0.75
        self.log_average += weight * (log_step - self.log_average)
        self.step = float(np.exp(min(log_step, np.log(2.0))))

    def settle(self) -> float:
        """The averaged step."""
        return float(np.exp(self.log_average)) if self.count else self.step


class Hamiltonian(Move):
    """emcee move: `density` maps points (walkers, dim) to log-density and gradient; `root` (dim, dim) the Cholesky
    factor of the covariance that whitens them."""

    def __init__(self, density: Density, root: Array, seed: int, step: float) -> None:
        self.density, self.root, self.seed = density, root, seed
        self.iteration = 0
        self.averaging: DualAveraging | None = None
        self.step = step
        self.evaluations = 0
        self.energy: list[Array] = []
        self.acceptance: list[Array] = []
        self.diverged: list[NDArray[np.bool_]] = []
        self.leaps: list[int] = []
        self._at: tuple[Array, Array] | None = None

    def adapt(self) -> None:
        """Begin to adapt the step."""
        self.averaging = DualAveraging(self.step)

    def freeze(self) -> None:
        """Take the averaged step and keep it."""
        if self.averaging is not None:
            self.step = self.averaging.settle()
        self.averaging = None

    def forget(self) -> None:
        """Drop the records of warm-up."""
        self.energy, self.acceptance, self.diverged, self.leaps = [], [], [], []

    def propose(self, model: object, state: State) -> tuple[State, NDArray[np.bool_]]:
        """One trajectory of every walker, accepted by Metropolis' rule."""
        q, log_p = state.coords, state.log_prob
        momentum, uniform, jitter, path = self._random(*q.shape)
        step = self.averaging.step if self.averaging else self.step
        gradient = self._gradient(q)
        leaps = int(np.clip(round(path / step), 1, _MOST_LEAPS))
        new, new_log_p, new_gradient, end = self._trajectory(q, gradient, momentum, step * jitter, leaps)
        with np.errstate(invalid="ignore", over="ignore"):
            error = (log_p - new_log_p) + 0.5 * np.sum(end**2 - momentum**2, axis=1)
            error = np.where(np.isfinite(error), error, np.inf)
            chance = np.exp(-np.maximum(error, 0.0))
        accepted = uniform < chance
        state.coords = np.where(accepted[:, None], new, q)
        state.log_prob = np.where(accepted, new_log_p, log_p)
        self._at = state.coords.copy(), np.where(accepted[:, None], new_gradient, gradient)
        if self.averaging:
            self.averaging.update(float(np.mean(chance)))
        self.iteration += 1
        self.leaps.append(leaps)
        self.acceptance.append(chance)
        self.energy.append(-log_p + 0.5 * np.sum(momentum**2, axis=1))
        # A point outside the law's stable range is no divergence of the integrator: its density is nil.
        self.diverged.append((error > _DIVERGED) & np.isfinite(new_log_p))
        return state, accepted

    def _trajectory(
        self, q: Array, gradient: Array, momentum: Array, step: Array, leaps: int
    ) -> tuple[Array, Array, Array, Array]:
        """Leapfrog of every walker; returns end points, their log-density and gradient, and end momenta."""
        p, eps = momentum.copy(), step[:, None]
        log_p = np.zeros(q.shape[0])
        for _ in range(leaps):
            p += 0.5 * eps * (gradient @ self.root)
            q = q + (eps * p) @ self.root.T
            log_p, gradient = self.density(q)
            self.evaluations += q.shape[0]
            p += 0.5 * eps * (gradient @ self.root)
        return q, log_p, gradient, p

    def _gradient(self, q: Array) -> Array:
        """The gradient at the walkers' points, kept from the last trajectory."""
        if self._at is None or not np.array_equal(self._at[0], q):
            self.evaluations += q.shape[0]
            return self.density(q)[1]
        return self._at[1]

    def _random(self, walkers: int, dim: int) -> tuple[Array, Array, Array, float]:
        """Momenta (walkers, dim), uniforms and step jitters (walkers,), and the path length common to all.

        Path lengths spread about a quarter period of the whitened normal, where a draw forgets where it came from.
        """
        momentum, uniform, jitter = np.empty((walkers, dim)), np.empty(walkers), np.empty(walkers)
        for w in range(walkers):
            rng = self._counter(w)
            momentum[w], uniform[w], jitter[w] = rng.standard_normal(dim), rng.random(), rng.uniform(0.9, 1.1)
        return momentum, uniform, jitter, 0.5 * np.pi * float(self._counter(_SHARED).uniform(0.6, 1.2))

    def _counter(self, walker: int) -> np.random.Generator:
        return np.random.Generator(np.random.Philox(key=[self.seed, walker], counter=[0, 0, 1, self.iteration]))

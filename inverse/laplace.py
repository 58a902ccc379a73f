"""Draws from the nested Laplace approximation, and the coordinates and metric that it gives the sampler."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.evidence import Surface
from pullback.inverse.fit import Fit
from pullback.inverse.posterior import Posterior
from pullback.inverse.root import root
from pullback.inverse.whitening import Whitening, proper_coordinates

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Laplace:
    """`draws` (n, dim) of the unknowns' coordinates q and `y` the same in those of `whitening`; `covariance`
    (dim, dim) of y."""

    posterior: Posterior
    whitening: Whitening
    draws: Array
    y: Array
    covariance: Array

    @property
    def mean(self) -> Array:
        """Mean of the draws (dim,)."""
        return self.draws.mean(axis=0)


def laplace(fit: Fit, n: int, seed: int) -> Laplace:
    """n draws: the hyper-parameters from their evidence, the rest normal given them."""
    posterior, dim = replace(fit.posterior, guesses={}), fit.posterior.layout.dim
    whitening = Whitening(posterior.layout, fit.hyper, fit.free, fit.best.q, *_rows(fit))
    rng = np.random.Generator(np.random.Philox(key=[seed, 2**33 + 2]))
    y = rng.standard_normal((n, dim))
    covariance = np.eye(dim)
    if fit.hyper.size:
        surface = Surface(fit.nodes)
        y[:, fit.hyper] = surface.draw(n, rng)
        covariance[np.ix_(fit.hyper, fit.hyper)] = surface.moments()[1]
    draws = np.concatenate([whitening.to_q(part) for part in np.array_split(y, max(1, n // 256))])
    posterior.set_guess(fit.best.q)
    return Laplace(posterior, whitening, draws, y, covariance)


def _rows(fit: Fit) -> tuple[Array, Array]:
    """Whitened Jacobian over the free coordinates and residuals at the best fit, with rows for what none of them sees.

    Strength and inferred noise have no residuals: a root of their own block of the curvature stands in.
    """
    jacobian = fit.posterior.jacobian(fit.best.q)[:, fit.free]
    proper = proper_coordinates(fit.posterior.layout)[fit.free]
    unseen = np.flatnonzero(~proper & ~np.any(jacobian != 0.0, axis=0))
    more = np.zeros((unseen.size, fit.free.size))
    more[:, unseen] = root(fit.best.curvature[np.ix_(unseen, unseen)]).T if unseen.size else 0.0
    residual = np.concatenate((fit.posterior.residuals(fit.best.q), np.zeros(unseen.size)))
    return np.concatenate((jacobian, more)), residual

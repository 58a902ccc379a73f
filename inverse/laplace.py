"""Draws from the nested Laplace approximation, and the metric that it gives the sampler."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.evidence import Surface
from pullback.inverse.fit import Fit, Node
from pullback.inverse.layout import Field, Layout, Values
from pullback.inverse.posterior import Guess, Posterior
from pullback.inverse.root import root

Array = NDArray[np.float64]

_MOST_INFORMATION = 1e12
_HEARD = 0.1


@dataclass(frozen=True)
class Laplace:
    """`draws` (n, dim) in the coordinates of `posterior`'s layout, `covariance` (dim, dim) and `mean` (dim,) there."""

    posterior: Posterior
    draws: Array
    mean: Array
    covariance: Array


def recentred(fit: Fit) -> Layout:
    """The layout with field coefficients that expect what the data say of each at the best node."""
    posterior, layout, q = fit.posterior, fit.posterior.layout, fit.best.q
    information = np.sum(posterior.jacobian(q) ** 2, axis=0)
    values = layout.unpack(q[None])
    blocks = list(layout.blocks)
    for k, b in enumerate(blocks):
        if isinstance(b, Field):
            blocks[k] = _expecting(b, information[layout.slices[b.name]], values)
    return Layout(blocks, layout.constants)


def _expecting(field: Field, information: Array, values: Values) -> Field:
    """The field whose coordinates expect the fit: `information` (m,) by its present, standard normal coordinates.

    `centre` is what the data alone would say of a coefficient: the fit's value, its shrinkage undone. Where the data
    say next to nothing there is nothing to undo.
    """
    beta, scale = values[field.name][:, 0], field.scale(values)[1][:, 0]
    heard = information > _HEARD
    centre = np.where(heard, beta * (1.0 + information) / np.where(heard, information, 1.0), 0.0)
    return field.informed_by(np.minimum(information / scale**2, _MOST_INFORMATION), centre)


def laplace(fit: Fit, n: int, seed: int) -> Laplace:
    """n draws of the mixture over the hyper-parameters: their evidence first, then the nearest node's normal."""
    posterior = fit.posterior
    old, new = posterior.layout, recentred(fit)
    rng = np.random.Generator(np.random.Philox(key=[seed, 2]))
    hyper = Surface(fit.nodes).draw(n, rng) if fit.hyper.size else np.zeros((n, 0))
    nearest = _nearest(fit, hyper)
    draws, means = np.empty((n, old.dim)), np.empty((n, old.dim))
    covariance = np.zeros((old.dim, old.dim))
    for k in np.unique(nearest):
        node, at = fit.nodes[k], np.flatnonzero(nearest == k)
        mean, scale = _in_coordinates(node, old, new)
        spread = root(node.covariance)
        off = np.zeros((at.size, old.dim))
        off[:, fit.free] = rng.standard_normal((at.size, fit.free.size)) @ spread.T
        means[at] = mean
        draws[at] = mean + off * scale
        inner = node.covariance * np.outer(scale[fit.free], scale[fit.free])
        covariance[np.ix_(fit.free, fit.free)] += at.size / n * inner
    draws[:, fit.hyper] = means[:, fit.hyper] = hyper
    covariance += np.cov(means.T, bias=True).reshape(covariance.shape)
    moved = replace(posterior, layout=new, guesses={})
    moved.guesses = _guesses(moved, draws)
    return Laplace(moved, draws, draws.mean(axis=0), covariance)


def _nearest(fit: Fit, hyper: Array) -> NDArray[np.intp]:
    z = np.array([node.hyper for node in fit.nodes])
    return np.argmin(((hyper[:, None] - z[None]) ** 2).sum(axis=2), axis=1)


def _in_coordinates(node: Node, old: Layout, new: Layout) -> tuple[Array, Array]:
    """A node's best point in the new coordinates, and the factor from old to new of each coordinate."""
    q, scale = node.q.copy(), np.ones(old.dim)
    values = old.unpack(q[None])
    for b in new.blocks:
        if isinstance(b, Field):
            cut, was = new.slices[b.name], old.block(b.name)
            assert isinstance(was, Field)
            (mean, sd), (was_mean, was_sd) = b.scale(values), was.scale(values)
            factor = (was_sd / sd)[:, 0]
            q[cut] = q[cut] * factor + ((was_mean - mean) / sd)[:, 0]
            scale[cut] = factor
    return q, scale


def _guesses(posterior: Posterior, draws: Array) -> dict[str, Guess]:
    """First-order starting positions about the mean of the draws."""
    posterior.set_guess(draws.mean(axis=0))
    return posterior.guesses

"""The best fit and the Laplace approximation, nested over the section's spread and correlation length.

At fixed (spread, correlation length) whitened residuals are brought down by scipy's `least_squares` with the
tangent-linear Jacobian, from several starts; what residuals cannot hold (the placement's determinant, inferred noise,
strength) is added by Newton steps on the log-density. The two are never optimised jointly, for the joint mode is far
from the truth; the Laplace evidence over a grid of them takes its place (Tierney & Kadane, JASA 81 (1986) 82;
MacKay, Neural Comput. 4 (1992) 415).
"""

from __future__ import annotations

import itertools
from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy import linalg
from scipy.optimize import least_squares

from pullback.inverse.evidence import Surface
from pullback.inverse.layout import Layout, Modulus, Scalar
from pullback.inverse.posterior import HYPER, Posterior

Array = NDArray[np.float64]
Progress = Callable[[float], None]

_DIFFERENCE = 0.02
_NEWTON = 12
_STARTS = 4
_REFINEMENTS = 2


@dataclass(frozen=True)
class Node:
    """Laplace approximation at fixed hyper-parameters: best point q (dim,), `curvature` (minus the
    Hessian) over the free coordinates, log-density there and log evidence."""

    hyper: Array
    q: Array
    curvature: Array
    log_density: float
    log_evidence: float


@dataclass(frozen=True)
class Fit:
    """Nodes over the hyper-parameters, best first; `hyper` and `free`: indices of the coordinates of each sort, in the
    layout of `posterior`."""

    posterior: Posterior
    nodes: list[Node]
    hyper: NDArray[np.intp]
    free: NDArray[np.intp]
    starts_cost: Array
    """Half the sum of squares reached from each start at the first node."""

    @property
    def best(self) -> Node:
        """Node of the largest evidence."""
        return self.nodes[0]


def fit(posterior: Posterior, seed: int, progress: Progress = lambda share: None) -> Fit:
    """Fit `posterior`, its field coefficients in whatever coordinates its layout has.

    Raises RuntimeError where no start leads to a point with finite density.
    """
    layout = posterior.layout
    cuts = layout.slices
    hyper = np.array([cuts[n].start for n in HYPER if layout.scalar(n)], int)
    free = np.setdiff1d(np.arange(layout.dim), hyper)
    origin = np.zeros(layout.dim)
    start, costs = _best_start(posterior, origin, free, seed)
    posterior, start = _sheared(posterior, start)
    nodes = [_node(posterior, start, hyper, free)]
    plan = _coarse(hyper.size)
    for k, z in enumerate(plan):
        nodes.append(_node(posterior, _at(_nearest(nodes, z), hyper, z), hyper, free))
        progress((k + 1) / (len(plan) + 5 * _REFINEMENTS))
    if not any(np.isfinite(n.log_evidence) for n in nodes):
        raise RuntimeError("no starting point leads to a fit with finite density")
    for turn in range(_REFINEMENTS if hyper.size else 0):
        for z in _refined(nodes):
            nodes.append(_node(posterior, _at(_nearest(nodes, z), hyper, z), hyper, free))
        progress((len(plan) + 5 * turn + 5) / (len(plan) + 5 * _REFINEMENTS))
    nodes = [n for n in nodes if np.isfinite(n.log_evidence)]
    progress(1.0)
    return Fit(posterior, sorted(nodes, key=lambda n: -n.log_evidence), hyper, free, costs)


def first_fit(posterior: Posterior, seed: int) -> Array:
    """The best least-squares point (dim,) at the middle of the hyper-parameters' priors, before anything else."""
    hyper = [posterior.layout.slices[n].start for n in HYPER if posterior.layout.scalar(n)]
    free = np.setdiff1d(np.arange(posterior.layout.dim), np.array(hyper, int))
    return _best_start(posterior, np.zeros(posterior.layout.dim), free, seed)[0]


def _sheared(posterior: Posterior, q: Array) -> tuple[Posterior, Array]:
    """The posterior with its moduli sheared at the point q, and q in the new coordinates."""
    layout, q = posterior.layout, q.copy()
    values = layout.unpack(q[None])
    blocks = list(layout.blocks)
    for k, b in enumerate(blocks):
        if isinstance(b, Modulus):
            new = b.sheared(values)
            q[layout.slices[b.name]] += (new.shear - b.shear) * values["stiffness_scatter"] * values[b.stiffness]
            blocks[k] = new
    return replace(posterior, layout=Layout(blocks, layout.constants), guesses={}), q


def _coarse(dims: int) -> list[Array]:
    """Corners, edges and (already there) centre of a square of three half-widths of the prior."""
    levels = (-1.5, 0.0, 1.5)
    grid = [np.array(z) for z in itertools.product(levels, repeat=dims)]
    return [z for z in grid if np.any(z != 0.0)]


def _refined(nodes: list[Node]) -> list[Array]:
    """The mean of the evidence so far, and points 1.2 of its standard deviations away along its principal axes."""
    centre, covariance = Surface(nodes).moments()
    size, axes = np.linalg.eigh(covariance)
    steps = 1.2 * np.sqrt(size)[:, None] * axes.T
    return [centre, *(centre + s * step for step in steps for s in (1.0, -1.0))]


def _nearest(nodes: list[Node], z: Array) -> Array:
    return min(nodes, key=lambda n: float(np.sum((n.hyper - z) ** 2)) if n.hyper.size else 0.0).q


def _at(q: Array, hyper: NDArray[np.intp], z: Array) -> Array:
    out = q.copy()
    out[hyper] = z
    return out


def _best_start(posterior: Posterior, origin: Array, free: NDArray[np.intp], seed: int) -> tuple[Array, Array]:
    """Least squares from the prior's middle and from draws of the law's parameters; the lowest cost wins."""
    layout, rng = posterior.layout, np.random.Generator(np.random.Philox(key=[seed, 1]))
    law = [layout.slices[p.name].start for p in posterior.law.parameters if p.name in layout.slices]
    starts = [origin]
    for _ in range(_STARTS - 1):
        other = origin.copy()
        other[law] = 0.7 * rng.standard_normal(len(law))
        starts.append(other)
    found = [_least_squares(posterior, q, free) for q in starts]
    order = sorted(range(len(found)), key=lambda k: found[k][1])
    for k in order:
        if np.isfinite(posterior.log_density(found[k][0])[0]):
            return found[k][0], np.array([c for _, c in found])
    return found[order[0]][0], np.array([c for _, c in found])


def _least_squares(posterior: Posterior, q: Array, free: NDArray[np.intp]) -> tuple[Array, float]:
    """Minimise half the squared residuals plus the proper priors' own, over the coordinates that any of them see."""
    layout = posterior.layout
    proper = np.array([i for i in free if _is_proper(posterior, i)], int)
    seen = np.array([i for i in free if i in set(proper) or not _strength_only(posterior, i)], int)
    if seen.size == 0:
        return q, 0.0
    unit = np.eye(layout.dim)[proper][:, seen]

    def whole(part: Array) -> Array:
        out = q.copy()
        out[seen] = part
        return out

    def residuals(part: Array) -> Array:
        at = whole(part)
        return np.concatenate((posterior.residuals(at), at[proper]))

    def jacobian(part: Array) -> Array:
        return np.concatenate((posterior.jacobian(whole(part))[:, seen], unit))

    best = least_squares(residuals, q[seen], jacobian, method="trf", ftol=1e-8, xtol=1e-8, gtol=1e-6, max_nfev=60)
    return whole(best.x), float(best.cost)


def _is_proper(posterior: Posterior, index: int) -> bool:
    for b in posterior.layout.blocks:
        cut = posterior.layout.slices[b.name]
        if cut.start <= index < cut.stop:
            return b.prior.proper if isinstance(b, Scalar) else hasattr(b, "basis")
    raise IndexError(index)


def _strength_only(posterior: Posterior, index: int) -> bool:
    """Flat unknowns that no Gaussian reading sees: the strength's, and an inferred noise level's."""
    for b in posterior.layout.blocks:
        cut = posterior.layout.slices[b.name]
        if cut.start <= index < cut.stop:
            return isinstance(b, Scalar) and b.name not in {p.name for p in posterior.law.parameters}
    raise IndexError(index)


def _node(posterior: Posterior, q: Array, hyper: NDArray[np.intp], free: NDArray[np.intp]) -> Node:
    q, _ = _least_squares(posterior, q, free)
    posterior.set_guess(q)
    q, value, hessian = _newton(posterior, q, free)
    if not np.isfinite(value):
        return Node(q[hyper], q, np.eye(free.size), -np.inf, -np.inf)
    factor = linalg.cho_factor(hessian)
    log_det = 2.0 * np.sum(np.log(np.diag(factor[0])))
    evidence = value + 0.5 * free.size * np.log(2.0 * np.pi) - 0.5 * log_det
    return Node(q[hyper], q, hessian, value, evidence)


def _newton(posterior: Posterior, q: Array, free: NDArray[np.intp]) -> tuple[Array, float, Array]:
    """Newton steps on the log-density over the free coordinates; returns point, value and minus the Hessian there."""
    value, gradient = posterior.value_and_gradient(q)
    hessian = minus_hessian(posterior, q, free)
    for k in range(_NEWTON):
        step = linalg.solve(hessian, gradient[0, free], assume_a="pos")
        decrement = float(gradient[0, free] @ step)
        if not np.isfinite(value[0]) or decrement < 1e-6:
            break
        q, value, gradient, moved = _line_search(posterior, q, value, gradient, free, step)
        if not moved:
            break
        if k % 3 == 2 or decrement > 1.0:
            hessian = minus_hessian(posterior, q, free)
    return q, float(value[0]), minus_hessian(posterior, q, free)


def _line_search(
    posterior: Posterior, q: Array, value: Array, gradient: Array, free: NDArray[np.intp], step: Array
) -> tuple[Array, Array, Array, bool]:
    """The longest of four step lengths that raises the log-density, all tried in one batch."""
    sizes = np.array([1.0, 0.5, 0.2, 0.05])
    trial = np.repeat(q[None], sizes.size, axis=0)
    trial[:, free] += sizes[:, None] * step
    values, gradients = posterior.value_and_gradient(trial)
    better = np.flatnonzero(values > value[0])
    if better.size == 0:
        return q, value, gradient, False
    k = better[0]
    return trial[k], values[k : k + 1], gradients[k : k + 1], True


def minus_hessian(posterior: Posterior, q: Array, free: NDArray[np.intp]) -> Array:
    """Minus the Hessian over the free coordinates, by central differences of the adjoint gradient at a fiftieth of each
    coordinate's conditional standard deviation; made positive definite by raising small eigenvalues."""
    d = free.size
    trial = np.repeat(q[None], 2 * d, axis=0)
    rows = np.arange(d)
    h = _DIFFERENCE / np.sqrt(1.0 + np.sum(posterior.jacobian(q)[:, free] ** 2, axis=0))
    trial[rows, free] += h
    trial[d + rows, free] -= h
    gradient = np.concatenate([posterior.value_and_gradient(part)[1] for part in np.array_split(trial, max(1, d // 8))])
    second = -(gradient[:d, free] - gradient[d:, free]) / (2.0 * h[:, None])
    values, vectors = np.linalg.eigh(0.5 * (second + second.T))
    return np.asarray((vectors * np.maximum(values, 1e-3)) @ vectors.T)

"""Coordinates in which the posterior is nearly standard normal, whatever spread and correlation length are.

At the best fit the log-density has the curvature H = P + A, P the prior's and A the data's part. Other values of the
hyper-parameters h rescale what the data see of a field coefficient by its prior standard deviation, E_k(h) =
w_k(h)/w_k(fit), so that given h the free coordinates are nearly normal with

    precision Q(h) = P + E A E,      mean m(h) = Q⁻¹ E (A q − Jᵀ r)(fit).

The sampler moves in (h, u), q = m(h) + R(h) u with R Rᵀ = Q⁻¹: the non-centred form where the data say nothing of a
direction, the centred one where they say all, and the right one for every mixture of coefficients in between.

With A = B Bᵀ, G = P^(−1/2) E B and S = I + GᵀG = C Cᵀ, a square root costs one small Cholesky factor a lane:

    R = P^(−1/2) (I − G C⁻ᵀ (C + I)⁻¹ Gᵀ),      log|R| = −½ log|P| − log|C|.

Andrews, AIAA J. 6 (1968) 1165, eq. 10; for the idea see Papaspiliopoulos, Roberts & Sköld, Stat. Sci. 22 (2007) 59.
"""

from __future__ import annotations

import itertools
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Field, Layout, Scalar

Array = NDArray[np.float64]
Density = Callable[[Array], tuple[Array, Array]]

_FLAT_PRECISION = 1e-4
"""Stands in for the precision of a flat prior: a hundredth of what any reading says of such a coordinate."""
_FAR = 6.0
"""Prior standard deviations beyond which a hyper-parameter is not followed: one in a billion."""
_STEEP = 300.0
_HEARD = 1e-3
"""Directions of which the data say less, in units of the prior's information, are left to the prior."""


@dataclass(frozen=True)
class _Map:
    """What a batch of hyper-parameters makes of the map; leading axis lanes, r data directions."""

    g: Array
    c: Array
    half: Array
    x: Array
    s: Array
    rates: Array


class Whitening:
    """The map between q (lanes, dim) and y (lanes, dim); the hyper-parameters' places in both are the same."""

    def __init__(
        self,
        layout: Layout,
        hyper: NDArray[np.intp],
        free: NDArray[np.intp],
        q: Array,
        jacobian: Array,
        residual: Array,
    ) -> None:
        """`q` (dim,): best fit; `hyper`, `free`: indices; `jacobian` (rows, free) of the whitened `residual` (rows,)
        there, so that JᵀJ is A."""
        self.layout, self.hyper, self.free, self.q_fit = layout, hyper, free, q
        self.prior = np.where(proper_coordinates(layout)[free], 1.0, _FLAT_PRECISION)
        self._fields = [(b, layout.slices[b.name]) for b in layout.blocks if isinstance(b, Field)]
        left, size, _ = np.linalg.svd(self._at_corners(jacobian), full_matrices=False)
        # Everything is a product with J, whose rows of coefficients of tiny weight at the fit keep their relative
        # accuracy; it counts at other hyper-parameters, where the weight is not tiny.
        self.root = jacobian.T @ left[:, size**2 > _HEARD]
        # At the best fit P q = −Jᵀ r: this is H q there.
        self.pull = self.root @ (self.root.T @ q[free]) - jacobian.T @ residual

    def _at_corners(self, jacobian: Array) -> Array:
        """The Jacobian beside what it becomes where the field is rough, and the data say more than at the fit."""
        if not self.hyper.size:
            return jacobian
        corners = np.array(list(itertools.product((-1.5, 2.0), repeat=self.hyper.size)))
        y = np.repeat(self.q_fit[None], corners.shape[0], axis=0)
        y[:, self.hyper] = corners
        return np.hstack([jacobian, *(jacobian * e for e in np.exp(self._scales(y)[0]))])

    def to_q(self, y: Array) -> Array:
        """q of y."""
        at = self._at(y)
        out = y.copy()
        out[:, self.free] = self._mean(at) + self._root(at, y[:, self.free])[0]
        return out

    def density(self, of_q: Density) -> Density:
        """The log-density and gradient by y of a distribution that `of_q` gives by q; −inf and zero stay so."""

        def of_y(y: Array) -> tuple[Array, Array]:
            near = np.all(np.abs(y[:, self.hyper]) < _FAR, axis=1)
            y = np.where(near[:, None], y, 0.0)
            at, u = self._at(y), y[:, self.free]
            moved, p, v = self._root(at, u)
            q = y.copy()
            q[:, self.free] = self._mean(at) + moved
            value, gradient = of_q(q)
            by_y = self._pull_back(at, u, p, v, gradient)
            good = near & np.isfinite(value) & np.all(np.isfinite(by_y), axis=1)
            value = np.where(good, value + self._log_determinant(at), -np.inf)
            return value, np.where(good[:, None], by_y, 0.0)

        return of_y

    def _pull_back(self, at: _Map, u: Array, p: Array, v: Array, gradient: Array) -> Array:
        """Gradient by y of a function plus log|dq/dy|, `gradient` (lanes, dim) being the function's by q."""
        g = gradient[:, self.free]
        out = gradient.copy()
        scaled = g * at.half
        back = self._back(at, _times(at.g.swapaxes(1, 2), scaled))
        out[:, self.free] = scaled - _times(at.g, back)
        inverse = np.asarray(np.linalg.inv(at.c), float)
        for j, index in enumerate(self.hyper):
            rate = at.rates[:, :, j]
            moved, log_det = self._by_hyper(at, rate, u, p, v, inverse)
            out[:, index] += np.einsum("wf,wf->w", g, moved) + log_det
        return out

    def _at(self, y: Array) -> _Map:
        log_e, rates = self._scales(y)
        half = 1.0 / np.sqrt(self.prior)
        e = np.exp(log_e)
        g = (half * e)[:, :, None] * self.root
        c = np.linalg.cholesky(np.eye(self.root.shape[1]) + g.swapaxes(1, 2) @ g)
        x = half * e * self.pull
        s = _solve(c.swapaxes(1, 2), _solve(c, _times(g.swapaxes(1, 2), x)))
        return _Map(g, c, np.broadcast_to(half, log_e.shape), x, s, rates)

    def _scales(self, y: Array) -> tuple[Array, Array]:
        """log E (lanes, free) and its derivatives by each hyper-coordinate (lanes, free, hyper)."""
        lanes = y.shape[0]
        log_e, rates = np.zeros((lanes, self.layout.dim)), np.zeros((lanes, self.layout.dim, self.hyper.size))
        if self.hyper.size:
            values, fit = self._hyper_values(y), self._hyper_values(self.q_fit[None])
            for b, cut in self._fields:
                ell = values["correlation_length"]
                new = b.basis.log_weight(values["spread"], ell)
                log_e[:, cut] = (new - b.basis.log_weight(fit["spread"], fit["correlation_length"])).T
                for j, index in enumerate(self.hyper):
                    rates[:, cut, j] = self._rate(b, index, y, values, ell)
        return np.clip(log_e[:, self.free], -_STEEP, _STEEP), rates[:, self.free]

    def _rate(self, b: Field, index: int, y: Array, values: dict[str, Array], ell: Array) -> Array:
        """d log w / d hyper-coordinate (lanes, m)."""
        name = self.layout.names()[index]
        block = self.layout.scalar(name)
        assert block is not None
        slope = (block.prior.slope(y[:, index]) / values[name])[:, None]
        return slope if name == "spread" else slope * b.basis.log_weight_by_log_ell(ell).T

    def _hyper_values(self, y: Array) -> dict[str, Array]:
        out = {}
        for name in ("spread", "correlation_length"):
            block = self.layout.scalar(name)
            if block is None:
                out[name] = np.full(y.shape[0], self.layout.constants[name])
            else:
                out[name] = block.prior.value(y[:, self.layout.slices[name].start])
        return out

    def _mean(self, at: _Map) -> Array:
        return at.half * (at.x - _times(at.g, at.s))

    def _root(self, at: _Map, u: Array) -> tuple[Array, Array, Array]:
        """R u, and on the way (C + I)⁻¹Gᵀu and C⁻ᵀ of that."""
        a = _times(at.g.swapaxes(1, 2), u)
        p = _solve(at.c + np.eye(at.c.shape[1]), a)
        v = _solve(at.c.swapaxes(1, 2), p)
        return at.half * (u - _times(at.g, v)), p, v

    def _back(self, at: _Map, b: Array) -> Array:
        """(C + I)⁻ᵀ C⁻¹ b, the transpose of what `_root` applies between Gᵀ and G."""
        shifted = (at.c + np.eye(at.c.shape[1])).swapaxes(1, 2)
        return _solve(shifted, _solve(at.c, b))

    def _log_determinant(self, at: _Map) -> Array:
        return -0.5 * np.sum(np.log(self.prior)) - np.log(np.diagonal(at.c, axis1=1, axis2=2)).sum(axis=1)

    def _by_hyper(self, at: _Map, rate: Array, u: Array, p: Array, v: Array, inverse: Array) -> tuple[Array, Array]:
        """dq/dh at fixed u (lanes, free), and d log|R|/dh (lanes,), for one hyper-coordinate; `rate`: d log E/dh."""
        dg = rate[:, :, None] * at.g
        half = at.g.swapaxes(1, 2) @ dg
        ds = half + half.swapaxes(1, 2)
        # Differential of a Cholesky factor: dC = C tril(C⁻¹ dS C⁻ᵀ), the diagonal halved.
        inner = np.tril(inverse @ ds @ inverse.swapaxes(1, 2))
        diagonal = np.arange(inner.shape[1])
        inner[:, diagonal, diagonal] *= 0.5
        dc = at.c @ inner
        dp = _solve(at.c + np.eye(at.c.shape[1]), _times(dg.swapaxes(1, 2), u) - _times(dc, p))
        dv = _solve(at.c.swapaxes(1, 2), dp - _times(dc.swapaxes(1, 2), v))
        moved = -_times(dg, v) - _times(at.g, dv)
        dx = rate * at.x
        right = _times(dg.swapaxes(1, 2), at.x) + _times(at.g.swapaxes(1, 2), dx)
        right = right - _times(ds, at.s)
        d_s = _solve(at.c.swapaxes(1, 2), _solve(at.c, right))
        moved = moved + dx - _times(dg, at.s) - _times(at.g, d_s)
        return at.half * moved, -np.einsum("wii->w", inner)


def _times(matrix: Array, vector: Array) -> Array:
    """Products of one matrix and one vector a lane."""
    return (matrix @ vector[..., None])[..., 0]


def _solve(matrix: Array, right: Array) -> Array:
    """Solutions of one small system a lane, `right` (lanes, r)."""
    return np.asarray(np.linalg.solve(matrix, right[..., None])[..., 0], float)


def proper_coordinates(layout: Layout) -> NDArray[np.bool_]:
    """Whether each coordinate has a standard normal prior."""
    out = np.zeros(layout.dim, bool)
    for b in layout.blocks:
        out[layout.slices[b.name]] = b.prior.proper if isinstance(b, Scalar) else isinstance(b, Field)
    return out

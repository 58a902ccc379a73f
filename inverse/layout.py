"""The unknowns of a study: one layout for fit, sampling and results.

A point is a vector q of unconstrained coordinates; a batch of points is (lanes, dim). Blocks turn their slice of q
into named values, lanes last, and carry gradients and directions back and forth.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.area_field import Basis
from pullback.inverse.priors import Prior, log_prior

Array = NDArray[np.float64]
Values = dict[str, Array]


class Block(Protocol):
    """A run of coordinates with one name."""

    @property
    def name(self) -> str:
        """Name of the value."""

    @property
    def unit(self) -> str:
        """Unit of the value."""

    @property
    def size(self) -> int:
        """Number of coordinates."""

    def unpack(self, q: Array, values: Values) -> Array:
        """Value for q (size, lanes); blocks before this one are in `values` already."""

    def log_prior(self, q: Array, values: Values) -> Array:
        """Log prior density of q (lanes,)."""

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """d(log prior + f)/dq (size, lanes), f's derivatives by value being in `grads`; adds to those of earlier
        blocks."""


@dataclass(frozen=True)
class Scalar:
    """One unknown with a prior; value (lanes,)."""

    name: str
    unit: str
    prior: Prior
    size: int = 1

    def unpack(self, q: Array, values: Values) -> Array:
        """The prior's map of its coordinate."""
        return self.prior.value(q[0])

    def log_prior(self, q: Array, values: Values) -> Array:
        """See `priors.log_prior`."""
        return log_prior(self.prior, q[0])

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """Chain through the prior's map."""
        g = grads[self.name] * self.prior.slope(q[0])
        return (g - q[0] if self.prior.proper else g)[None]


@dataclass(frozen=True)
class Modulus(Scalar):
    """A modulus of the lot's law, its coordinate sheared along the pulled piece's own log stiffness kappa = s zeta.

    A pull fixes modulus times exp(kappa) far better than either factor; in z itself that is a thin, curved valley in
    (z, s, zeta). With z = q − shear kappa (a map of unit determinant) it lies along the axes. `shear` is
    dz/dlog(modulus) at the fit; `stiffness` names zeta.
    """

    shear: float = 0.0
    stiffness: str = ""

    def _z(self, q: Array, values: Values) -> Array:
        return q[0] - self.shear * values["stiffness_scatter"] * values[self.stiffness]

    def unpack(self, q: Array, values: Values) -> Array:
        """The prior's map of z."""
        return self.prior.value(self._z(q, values))

    def log_prior(self, q: Array, values: Values) -> Array:
        """See `priors.log_prior`."""
        return log_prior(self.prior, self._z(q, values))

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """Chain through the map and the shear."""
        z = self._z(q, values)
        g = grads[self.name] * self.prior.slope(z) - (z if self.prior.proper else 0.0)
        s, zeta = values["stiffness_scatter"], values[self.stiffness]
        grads["stiffness_scatter"] = grads["stiffness_scatter"] - self.shear * zeta * g
        grads[self.stiffness] = grads[self.stiffness] - self.shear * s * g
        return g[None]

    def push(self, q: Array, values: Values, cut: slice, pushed: Values) -> Array:
        """d value / d q, the values of the stiffness pushed already."""
        s, zeta = values["stiffness_scatter"], values[self.stiffness]
        row = -self.shear * (s * pushed[self.stiffness] + zeta * pushed["stiffness_scatter"])
        row[cut] += 1.0
        return self.prior.slope(self._z(q, values)) * row

    def sheared(self, values: Values) -> Modulus:
        """The same unknown with its shear taken at `values` (one lane)."""
        value = values[self.name]
        z = self.prior.coordinate(value)
        return replace(self, shear=float((value / self.prior.slope(z))[0]))


@dataclass(frozen=True)
class Drive:
    """The true travel or end force of each step, flat about its reading; value (steps, lanes)."""

    name: str
    unit: str
    start: Array
    scale: Array

    @property
    def size(self) -> int:
        """Number of steps."""
        return self.start.size

    def unpack(self, q: Array, values: Values) -> Array:
        """start + scale q."""
        return self.start[:, None] + self.scale[:, None] * q

    def log_prior(self, q: Array, values: Values) -> Array:
        """Flat: zero."""
        return np.zeros(q.shape[1])

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """Scaled gradient."""
        return grads[self.name] * self.scale[:, None]


@dataclass(frozen=True)
class Field:
    """Coefficients of one part's section field, not centred; value beta (m, lanes).

    beta_k = w_k(spread, ell) q_k with q_k standard normal. The sampler moves in other coordinates: see `whitening`.
    """

    name: str
    unit: str
    basis: Basis

    @property
    def size(self) -> int:
        """Number of coefficients."""
        return self.basis.omega.size

    def weight(self, values: Values) -> Array:
        """w_k (m, lanes)."""
        return np.exp(self.basis.log_weight(values["spread"], values["correlation_length"]))

    def unpack(self, q: Array, values: Values) -> Array:
        """beta_k."""
        return self.weight(values) * q

    def log_prior(self, q: Array, values: Values) -> Array:
        """Standard normal."""
        return -0.5 * np.sum(q * q, axis=0)

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """Chain to the coordinates, and through w to spread and correlation length."""
        g = grads[self.name] * self.weight(values)
        along, ell = g * q, values["correlation_length"]
        grads["spread"] = grads["spread"] + along.sum(axis=0) / values["spread"]
        by_ell = (along * self.basis.log_weight_by_log_ell(ell)).sum(axis=0)
        grads["correlation_length"] = grads["correlation_length"] + by_ell / ell
        return g - q

    def push(self, q: Array, values: Values, cut: slice, pushed: Values) -> Array:
        """d beta / d q (m, dim), the hyper-parameters pushed already."""
        w, ell = self.weight(values), values["correlation_length"]
        jac = w * q * pushed["spread"] / values["spread"]
        jac = jac + w * q * self.basis.log_weight_by_log_ell(ell) * pushed["correlation_length"] / ell
        jac[:, cut] += np.diag(w[:, 0])
        return np.asarray(jac)


@dataclass(frozen=True)
class Layout:
    """All blocks in order, and constants that take the place of unknowns that the study states exactly."""

    blocks: Sequence[Block]
    constants: dict[str, float] = field(default_factory=dict)

    @cached_property
    def dim(self) -> int:
        """Number of coordinates."""
        return sum(b.size for b in self.blocks)

    @cached_property
    def slices(self) -> dict[str, slice]:
        """Slice of q of each block."""
        out, at = {}, 0
        for b in self.blocks:
            out[b.name] = slice(at, at + b.size)
            at += b.size
        return out

    def names(self) -> list[str]:
        """A name for each coordinate."""
        return [b.name if b.size == 1 else f"{b.name}[{k + 1}]" for b in self.blocks for k in range(b.size)]

    def block(self, name: str) -> Block:
        """The block of that name; KeyError where there is none."""
        for b in self.blocks:
            if b.name == name:
                return b
        raise KeyError(name)

    def scalar(self, name: str) -> Scalar | None:
        """The scalar unknown of that name, or None where it is a constant or absent."""
        return next((b for b in self.blocks if b.name == name and isinstance(b, Scalar)), None)

    def unpack(self, q: Array) -> Values:
        """Named values for q (lanes, dim)."""
        values: Values = {k: np.full(q.shape[0], v) for k, v in self.constants.items()}
        for b, part in self._parts(q):
            values[b.name] = b.unpack(part, values)
        return values

    def log_prior(self, q: Array, values: Values) -> Array:
        """Log prior density (lanes,)."""
        return sum((b.log_prior(part, values) for b, part in self._parts(q)), np.zeros(q.shape[0]))

    def zeros(self, values: Values) -> Values:
        """Gradients by value, all zero."""
        return {k: np.zeros_like(v) for k, v in values.items()}

    def pull_back(self, q: Array, values: Values, grads: Values) -> Array:
        """Gradient by q (lanes, dim) of the log prior plus a function whose gradients by value are `grads`."""
        rows = [b.pull_back(part, values, grads) for b, part in reversed(self._parts(q))]
        return np.concatenate(rows[::-1]).T

    def push(self, q: Array, values: Values) -> Values:
        """d value / d q at a single point q (1, dim): (dim,) for scalars, (size, dim) for the rest."""
        out: Values = {k: np.zeros(self.dim) for k in self.constants}
        for b, part in self._parts(q):
            cut = self.slices[b.name]
            if isinstance(b, Modulus):
                out[b.name] = b.push(part, values, cut, out)
            elif isinstance(b, Scalar):
                out[b.name] = np.zeros(self.dim)
                out[b.name][cut] = b.prior.slope(part[0])
            elif isinstance(b, Drive):
                out[b.name] = np.zeros((b.size, self.dim))
                out[b.name][:, cut] = np.diag(b.scale)
            elif isinstance(b, Field):
                out[b.name] = b.push(part, values, cut, out)
        return out

    def _parts(self, q: Array) -> list[tuple[Block, Array]]:
        cuts = self.slices
        return [(b, np.ascontiguousarray(q[:, cuts[b.name]].T)) for b in self.blocks]

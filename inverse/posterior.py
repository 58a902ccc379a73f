"""The posterior density of a study: the sum of its terms, nothing else."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pullback.forward.laws.base import Law
from pullback.inverse.layout import Field, Layout, Values
from pullback.inverse.piece import Cotangent, Piece, Prediction
from pullback.inverse.readings.base import GaussianTerm, Term
from pullback.inverse.readings.marks import Marks

Array = NDArray[np.float64]

HYPER = ("spread", "correlation_length")
"""What the field's coefficients hang on."""
_LEAST_WEIGHT = 1e-30


@dataclass(frozen=True)
class Guess:
    """First-order prediction of a piece's positions about a reference point: a start for Newton's method that does not
    depend on what was solved before, so that draws do not depend on their history.

    Counted in `features` (dim,), the coordinates with the field's beta in place of its own: positions are nearly linear
    in these, and do not depend on the hyper-parameters beside them.
    """

    features: Array
    position: Array
    by_feature: Array

    def at(self, features: Array) -> Array:
        """Positions (n+1, steps, lanes) for features (lanes, dim)."""
        return self.position[..., None] + self.by_feature @ (features - self.features).T


@dataclass
class Failures:
    """Counts of points whose density could not be had, and the first of them."""

    unsolved: int = 0
    unstable: int = 0
    first: Array | None = None


@dataclass
class Posterior:
    """Log-density and gradient of a batch of points.

    `stable_stretch` (grid,): dP/dstretch must be positive at each, else the density is nil: every prior is cut to laws
    that are stable over what was read.
    """

    layout: Layout
    law: Law
    pieces: Sequence[Piece]
    terms: Sequence[Term]
    stable_stretch: Array = field(default_factory=lambda: np.ones(1))
    guesses: dict[str, Guess] = field(default_factory=dict)
    failures: Failures = field(default_factory=Failures)

    def predict(self, q: Array) -> tuple[Values, dict[str, Prediction]]:
        """Named values and each piece's state for q (lanes, dim)."""
        values = self.layout.unpack(q)
        out = {}
        for piece in self.pieces:
            guess = self.guesses.get(piece.name)
            out[piece.name] = piece.predict(values, None if guess is None else guess.at(self.features(q, values)))
        return values, out

    def log_density(self, q: Array) -> Array:
        """Log posterior density (lanes,), up to a constant; −inf where it cannot be had."""
        return self.value_and_gradient(q)[0]

    def value_and_gradient(self, q: Array) -> tuple[Array, Array]:
        """Log-density (lanes,) and its gradient (lanes, dim); −inf and zero where it cannot be had."""
        q = np.atleast_2d(q)
        with np.errstate(over="ignore", invalid="ignore", divide="ignore", under="ignore"):
            values, predictions = self.predict(q)
            value, grads = self.layout.log_prior(q, values), self.layout.zeros(values)
            cots = {name: Cotangent.zero(p, grads) for name, p in predictions.items()}
            loose = Cotangent(*(np.zeros(0),) * 4, grads)
            for term in self.terms:
                prediction = predictions.get(term.piece) if term.piece else None
                value = value + term.log_density(values, prediction, cots[term.piece] if term.piece else loose)
            for piece in self.pieces:
                piece.pull_back(predictions[piece.name], cots[piece.name])
            gradient = self.layout.pull_back(q, values, grads)
        bad = self._bad(q, values, predictions, value, gradient)
        return np.where(bad, -np.inf, value), np.where(bad[:, None], 0.0, gradient)

    def residuals(self, q: Array) -> Array:
        """Whitened residuals of the Gaussian terms at one point q (dim,)."""
        with np.errstate(over="ignore", invalid="ignore", divide="ignore"):
            values, predictions = self.predict(q[None])
            parts = [t.whitened(values, _of(predictions, t)) for t in self.gaussian]
        r = np.concatenate((np.zeros(0), *parts))
        # Least squares needs a number everywhere; a point that cannot be solved is far from any optimum.
        return np.nan_to_num(r, nan=1e6, posinf=1e6, neginf=-1e6)

    def jacobian(self, q: Array) -> Array:
        """d(residuals)/dq (N, dim) at one point, by the tangent-linear solve."""
        with np.errstate(over="ignore", invalid="ignore", divide="ignore"):
            values, predictions = self.predict(q[None])
            pushed = self.layout.push(q[None], values)
            tangents = {p.name: p.push(predictions[p.name], pushed) for p in self.pieces}
            rows = [
                t.whitened_jacobian(values, _of(predictions, t), tangents[t.piece] if t.piece else pushed)
                for t in self.gaussian
            ]
        return np.nan_to_num(np.concatenate((np.zeros((0, self.layout.dim)), *rows)))

    @property
    def gaussian(self) -> list[GaussianTerm | Marks]:
        """Terms that least squares can hold."""
        return [t for t in self.terms if isinstance(t, GaussianTerm | Marks)]

    def set_guess(self, q: Array) -> None:
        """Take q (dim,) as the reference of the first-order starting positions."""
        values, predictions = self.predict(q[None])
        pushed = self.layout.push(q[None], values)
        features = self.features(q[None], values)[0]
        for p in self.pieces:
            change = p.push(predictions[p.name], pushed).state.position.copy()
            for b in self.layout.blocks:
                if isinstance(b, Field):
                    change[..., self.layout.slices[b.name]] /= np.maximum(b.weight(values)[:, 0], _LEAST_WEIGHT)
                elif b.name in HYPER:
                    change[..., self.layout.slices[b.name]] = 0.0
            self.guesses[p.name] = Guess(features, predictions[p.name].state.position[..., 0], change)

    def features(self, q: Array, values: Values) -> Array:
        """Coordinates with each field's beta in place of its own (lanes, dim)."""
        out = q.copy()
        for b in self.layout.blocks:
            if isinstance(b, Field):
                out[:, self.layout.slices[b.name]] = values[b.name].T
        return out

    def _bad(
        self, q: Array, values: Values, predictions: dict[str, Prediction], value: Array, gradient: Array
    ) -> NDArray[np.bool_]:
        unsolved = ~np.isfinite(value) | ~np.all(np.isfinite(gradient), axis=1)
        for p in predictions.values():
            unsolved |= ~p.state.converged
        theta = np.stack([values[p.name] for p in self.law.parameters])[:, None, :]
        slope = self.law.stress_and_slope(self.stable_stretch[:, None], theta)[1]
        unstable = ~np.all(slope > 0.0, axis=0)
        self.failures.unstable += int(unstable.sum())
        self.failures.unsolved += int((unsolved & ~unstable).sum())
        if self.failures.first is None and np.any(unsolved & ~unstable):
            self.failures.first = q[np.flatnonzero(unsolved & ~unstable)[0]].copy()
        return unsolved | unstable


def _of(predictions: dict[str, Prediction], term: GaussianTerm | Marks) -> Prediction | None:
    return predictions[term.piece] if term.piece else None

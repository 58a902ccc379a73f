"""Positions of marks: reading error of each, and the placement error of each mark, common to all its steps.

A mark drawn at X + d instead of X is seen at x(X + d) = x(X) + stretch(X) d. With d normal, of standard deviation
placement, the readings of one mark over the steps have the covariance diag(sigma²) + placement² l lᵀ, l the stretches
at the mark: a rank-one update, so that chi-square and determinant come in closed form (Sherman–Morrison).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent

Array = NDArray[np.float64]


@dataclass(frozen=True)
class _Seen:
    """Residuals r and stretches l of the marks, their weights w = 1/sigma², and the sums that the closed form needs."""

    r: Array
    stretch: Array
    det: Array
    shift: Array
    """Most probable placement error of each mark given the rest, (marks, lanes)."""


class Marks:
    """Mark positions of one piece: `station` (M,) mm, `position` (M, steps) mm with NaN where not read."""

    kind = "marks"

    def __init__(
        self, piece: str, nodes: Array, station: Array, position: Array, sigma: float, placement: float
    ) -> None:
        self.piece = piece
        self.station, self.position = np.asarray(station, float), np.asarray(position, float)
        self.read = np.isfinite(self.position)
        self.w = np.where(self.read, 1.0 / sigma**2, 0.0)[:, :, None]
        self.placement, self.sigma = placement, sigma
        self._y = np.where(self.read, self.position, 0.0)[:, :, None]
        self._interp, self._slope = _interpolation(nodes, self.station)
        self._log_norm = -self.count * (np.log(sigma) + 0.5 * np.log(2.0 * np.pi))

    @property
    def count(self) -> int:
        """Number of readings."""
        return int(self.read.sum())

    def expected(self, values: Values, prediction: Prediction) -> Array:
        """Expected positions (M, steps, lanes), marks at their nominal stations."""
        return self._expected(values, *self._at_marks(prediction))

    def stretch(self, prediction: Prediction) -> Array:
        """Stretch at each mark (M, steps, lanes)."""
        return self._at_marks(prediction)[1]

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """See `Term`."""
        assert prediction is not None
        x, stretch = self._at_marks(prediction)
        seen = self._see(values, x, stretch)
        left = seen.r - seen.stretch * seen.shift[:, None]
        g_e = self.w * left
        g_l = g_e * seen.shift[:, None] - self.placement**2 * self.w * seen.stretch / seen.det[:, None]
        scale, grip = values["position_scale"], values["grip_position"]
        g_x, g_l = g_e * (1.0 + scale), g_l * (1.0 + scale) + g_e * grip * (1.0 + scale)
        cot.position += np.tensordot(self._interp.T, g_x, 1) + np.tensordot(self._slope.T, g_l, 1)
        cot.values["position_scale"] = cot.values["position_scale"] + self._by_scale(
            seen, g_e, x + stretch * grip, stretch
        )
        cot.values["grip_position"] = cot.values["grip_position"] + np.einsum(
            "msw,msw->w", g_e, stretch * (1.0 + scale)
        )
        return self._log_norm - 0.5 * self._chi(seen) - 0.5 * np.log(seen.det).sum(axis=0)

    def chi_square(self, values: Values, prediction: Prediction | None) -> Array:
        """Residuals in the metric of their covariance."""
        assert prediction is not None
        return self._chi(self._see(values, *self._at_marks(prediction)))

    def simulate_chi_square(self, values: Values, prediction: Prediction | None, rng: np.random.Generator) -> Array:
        """Of readings drawn with placement and reading errors about the expected positions."""
        assert prediction is not None
        _, stretch = self._at_marks(prediction)
        shape = (*self.read.shape, stretch.shape[-1])
        placed = self.placement * rng.standard_normal((shape[0], 1, shape[2]))
        r = self.sigma * rng.standard_normal(shape) + stretch * placed
        return self._chi(self._reduce(np.where(self.read[:, :, None], r, 0.0), stretch))

    def whitened(self, values: Values, prediction: Prediction | None) -> Array:
        """Decorrelated residuals (N,), single lane."""
        assert prediction is not None
        seen = self._see(values, *self._at_marks(prediction))
        return self._decorrelate(seen, seen.r)[..., 0][self.read]

    def whitened_jacobian(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """Their derivatives with each mark's most probable shift held: exact in the gradient.

        (Variable projection after Kaufman, BIT 15 (1975) 49.)
        """
        assert prediction is not None and isinstance(tangent, Tangent)
        x, stretch = self._at_marks(prediction)
        seen, pushed = self._see(values, x, stretch), tangent.values
        dx = np.tensordot(self._interp, tangent.state.position, 1)
        dl = np.tensordot(self._slope, tangent.state.position, 1)
        scale, grip = values["position_scale"], values["grip_position"]
        de = (dx + dl * grip) * (1.0 + scale) + (x + stretch * grip) * pushed["position_scale"]
        de = de + stretch * (1.0 + scale) * pushed["grip_position"]
        moved = de + (dl * (1.0 + scale) + stretch * pushed["position_scale"]) * seen.shift[:, None]
        return -self._decorrelate(seen, moved)[self.read]

    def standardised(self, values: Values, prediction: Prediction) -> Array:
        """Each reading's own residual over its own standard uncertainty, placement included (M, steps, lanes)."""
        x, stretch = self._at_marks(prediction)
        r = self._y - self._expected(values, x, stretch)
        sd = np.sqrt(self.sigma**2 + (self.placement * stretch) ** 2)
        return np.where(self.read[:, :, None], r / sd, np.nan)

    def _at_marks(self, prediction: Prediction) -> tuple[Array, Array]:
        position = prediction.state.position
        return np.tensordot(self._interp, position, 1), np.tensordot(self._slope, position, 1)

    def _expected(self, values: Values, x: Array, stretch: Array) -> Array:
        return (x + stretch * values["grip_position"]) * (1.0 + values["position_scale"])

    def _see(self, values: Values, x: Array, stretch: Array) -> _Seen:
        r = np.where(self.read[:, :, None], self._y - self._expected(values, x, stretch), 0.0)
        return self._reduce(r, stretch * (1.0 + values["position_scale"]))

    def _reduce(self, r: Array, stretch: Array) -> _Seen:
        b = np.sum(self.w * stretch * r, axis=1)
        det = 1.0 + self.placement**2 * np.sum(self.w * stretch * stretch, axis=1)
        return _Seen(r, stretch, det, self.placement**2 * b / det)

    def _chi(self, seen: _Seen) -> Array:
        return np.einsum("msw,msw->w", self.w * seen.r, seen.r - seen.stretch * seen.shift[:, None])

    def _by_scale(self, seen: _Seen, g_e: Array, x: Array, stretch: Array) -> Array:
        """d log-density / d position_scale: through the expected position and the seen stretch."""
        by_l = g_e * seen.shift[:, None] - self.placement**2 * self.w * seen.stretch / seen.det[:, None]
        return np.einsum("msw,msw->w", g_e, x) + np.einsum("msw,msw->w", by_l, stretch)

    def _decorrelate(self, seen: _Seen, r: Array) -> Array:
        """Covariance^(−1/2) r along the steps, r (M, steps, k): shrink the part along the whitened stretches."""
        root = np.sqrt(self.w)
        u, white = root * seen.stretch, root * r
        norm = np.sum(u * u, axis=1, keepdims=True)
        shrink = (1.0 - 1.0 / np.sqrt(1.0 + self.placement**2 * norm)) / np.maximum(norm, 1e-300)
        return white - shrink * u * np.sum(u * white, axis=1, keepdims=True)


def _interpolation(nodes: Array, station: Array) -> tuple[Array, Array]:
    """Matrices (M, n+1) from nodal positions to position and stretch at each station."""
    e = np.clip(np.searchsorted(nodes, station, side="right") - 1, 0, nodes.size - 2)
    h = nodes[e + 1] - nodes[e]
    w = (station - nodes[e]) / h
    interp, slope = np.zeros((station.size, nodes.size)), np.zeros((station.size, nodes.size))
    rows = np.arange(station.size)
    interp[rows, e], interp[rows, e + 1] = 1.0 - w, w
    slope[rows, e], slope[rows, e + 1] = -1.0 / h, 1.0 / h
    return interp, slope

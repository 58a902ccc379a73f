"""The contract of a likelihood term: one kind of reading.

One object serves fit (whitened residuals and their Jacobian), sampling (log-density and gradient) and prediction
(expected values and simulated readings). Shapes: N readings, lanes last.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent

Array = NDArray[np.float64]


class Term(Protocol):
    """One kind of reading, of one piece or, where `piece` is None, of the compound."""

    @property
    def kind(self) -> str:
        """Kind of reading."""

    @property
    def piece(self) -> str | None:
        """Name of the piece, or None."""

    @property
    def count(self) -> int:
        """Number of readings."""

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """Log-density of the readings (lanes,); its derivatives are added to `cot`."""

    def chi_square(self, values: Values, prediction: Prediction | None) -> Array:
        """Discrepancy of the readings (lanes,), chi-square with `count` degrees of freedom if all is right."""

    def simulate_chi_square(
        self, values: Values, prediction: Prediction | None, rng: np.random.Generator
    ) -> Array:
        """The same of readings simulated at each lane."""


class GaussianTerm:
    """Independent readings with known standard uncertainties `sigma` (N,) about an expected value."""

    kind: str
    piece: str | None = None

    def __init__(self, readings: Array, sigma: Array) -> None:
        self.readings = np.asarray(readings, float)
        self.sigma = np.asarray(sigma, float)
        self._log_norm = -float(np.sum(np.log(self.sigma))) - 0.5 * self.readings.size * np.log(2.0 * np.pi)

    @property
    def count(self) -> int:
        """Number of readings."""
        return self.readings.size

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """Expected readings (N, lanes)."""
        raise NotImplementedError

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """Add the pull-back of g (N, lanes), the derivatives by expected reading, to `cot`."""
        raise NotImplementedError

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """Change of the expected readings (N, p) along each coordinate, single lane."""
        raise NotImplementedError

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """See `Term`."""
        r = self._residual(values, prediction)
        self.pull(values, prediction, r / self.sigma[:, None], cot)
        return self._log_norm - 0.5 * np.einsum("nw,nw->w", r, r)

    def chi_square(self, values: Values, prediction: Prediction | None) -> Array:
        """Sum of squared standardised residuals."""
        r = self._residual(values, prediction)
        return np.einsum("nw,nw->w", r, r)

    def simulate_chi_square(self, values: Values, prediction: Prediction | None, rng: np.random.Generator) -> Array:
        """Of readings drawn about the expected values."""
        lanes = next(iter(values.values())).shape[-1]
        z = rng.standard_normal((self.count, lanes))
        return np.einsum("nw,nw->w", z, z)

    def whitened(self, values: Values, prediction: Prediction | None) -> Array:
        """Standardised residuals (N,) at a single lane; their squares sum to chi-square."""
        return self._residual(values, prediction)[:, 0]

    def whitened_jacobian(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """d(standardised residuals)/dq (N, p)."""
        return -self.push(values, prediction, tangent) / self.sigma[:, None]

    def _residual(self, values: Values, prediction: Prediction | None) -> Array:
        return (self.readings[:, None] - self.expected(values, prediction)) / self.sigma[:, None]


def pushed_values(tangent: Tangent | Values) -> Values:
    """The pushed values, whether or not they come with a piece."""
    return tangent.values if isinstance(tangent, Tangent) else tangent

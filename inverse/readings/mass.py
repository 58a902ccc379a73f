"""Mass of the piece's free length: the integral of density times section, the density itself uncertain."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent
from pullback.inverse.readings.base import GaussianTerm

Array = NDArray[np.float64]


class Mass(GaussianTerm):
    """One weighing, g."""

    kind = "mass"

    def __init__(self, piece: str, mass: float, sigma: float) -> None:
        super().__init__(np.array([mass]), np.array([sigma]))
        self.piece = piece

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """Density times volume."""
        assert prediction is not None
        return _masses(prediction).sum(axis=0)[None]

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        assert prediction is not None
        each = g * _masses(prediction)
        cot.log_area += each
        total = each.sum(axis=0) / (1.0 + values["density_error"])
        cot.values["density_error"] = cot.values["density_error"] + total

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        assert prediction is not None and isinstance(tangent, Tangent)
        each = _masses(prediction)
        by_density = each.sum() * tangent.values["density_error"] / (1.0 + values["density_error"])
        return ((each * tangent.log_area).sum(axis=0) + by_density)[None]


def _masses(prediction: Prediction) -> Array:
    """Mass of each element (n, lanes), g."""
    bar = prediction.state.bar
    return bar.density * (bar.h * bar.area)[:, 0]

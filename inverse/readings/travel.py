"""Travel of the pulled end: reading error of each, and a zero of the pull (slack, preload) common to all steps."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent
from pullback.inverse.readings.base import GaussianTerm

Array = NDArray[np.float64]


class TravelReadings(GaussianTerm):
    """Travel read in some `steps` (indices), mm."""

    kind = "travel"

    def __init__(self, piece: str, steps: NDArray[np.intp], readings: Array, sigma: Array) -> None:
        super().__init__(readings, sigma)
        self.piece, self.steps = piece, steps

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """True travel plus zero."""
        assert prediction is not None
        return prediction.state.position[-1, self.steps] - prediction.piece.nodes[-1] + values["travel_zero"]

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        np.add.at(cot.position[-1], self.steps, g)
        cot.values["travel_zero"] = cot.values["travel_zero"] + g.sum(axis=0)

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        assert isinstance(tangent, Tangent)
        return tangent.state.position[-1, self.steps] + tangent.values["travel_zero"]

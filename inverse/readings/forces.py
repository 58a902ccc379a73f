"""Load cell readings: reading error of each, a scale error of the cell and a zero of the pull common to all steps."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.forward.loads import FORCE_UNIT, STANDARD_GRAVITY
from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent
from pullback.inverse.readings.base import GaussianTerm

Array = NDArray[np.float64]


class Forces(GaussianTerm):
    """Forces read in some `steps` (indices) at the pulled or the held end.

    `tare`: 1 where the cell was zeroed with the piece hanging on it, so that it reads less by the piece's weight.
    """

    kind = "force"

    def __init__(
        self, piece: str, steps: NDArray[np.intp], readings: Array, sigma: Array, at_held_end: bool, tare: float
    ) -> None:
        super().__init__(readings, sigma)
        self.piece, self.steps, self.at_held_end, self.tare = piece, steps, at_held_end, tare

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """(1 + scale)(force at the cell − tare weight) + zero."""
        assert prediction is not None
        return (1.0 + values["force_scale"]) * self._felt(prediction) + values["force_zero"]

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        assert prediction is not None
        gain = 1.0 + values["force_scale"]
        force = cot.held_force if self.at_held_end else cot.end_force
        np.add.at(force, self.steps, gain * g)
        cot.values["force_scale"] = cot.values["force_scale"] + np.einsum("nw,nw->w", g, self._felt(prediction))
        cot.values["force_zero"] = cot.values["force_zero"] + g.sum(axis=0)
        if self.tare:
            weight = self._weights(prediction)
            back = -self.tare * gain * g.sum(axis=0)
            cot.log_area += back * weight
            cot.values["density_error"] = cot.values["density_error"] + back * weight.sum(axis=0) / (
                1.0 + values["density_error"]
            )

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        assert prediction is not None and isinstance(tangent, Tangent)
        change = (tangent.state.held_force if self.at_held_end else tangent.state.end_force)[self.steps]
        if self.tare:
            weight, pushed = self._weights(prediction), tangent.values["density_error"]
            change = change - self.tare * (
                (weight * tangent.log_area).sum(axis=0) + weight.sum() * pushed / (1.0 + values["density_error"])
            )
        scaled = (1.0 + values["force_scale"]) * change + self._felt(prediction) * tangent.values["force_scale"]
        return scaled + tangent.values["force_zero"]

    def _weights(self, prediction: Prediction) -> Array:
        """Weight of each element (n, lanes), N."""
        bar = prediction.state.bar
        return FORCE_UNIT * STANDARD_GRAVITY * bar.density * (bar.h * bar.area)[:, 0]

    def _felt(self, prediction: Prediction) -> Array:
        state = prediction.state
        force = (state.held_force if self.at_held_end else state.end_force)[self.steps]
        return force - self.tare * self._weights(prediction).sum(axis=0) if self.tare else force

"""Measured unstretched sections, on the logarithm: relative reading error, placement through the outline's slope."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Piece, Prediction, Tangent
from pullback.inverse.readings.base import GaussianTerm, pushed_values

Array = NDArray[np.float64]


class Sections(GaussianTerm):
    """log section at some stations; `log_outline` and its `slope` (1/mm) there, `sigma` relative, (N,) each.

    A station that is off by d sees a section off by slope d: `placement` (mm) widens each reading, `grip_position`
    shifts all together. The slope of the field itself is left out: spread/ell times a placement of 0.1 mm is below a
    tenth of the reading error of any micrometer.
    """

    kind = "sections"

    def __init__(
        self,
        piece: Piece,
        station: Array,
        area: Array,
        sigma: Array,
        placement: float,
        log_outline: Array,
        slope: Array,
    ) -> None:
        super().__init__(np.log(area), np.hypot(sigma, placement * slope))
        self.piece, self.station, self.slope, self.log_outline = piece.name, station, slope, log_outline
        self._names = piece.names
        self._phi = None if piece.basis is None else piece.basis.at(station)

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """log of the section at each station."""
        offset = values["lot"] + values[self._names.section]
        log = self.log_outline[:, None] + offset + self.slope[:, None] * values["grip_position"]
        return log if self._phi is None else log + self._phi @ values[self._names.field]

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        v, total = cot.values, g.sum(axis=0)
        v["lot"] = v["lot"] + total
        v[self._names.section] = v[self._names.section] + total
        v["grip_position"] = v["grip_position"] + self.slope @ g
        if self._phi is not None:
            v[self._names.field] = v[self._names.field] + self._phi.T @ g

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        pushed = pushed_values(tangent)
        change = (pushed["lot"] + pushed[self._names.section])[None] + self.slope[:, None] * pushed["grip_position"]
        return change if self._phi is None else change + self._phi @ pushed[self._names.field]

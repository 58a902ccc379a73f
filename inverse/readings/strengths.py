"""What broke and what held: coupons, and the pulled piece that survived its last step."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy import special

from pullback.forward.criteria import Criterion
from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction
from pullback.inverse.scatter import Scatter

Array = NDArray[np.float64]


class CouponStrength:
    """The criterion's measure at which coupons broke, or that they held: `measure`, `volume` (mm³), `broke` (N,)."""

    kind = "coupon strength"
    piece: str | None = None

    def __init__(self, scatter: Scatter, measure: Array, volume: Array, broke: NDArray[np.bool_]) -> None:
        self.scatter, self.measure, self.volume, self.broke = scatter, measure, volume, broke

    @property
    def count(self) -> int:
        """Number of coupons."""
        return self.measure.size

    def parameters(self, values: Values) -> tuple[Array, Array]:
        """Values of the family's two parameters."""
        first, second = self.scatter.parameter_names
        return values[first], values[second]

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """See `Term`."""
        log, by = self.scatter.coupon_log_density(self.measure, self.volume, self.broke, self.parameters(values))
        for name, g in zip(self.scatter.parameter_names, by, strict=True):
            cot.values[name] = cot.values[name] + g
        return log

    def chi_square(self, values: Values, prediction: Prediction | None) -> Array:
        """Sum of squared normal scores; a coupon that held is given a score at random above its own.

        (Randomised quantile residuals: Dunn & Smyth, J. Comput. Graph. Stat. 5 (1996) 236.)
        """
        tail = np.exp(-self.scatter.coupon_hazard(self.measure, self.volume, self.parameters(values)))
        rng = np.random.Generator(np.random.Philox(key=self.count))
        held = tail * rng.random(tail.shape)
        z = special.ndtri(np.clip(np.where(self.broke[:, None], tail, held), 1e-300, 1.0 - 1e-16))
        return np.einsum("nw,nw->w", z, z)

    def simulate_chi_square(self, values: Values, prediction: Prediction | None, rng: np.random.Generator) -> Array:
        """Of coupons drawn from the family."""
        z = rng.standard_normal((self.count, values[self.scatter.parameter_names[0]].size))
        return np.einsum("nw,nw->w", z, z)


class Survival:
    """A piece that was pulled to `step` without breaking: held at least that."""

    kind = "survival"
    count = 0
    """It is no reading that could be simulated and compared."""

    def __init__(self, piece: str, criterion: Criterion, scatter: Scatter, step: int) -> None:
        self.piece: str | None = piece
        self.criterion, self.scatter, self.step = criterion, scatter, step

    def hazard(self, values: Values, prediction: Prediction) -> tuple[Array, Array, Array, tuple[Array, Array]]:
        """As `Scatter.hazard`, at this step."""
        e, bar = prediction.state.element, prediction.state.bar
        measure = self.criterion.measure(e.stretch[:, self.step], e.stress[:, self.step])
        volume = (bar.h * bar.area)[:, 0]
        return self.scatter.hazard(measure, volume, [values[p] for p in self.scatter.parameter_names])

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """Minus the hazard."""
        assert prediction is not None
        total, by_measure, by_log_volume, by_parameters = self.hazard(values, prediction)
        e, bar = prediction.state.element, prediction.state.bar
        stretch, slope = e.stretch[:, self.step], e.slope[:, self.step]
        by_stretch = -by_measure * self.criterion.by_stretch(stretch, slope) / bar.h[:, 0]
        cot.position[1:, self.step] += by_stretch
        cot.position[:-1, self.step] -= by_stretch
        cot.log_area -= by_log_volume
        for name, g in zip(self.scatter.parameter_names, by_parameters, strict=True):
            cot.values[name] = cot.values[name] - g
        if self.criterion.by_stress:
            self._through_law(prediction, -by_measure, cot)
        return -total

    def chi_square(self, values: Values, prediction: Prediction | None) -> Array:
        """Nothing to compare: zero."""
        return np.zeros(values[self.scatter.parameter_names[0]].size)

    def simulate_chi_square(self, values: Values, prediction: Prediction | None, rng: np.random.Generator) -> Array:
        """Nothing to compare: zero."""
        return self.chi_square(values, prediction)

    def _through_law(self, prediction: Prediction, g: Array, cot: Cotangent) -> None:
        """The stress depends on the law's parameters and the piece's stiffness at a given stretch too."""
        e, bar, piece, v = prediction.state.element, prediction.state.bar, prediction.piece, cot.values
        by = bar.law.stress_by_parameter(e.stretch[:, self.step], bar.theta[:, 0])
        for k, p in enumerate(bar.law.parameters):
            v[p.name] = v[p.name] + np.einsum("nw,nw->w", g, by[k]) * bar.stiffness[0]
        by_log = np.einsum("nw,nw->w", g, e.stress[:, self.step])
        names, values = piece.names, prediction.values
        v["stiffness_scatter"] = v["stiffness_scatter"] + by_log * values[names.stiffness]
        v[names.stiffness] = v[names.stiffness] + by_log * values["stiffness_scatter"]

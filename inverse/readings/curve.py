"""Readings of the compound's law itself: stress–stretch tables, and coupons that report stress and elongation."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.forward.laws.base import Law
from pullback.inverse.layout import Values
from pullback.inverse.piece import Cotangent, Prediction, Tangent
from pullback.inverse.readings.base import GaussianTerm, pushed_values

Array = NDArray[np.float64]


class _OfLaw(GaussianTerm):
    """What is shared: the law at fixed stretches (N,)."""

    def __init__(self, law: Law, stretch: Array, readings: Array, sigma: Array) -> None:
        super().__init__(readings, sigma)
        self.law, self.stretch = law, np.asarray(stretch, float)

    def stress(self, values: Values) -> Array:
        """Nominal stress (N, lanes)."""
        return self.law.stress(self.stretch[:, None], self._theta(values))

    def _theta(self, values: Values) -> Array:
        return np.stack([values[p.name] for p in self.law.parameters])[:, None, :]

    def _by_parameter(self, values: Values) -> Array:
        """dP/dtheta (k, N, lanes)."""
        return self.law.stress_by_parameter(self.stretch[:, None], self._theta(values))


class Curve(_OfLaw):
    """Nominal stress in simple tension at given stretches, MPa.

    With `noise` the name of an unknown, that value is the standard uncertainty of every reading and `sigma` only its
    first guess, used by the least-squares start.
    """

    kind = "curve"

    def __init__(self, law: Law, stretch: Array, stress: Array, sigma: Array, noise: str | None = None) -> None:
        super().__init__(law, stretch, stress, sigma)
        self.noise = noise

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """The law's stress."""
        return self.stress(values)

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        for p, by in zip(self.law.parameters, self._by_parameter(values), strict=True):
            cot.values[p.name] = cot.values[p.name] + np.einsum("nw,nw->w", g, by)

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        pushed = pushed_values(tangent)
        by = self._by_parameter(values)[..., 0]
        return np.einsum("kn,kp->np", by, np.stack([pushed[p.name] for p in self.law.parameters]))

    def log_density(self, values: Values, prediction: Prediction | None, cot: Cotangent) -> Array:
        """Normal, with the noise level known or among the unknowns."""
        if self.noise is None:
            return super().log_density(values, prediction, cot)
        s = values[self.noise]
        r = (self.readings[:, None] - self.stress(values)) / s
        self.pull(values, prediction, r / s, cot)
        chi = np.einsum("nw,nw->w", r, r)
        cot.values[self.noise] = cot.values[self.noise] + (chi - self.count) / s
        return -0.5 * chi - self.count * (np.log(s) + 0.5 * np.log(2.0 * np.pi))

    def whitened_jacobian(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`; an unknown noise level is held."""
        sigma = self.sigma[:, None] if self.noise is None else values[self.noise]
        return -self.push(values, prediction, tangent) / sigma

    def _residual(self, values: Values, prediction: Prediction | None) -> Array:
        sigma = self.sigma[:, None] if self.noise is None else values[self.noise]
        return (self.readings[:, None] - self.stress(values)) / sigma


class CouponStress(_OfLaw):
    """log of the nominal stress that coupons bore at their last reading: the law there, times the laboratory's scale.

    `sigma` (N,) relative: the stress reading's own, and the elongation's through the slope of log stress.
    """

    kind = "coupons"

    def expected(self, values: Values, prediction: Prediction | None) -> Array:
        """log P + log(1 + coupon_scale); not finite where the law gives no tension."""
        with np.errstate(invalid="ignore", divide="ignore"):
            return np.log(self.stress(values)) + np.log1p(values["coupon_scale"])

    def pull(self, values: Values, prediction: Prediction | None, g: Array, cot: Cotangent) -> None:
        """See `GaussianTerm`."""
        weighted = g / self.stress(values)
        for p, by in zip(self.law.parameters, self._by_parameter(values), strict=True):
            cot.values[p.name] = cot.values[p.name] + np.einsum("nw,nw->w", weighted, by)
        cot.values["coupon_scale"] = cot.values["coupon_scale"] + g.sum(axis=0) / (1.0 + values["coupon_scale"])

    def push(self, values: Values, prediction: Prediction | None, tangent: Tangent | Values) -> Array:
        """See `GaussianTerm`."""
        pushed = pushed_values(tangent)
        by = self._by_parameter(values)[..., 0] / self.stress(values)[:, 0]
        change = np.einsum("kn,kp->np", by, np.stack([pushed[p.name] for p in self.law.parameters]))
        return change + pushed["coupon_scale"] / (1.0 + values["coupon_scale"])

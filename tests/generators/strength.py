"""How coupons and parts break: a measure of loading, scattered as a weakest link or at the most loaded section."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from generators.laws import Theta, stable_up_to, stress, stretch_at

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Strength:
    """`scale` is the Weibull scale or the log-normal median of the measure (elongation as a fraction, or MPa), for the
    coupon's volume (mm³); `shape` the Weibull modulus or the standard deviation of the logarithm."""

    criterion: str
    scatter: str
    scale: float
    shape: float
    coupon_volume: float

    def draw(self, count: int, rng: np.random.Generator) -> Array:
        """Values of the measure at which coupons break."""
        if self.scatter == "weibull":
            return self.scale * rng.exponential(size=count) ** (1.0 / self.shape)
        return self.scale * np.exp(self.shape * rng.standard_normal(count))

    def stretch(self, measure: Array, law: str, theta: Theta) -> Array:
        """Stretch at which the measure has these values, under the lot's law."""
        return 1.0 + measure if self.criterion == "elongation" else stretch_at(law, theta, measure)

    def measure(self, stretch: Array, stiffness: Array | float, law: str, theta: Theta) -> Array:
        """The measure at each stretch, of a part with a factor on its stress."""
        return stretch - 1.0 if self.criterion == "elongation" else stiffness * stress(law, theta, stretch)


@dataclass(frozen=True)
class Loading:
    """Real parts as the capacity needs them: `area` and `weight` beyond, (parts, stations), over `x`, and stiffness."""

    x: Array
    area: Array
    weight: Array
    stiffness: Array
    law: str
    theta: Theta


def capacity(loading: Loading, strength: Strength, rng: np.random.Generator) -> Array:
    """End force (N) at which each part breaks, its own strength drawn."""
    parts = loading.area.shape[0]
    if strength.scatter == "weibull":
        return _weakest_link(loading, strength, rng.exponential(size=parts))
    return _most_loaded(loading, strength, strength.draw(parts, rng))


def _most_loaded(loading: Loading, strength: Strength, at_break: Array) -> Array:
    if strength.criterion == "elongation":
        nominal = loading.stiffness * stress(loading.law, loading.theta, 1.0 + at_break)
    else:
        nominal = at_break
    return np.min(nominal[:, None] * loading.area - loading.weight, axis=1)


def _weakest_link(loading: Loading, strength: Strength, threshold: Array) -> Array:
    """Bisection for the force at which the integrated hazard reaches `threshold` (parts,)."""
    table = _hazard_table(loading, strength, float(threshold.max()))
    low = np.zeros_like(threshold)
    high = 2.0 * table[0][-1] * loading.area.max(axis=1)
    for _ in range(40):
        middle = 0.5 * (low + high)
        over = hazard(loading, strength, middle, table) > threshold
        high, low = np.where(over, middle, high), np.where(over, low, middle)
    return 0.5 * (low + high)


def hazard(loading: Loading, strength: Strength, end_force: Array, table: tuple[Array, Array] | None = None) -> Array:
    """Integral over each part of (measure / scale)^shape per coupon volume, at end forces (parts,)."""
    nominal = (end_force[:, None] + loading.weight) / loading.area
    if strength.criterion == "nominal stress":
        density = (np.maximum(nominal, 0.0) / strength.scale) ** strength.shape
    else:
        grid, log_density = table or _hazard_table(loading, strength, 1e3)
        density = np.exp(np.interp(nominal / loading.stiffness[:, None], grid, log_density))
    return np.trapezoid(density * loading.area, loading.x, axis=1) / strength.coupon_volume


def _hazard_table(loading: Loading, strength: Strength, worst: float) -> tuple[Array, Array]:
    """Nominal stress of the law against log hazard density, up to where a hundredth of the part would break."""
    enough = 100.0 * worst * strength.coupon_volume / np.ptp(loading.x) / float(loading.area.min())
    top = strength.scale * max(1.0, enough) ** (1.0 / strength.shape)
    if strength.criterion == "nominal stress":
        return np.array([0.0, top]), np.zeros(2)
    while not stable_up_to(loading.law, loading.theta, 1.0 + top):
        top *= 0.98
    elongation = top * np.linspace(1e-4, 1.0, 6000)
    nominal = stress(loading.law, loading.theta, 1.0 + elongation)
    return nominal, strength.shape * np.log(elongation / strength.scale)

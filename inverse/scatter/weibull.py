"""Weakest link: H = sum over the body of (s/s0)^m V/V0. Weibull, J. Appl. Mech. 18 (1951) 293, eqs. 3–5."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.priors import FlatLog, Prior

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Weibull:
    """Weakest link over the unstretched volume; s0: characteristic strength of `reference_volume` mm³."""

    reference_volume: float
    name: str = "weibull"
    parameter_names: tuple[str, str] = ("strength_scale", "strength_modulus")

    def default_priors(self, measure: Array, broke: NDArray[np.bool_]) -> tuple[Prior, Prior]:
        """Flat in log s0 and log m."""
        log = np.log(measure)
        # For the smallest extreme value distribution the standard deviation is pi/(sqrt(6) m).
        m = np.pi / np.sqrt(6.0) / max(float(np.std(log)), 1e-3)
        n = max(int(broke.sum()), 1)
        start = float(np.exp(log.mean() + 0.5772 / m))
        return FlatLog(start, 1.0 / (m * np.sqrt(n))), FlatLog(m, 1.0 / np.sqrt(n))

    def coupon_log_density(
        self, measure: Array, volume: Array, broke: NDArray[np.bool_], parameters: Sequence[Array]
    ) -> tuple[Array, tuple[Array, Array]]:
        """log f = log m − log s + log H − H for a broken coupon, −H for one that held."""
        s0, m = parameters
        t = np.log(measure)[:, None] - np.log(s0)
        log_h = m * t + np.log(volume / self.reference_volume)[:, None]
        h, b = np.exp(log_h), broke[:, None]
        value = np.where(b, np.log(m) - np.log(measure)[:, None] + log_h, 0.0) - h
        by_scale = (h - b).sum(axis=0) * m / s0
        by_modulus = (b * (1.0 / m + t) - h * t).sum(axis=0)
        return value.sum(axis=0), (by_scale, by_modulus)

    def coupon_hazard(self, measure: Array, volume: Array, parameters: Sequence[Array]) -> Array:
        """(s/s0)^m V/V0."""
        s0, m = parameters
        return np.exp(m * (np.log(measure)[:, None] - np.log(s0))) * (volume / self.reference_volume)[:, None]

    def hazard(
        self, measure: Array, volume: Array, parameters: Sequence[Array]
    ) -> tuple[Array, Array, Array, tuple[Array, Array]]:
        """See `Scatter.hazard`; sections that are not loaded (s <= 0) contribute nothing."""
        s0, m = parameters
        loaded = measure > 0.0
        safe = np.where(loaded, measure, 1.0)
        t = np.log(safe) - np.log(s0)
        each = np.where(loaded, np.exp(m * t) * volume / self.reference_volume, 0.0)
        total = each.sum(axis=0)
        return total, m * each / safe, each, (-m * total / s0, (each * t).sum(axis=0))

    def log_hazard(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """log of the sum over sections."""
        each = second * (log_measure - np.log(first)) + np.log(volume / self.reference_volume)
        top = each.max(axis=0)
        with np.errstate(invalid="ignore"):
            return np.where(np.isfinite(top), top + np.log(np.exp(each - top).sum(axis=0)), top)

    def shares(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """Each section's share of the hazard."""
        each = second * log_measure + np.log(volume)
        weight = np.exp(each - each.max(axis=0))
        return weight / weight.sum(axis=0)

"""Log-normal strength of the most stressed section: H = −log Phi(−(log s − log median)/log_sd)."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import special

from pullback.inverse.priors import FlatLog, Prior

Array = NDArray[np.float64]
_LOG_ROOT_2PI = 0.5 * np.log(2.0 * np.pi)


@dataclass(frozen=True)
class LogNormalStrength:
    """Strength log-normal from part to part, whatever the volume; the most stressed section decides."""

    reference_volume: float = 1.0
    name: str = "lognormal"
    parameter_names: tuple[str, str] = ("strength_median", "strength_log_sd")

    def default_priors(self, measure: Array, broke: NDArray[np.bool_]) -> tuple[Prior, Prior]:
        """Flat in the log of the median and in the log of the log-sd."""
        log, n = np.log(measure), max(int(broke.sum()), 2)
        sd = max(float(np.std(log, ddof=1)) if log.size > 1 else 0.1, 1e-3)
        return FlatLog(float(np.exp(log.mean())), sd / np.sqrt(n)), FlatLog(sd, 1.0 / np.sqrt(2.0 * n))

    def coupon_log_density(
        self, measure: Array, volume: Array, broke: NDArray[np.bool_], parameters: Sequence[Array]
    ) -> tuple[Array, tuple[Array, Array]]:
        """Normal density of log s for a broken coupon, its upper tail for one that held."""
        median, sd = parameters
        z = (np.log(measure)[:, None] - np.log(median)) / sd
        b, log_tail = broke[:, None], special.log_ndtr(-z)
        value = np.where(b, -0.5 * z * z - np.log(sd) - np.log(measure)[:, None] - _LOG_ROOT_2PI, log_tail)
        rate = np.exp(-0.5 * z * z - _LOG_ROOT_2PI - log_tail)
        by_median = np.where(b, z, rate).sum(axis=0) / (sd * median)
        by_sd = np.where(b, z * z - 1.0, rate * z).sum(axis=0) / sd
        return value.sum(axis=0), (by_median, by_sd)

    def coupon_hazard(self, measure: Array, volume: Array, parameters: Sequence[Array]) -> Array:
        """−log Phi(−z)."""
        median, sd = parameters
        return -special.log_ndtr(-(np.log(measure)[:, None] - np.log(median)) / sd)

    def hazard(
        self, measure: Array, volume: Array, parameters: Sequence[Array]
    ) -> tuple[Array, Array, Array, tuple[Array, Array]]:
        """See `Scatter.hazard`; only the most stressed section counts, volume does not."""
        median, sd = parameters
        worst = np.argmax(measure, axis=0)[None]
        s = np.maximum(np.take_along_axis(measure, worst, axis=0)[0], 1e-12)
        z = (np.log(s) - np.log(median)) / sd
        log_tail = special.log_ndtr(-z)
        rate = np.exp(-0.5 * z * z - _LOG_ROOT_2PI - log_tail)
        by_measure = np.zeros_like(measure)
        np.put_along_axis(by_measure, worst, (rate / (sd * s))[None], axis=0)
        return -log_tail, by_measure, np.zeros_like(measure), (-rate / (sd * median), -rate * z / sd)

    def log_hazard(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """log(−log Phi(−z)) of the most stressed section."""
        z = (log_measure.max(axis=0) - np.log(first)) / second
        with np.errstate(divide="ignore"):
            return np.log(-special.log_ndtr(-z))

    def shares(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """One at the most stressed section."""
        return (np.arange(log_measure.shape[0])[:, None] == np.argmax(log_measure, axis=0)[None]).astype(float)

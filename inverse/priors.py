"""Prior distributions, each written as a map from one unconstrained coordinate z to the value.

For a proper prior the map is its quantile function composed with the normal distribution function, so that the
prior of z is exactly the standard normal, whatever the family: the Jacobian of the change of variable never has to be
written again, and 1 - var(z | data) is the share of a parameter that the data determine. A flat prior is flat in z.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray
from scipy import special

Array = NDArray[np.float64]
_LOG_ROOT_2PI = 0.5 * np.log(2.0 * np.pi)


class Prior(Protocol):
    """One unknown's prior; `z` and values are arrays of any one shape."""

    @property
    def proper(self) -> bool:
        """Whether the prior is a probability distribution; a flat one is not."""

    def value(self, z: Array) -> Array:
        """The value at the unconstrained coordinate z."""

    def slope(self, z: Array) -> Array:
        """d value / d z."""

    def coordinate(self, value: Array) -> Array:
        """The unconstrained coordinate of a value."""

    def log_ratio(self, z: Array, factor: float) -> Array:
        """Log density of the same prior with its scale times `factor`, over that of the prior itself, at z."""

    def __str__(self) -> str: ...


def log_prior(prior: Prior, z: Array) -> Array:
    """Log density of z under its own prior: standard normal, or zero for a flat one."""
    return -0.5 * z * z if prior.proper else np.zeros_like(z)


def _normal_log_ratio(z: Array, factor: float) -> Array:
    return 0.5 * z * z * (1.0 - 1.0 / factor**2) - np.log(factor)


@dataclass(frozen=True)
class Normal:
    """Normal distribution, `mean` and standard deviation `sd` in the value's unit."""

    mean: float
    sd: float
    proper: bool = True

    def value(self, z: Array) -> Array:
        """mean + sd z."""
        return self.mean + self.sd * z

    def slope(self, z: Array) -> Array:
        """sd, for every z."""
        return np.full_like(z, self.sd)

    def coordinate(self, value: Array) -> Array:
        """(value - mean) / sd."""
        return (np.asarray(value, float) - self.mean) / self.sd

    def log_ratio(self, z: Array, factor: float) -> Array:
        """See `Prior.log_ratio`."""
        return _normal_log_ratio(z, factor)

    def __str__(self) -> str:
        return f"normal, mean {self.mean:g}, standard deviation {self.sd:g}"


@dataclass(frozen=True)
class LogNormal:
    """Log-normal distribution with `median` and geometric standard deviation `gsd` (> 1).

    A negative median mirrors the distribution, for parameters that are negative by nature.
    """

    median: float
    gsd: float
    proper: bool = True

    def value(self, z: Array) -> Array:
        """median gsd^z."""
        return self.median * np.exp(np.log(self.gsd) * z)

    def slope(self, z: Array) -> Array:
        """log(gsd) times the value."""
        return np.log(self.gsd) * self.value(z)

    def coordinate(self, value: Array) -> Array:
        """log(value / median) / log(gsd)."""
        return np.log(np.asarray(value, float) / self.median) / np.log(self.gsd)

    def log_ratio(self, z: Array, factor: float) -> Array:
        """See `Prior.log_ratio`; the scale is that of the logarithm."""
        return _normal_log_ratio(z, factor)

    def __str__(self) -> str:
        return f"log-normal, median {self.median:g}, geometric standard deviation {self.gsd:g}"


@dataclass(frozen=True)
class Uniform:
    """Uniform distribution between `low` and `high`."""

    low: float
    high: float
    proper: bool = True

    def value(self, z: Array) -> Array:
        """low + (high - low) Phi(z)."""
        return self.low + (self.high - self.low) * special.ndtr(z)

    def slope(self, z: Array) -> Array:
        """(high - low) phi(z)."""
        return (self.high - self.low) * np.exp(-0.5 * z * z - _LOG_ROOT_2PI)

    def coordinate(self, value: Array) -> Array:
        """Phi^-1 of the fraction of the interval below the value."""
        return special.ndtri((np.asarray(value, float) - self.low) / (self.high - self.low))

    def log_ratio(self, z: Array, factor: float) -> Array:
        """See `Prior.log_ratio`; the interval keeps its middle."""
        off = np.abs(special.ndtr(z) - 0.5)
        return np.where(off <= 0.5 * factor, -np.log(factor), -np.inf)

    def __str__(self) -> str:
        return f"uniform between {self.low:g} and {self.high:g}"


@dataclass(frozen=True)
class HalfNormal:
    """Absolute value of a normal variable with mean zero and standard deviation `scale`."""

    scale: float
    proper: bool = True

    def value(self, z: Array) -> Array:
        """scale times the half-normal quantile of Phi(z), accurate in the upper tail."""
        return -self.scale * special.ndtri(0.5 * special.ndtr(-z))

    def slope(self, z: Array) -> Array:
        """phi(z) / (2 phi(value / scale) / scale)."""
        t = self.value(z) / self.scale
        return 0.5 * self.scale * np.exp(0.5 * (t * t - z * z))

    def coordinate(self, value: Array) -> Array:
        """Phi^-1 of the half-normal distribution function."""
        return -special.ndtri(2.0 * special.ndtr(-np.asarray(value, float) / self.scale))

    def log_ratio(self, z: Array, factor: float) -> Array:
        """See `Prior.log_ratio`."""
        return _normal_log_ratio(self.value(z) / self.scale, factor)

    def __str__(self) -> str:
        return f"half-normal, scale {self.scale:g}"


@dataclass(frozen=True)
class Flat:
    """Flat in the value (improper); z counts from `start` in steps of `unit`."""

    start: float
    unit: float
    proper: bool = False

    def value(self, z: Array) -> Array:
        """start + unit z."""
        return self.start + self.unit * z

    def slope(self, z: Array) -> Array:
        """unit, for every z."""
        return np.full_like(z, self.unit)

    def coordinate(self, value: Array) -> Array:
        """(value - start) / unit."""
        return (np.asarray(value, float) - self.start) / self.unit

    def log_ratio(self, z: Array, factor: float) -> Array:
        """Zero: a flat prior has no scale."""
        return np.zeros_like(z)

    def __str__(self) -> str:
        return "flat"


@dataclass(frozen=True)
class FlatLog:
    """Flat in the logarithm of a positive value (improper); value = start exp(unit z)."""

    start: float
    unit: float = 1.0
    proper: bool = False

    def value(self, z: Array) -> Array:
        """start exp(unit z)."""
        return self.start * np.exp(self.unit * z)

    def slope(self, z: Array) -> Array:
        """unit times the value."""
        return self.unit * self.value(z)

    def coordinate(self, value: Array) -> Array:
        """log(value / start) / unit."""
        return np.log(np.asarray(value, float) / self.start) / self.unit

    def log_ratio(self, z: Array, factor: float) -> Array:
        """Zero: a flat prior has no scale."""
        return np.zeros_like(z)

    def __str__(self) -> str:
        return "flat in the logarithm"


@dataclass(frozen=True)
class Varies:
    """Differs from part to part or from use to use: scatter, not ignorance."""

    prior: Normal | LogNormal | Uniform | HalfNormal


Proper = Normal | LogNormal | Uniform | HalfNormal
Quantity = float | Proper

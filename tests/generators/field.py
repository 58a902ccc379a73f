"""Sections along a part: outline times the exponential of a lot's, a part's and a Gaussian process's departure."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

_JITTER = 1e-10
"""Added to the unit variance so that the covariance can be factored; 1e-5 of the spread."""


@dataclass(frozen=True)
class Outline:
    """Nominal width and thickness (mm) at stations (mm), linear between them."""

    station: tuple[float, ...]
    width: tuple[float, ...]
    thickness: tuple[float, ...]

    def sides(self, x: Array) -> tuple[Array, Array]:
        """Width and thickness at stations x."""
        return np.interp(x, self.station, self.width), np.interp(x, self.station, self.thickness)

    def area(self, x: Array) -> Array:
        """Width times thickness at stations x, mm²."""
        width, thickness = self.sides(x)
        return width * thickness


def gaussian_process(
    x: Array, spread: float, correlation_length: float, count: int, rng: np.random.Generator
) -> Array:
    """`count` draws (count, len(x)) with covariance spread² exp(−½ (distance/correlation_length)²), by Cholesky."""
    distance = x[:, None] - x[None, :]
    covariance = np.exp(-0.5 * (distance / correlation_length) ** 2) + _JITTER * np.eye(x.size)
    return spread * rng.standard_normal((count, x.size)) @ np.linalg.cholesky(covariance).T

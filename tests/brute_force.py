"""Capacity of parts by plain simulation: draw a part, draw its strength, find the load at which it fails.

Independent of the package's capacity code: the strength is drawn and not integrated out, the load is found by
bisection with the law inverted at every station, shares are counted. Dead weight as in statics: force at a station =
end force + what hangs below it.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
GRAVITY = 9.80665e-3  # N a gram


def yeoh(stretch: Array, c10: float, c20: float, c30: float) -> Array:
    """Nominal stress of Yeoh's law (1993), MPa."""
    i = stretch**2 + 2.0 / stretch - 3.0
    return 2.0 * (stretch - stretch**-2) * (c10 + 2.0 * c20 * i + 3.0 * c30 * i**2)


def stretch_at(stress: Array, law: tuple[float, float, float]) -> Array:
    """The stretch that gives a nominal stress, between 20 001 stretches linearly."""
    stretch = np.linspace(1.0, 15.0, 20_001)
    return np.interp(stress, yeoh(stretch, *law), stretch)


def failure_loads(
    area: Array, stiffness: Array, h: Array, density: float, law: tuple[float, float, float],
    by_stress: bool, failed: Callable[[Array, Array], NDArray[np.bool_]], guess: tuple[float, float],
) -> Array:  # fmt: skip
    """Load (N) at which each part fails: `area` (n, K) mm², `stiffness` (K,), `h` (n,) mm; `failed` says of the
    measures (n, K) and volumes (n, K) whether each part has; bisection in the load between the two of `guess`."""
    weight = GRAVITY * density * area * h[:, None]
    hanging = np.cumsum(weight[::-1], axis=0)[::-1] - 0.5 * weight
    low, high = (np.full(area.shape[1], g) for g in guess)
    for _ in range(26):
        load = np.sqrt(low * high)
        stress = (load + hanging) / area
        measure = stress if by_stress else stretch_at(stress / stiffness, law) - 1.0
        gone = failed(measure, area * h[:, None])
        low, high = np.where(gone, low, load), np.where(gone, load, high)
    return np.sqrt(low * high)


def weibull_fails(
    scale: float, modulus: float, volume: float, rng: np.random.Generator, parts: int
) -> Callable[[Array, Array], NDArray[np.bool_]]:
    """A weakest link: the part fails when its summed hazard exceeds an exponential variable."""
    limit = -np.log(rng.random(parts))

    def failed(measure: Array, v: Array) -> NDArray[np.bool_]:
        return np.sum((measure / scale) ** modulus * v, axis=0) / volume > limit

    return failed


def lognormal_fails(
    median: float, log_sd: float, rng: np.random.Generator, parts: int
) -> Callable[[Array, Array], NDArray[np.bool_]]:
    """The most stressed section reaches a log-normal strength."""
    strength = median * np.exp(log_sd * rng.standard_normal(parts))

    def failed(measure: Array, v: Array) -> NDArray[np.bool_]:
        return np.max(measure, axis=0) > strength

    return failed

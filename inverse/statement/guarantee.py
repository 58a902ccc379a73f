"""Guaranteed loads, margins and shortfall from the capacity of each draw."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

FEW_FAILURES = 10
"""Below so many distinct failures no reliability above 0.95 is guaranteed."""


@dataclass(frozen=True)
class Guaranteed:
    """Load that `reliability` of the parts carry with `confidence`; margin and `met` against one demand.

    `value` and `margin` are None where withheld, for `reason`.
    """

    reliability: float
    confidence: float
    value: float | None
    margin: float | None
    met: str
    reason: str | None = None


@dataclass(frozen=True)
class Margin:
    """Margin of one demand: `draws` predictive margins, guaranteed values, shortfall probability of each draw."""

    demand: str
    required: float
    required_draws: Array
    draws: Array
    guaranteed: list[Guaranteed]
    shortfall: Array
    quantile_margins: Array
    """Margin of each stated share of parts, (draws, reliabilities)."""


def lower_bound(values: Array, confidence: float, weights: Array | None = None) -> float:
    """The (1 − confidence) quantile of draws, weighted where weights are given."""
    if weights is None:
        return float(np.quantile(values, 1.0 - confidence))
    order = np.argsort(values)
    mass = np.cumsum(weights[order]) - 0.5 * weights[order]
    return float(np.interp(1.0 - confidence, mass / weights.sum(), values[order]))


def withheld(reliability: float, failures: int) -> str | None:
    """Why no load is guaranteed at this reliability, or None."""
    if reliability > 0.95 and failures < FEW_FAILURES:
        return f"{failures} distinct failures; {FEW_FAILURES} are needed for a reliability of {100 * reliability:g} %"
    return None


def margin(
    demand: str, middle: float, required: Array, capacity: Array, ratio: Array, shortfall: Array,
    reliability: tuple[float, ...], confidence: float, failures: int, quantiles: Array,
) -> Margin:  # fmt: skip
    """Margin of one demand.

    `middle`: median of what is required, N; `required` (draws,) N, factor included; `capacity` (draws,) one part's a
    draw; `ratio` (draws, reliabilities) capacity over requirement that each share of parts reaches; `quantiles`, of the
    same shape, the load that each share carries, N; `shortfall` (draws,) share of parts that fall short; `failures`:
    distinct coupon failures.
    """
    found = []
    for k, r in enumerate(reliability):
        reason = withheld(r, failures)
        if reason is not None:
            found.append(Guaranteed(r, confidence, None, None, "not shown", reason))
            continue
        least = lower_bound(ratio[:, k], confidence) - 1.0
        met = "met" if least >= 0.0 else "not met"
        found.append(Guaranteed(r, confidence, lower_bound(quantiles[:, k], confidence), least, met))
    return Margin(demand, middle, required, capacity / required - 1.0, found, shortfall, ratio - 1.0)

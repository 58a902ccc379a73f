"""How far each prior carries the guaranteed loads: its scale halved and doubled, by reweighting the draws.

Weights are smoothed by Pareto tails (Vehtari et al., J. Mach. Learn. Res. 25 (2024) 72).
"""

from __future__ import annotations

import warnings
from dataclasses import dataclass

import arviz as az
import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Field, Layout, Scalar, Values
from pullback.inverse.statement.guarantee import lower_bound

Array = NDArray[np.float64]

GAUGES = frozenset(
    {"density_error", "position_scale", "grip_position", "force_scale", "force_zero", "travel_zero", "coupon_scale"}
)
"""Unknowns whose prior is a gauge's certificate: not varied."""


@dataclass(frozen=True)
class PriorMove:
    """Relative change of one guaranteed load when one prior's scale is taken times `factor`, with its Monte Carlo
    error; `tail` is the Pareto shape of the weights, above 0.7 the change is not to be trusted."""

    prior: str
    factor: float
    reliability: float
    change: float
    error: float
    tail: float


def prior_moves(
    layout: Layout, values: Values, quantiles: Array, reliability: tuple[float, ...], confidence: float, chains: int
) -> list[PriorMove]:
    """Moves of each guaranteed load, `quantiles` (draws, reliabilities), draws chain after chain."""
    out = []
    for block in layout.blocks:
        if isinstance(block, Field) or not isinstance(block, Scalar) or not block.prior.proper:
            continue
        if block.name in GAUGES or block.name.endswith((" section", " stiffness")):
            # What one piece differs by has the scatter's prior, which is stated and not an opinion of its own.
            continue
        z = block.prior.coordinate(values[block.name])
        for factor in (0.5, 2.0):
            weights, tail = _smoothed(block.prior.log_ratio(z, factor))
            for k, r in enumerate(reliability):
                change, error = _change(quantiles[:, k], weights, confidence, chains)
                out.append(PriorMove(block.name, factor, r, change, error, tail))
    return out


def _smoothed(log_ratio: Array) -> tuple[Array, float]:
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        log_w, tail = az.psislw(np.maximum(log_ratio, -700.0))
    weights = np.exp(np.asarray(log_w) - np.max(np.asarray(log_w)))
    return weights, float(tail)


def _change(values: Array, weights: Array, confidence: float, chains: int) -> tuple[float, float]:
    """Relative change of the lower bound, and its standard error by leaving out one chain at a time."""

    def relative(keep: NDArray[np.bool_]) -> float:
        return lower_bound(values[keep], confidence, weights[keep]) / lower_bound(values[keep], confidence) - 1.0

    all_draws = np.ones(values.size, bool)
    label = np.arange(values.size) * chains // values.size
    left_out = np.array([relative(label != c) for c in range(chains)])
    spread = (chains - 1) / chains * np.sum((left_out - left_out.mean()) ** 2)
    return relative(all_draws), float(np.sqrt(spread))

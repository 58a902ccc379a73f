"""Convergence of chains by ArviZ: rank-normalised split R-hat, bulk, tail and sd effective sizes.

Vehtari, Gelman, Simpson, Carpenter & Bürkner, Bayesian Anal. 16 (2021) 667. Effective sizes are capped at the number
of draws: antithetic draws flatter the mean.
"""

from __future__ import annotations

from dataclasses import dataclass

import arviz as az
import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Diagnosis:
    """One value a quantity, for draws (chains, draws, quantities); `draws` a chain."""

    names: list[str]
    rhat: Array
    bulk: Array
    tail: Array
    sd: Array
    draws: int

    @property
    def least(self) -> float:
        """Least of all effective sizes."""
        return float(min(self.bulk.min(), self.tail.min(), self.sd.min()))

    @property
    def rhat_max(self) -> float:
        """Largest R-hat."""
        return float(self.rhat.max())

    def worst(self) -> str:
        """Name of the quantity with the least effective size."""
        return self.names[int(np.argmin(np.minimum(np.minimum(self.bulk, self.tail), self.sd)))]


def diagnose(draws: Array, names: list[str]) -> Diagnosis:
    """Diagnosis of `draws` (chains, draws, quantities)."""
    total = float(draws.shape[0] * draws.shape[1])

    def each(f: object) -> Array:
        return np.array([f(draws[:, :, k]) for k in range(draws.shape[2])])  # type: ignore[operator]

    def ess(method: str) -> Array:
        # A quantity that never moves has no effective size; ArviZ calls that nan or the number of draws.
        found = each(lambda x: az.ess(x, method=method))
        still = each(lambda x: float(np.ptp(x) == 0.0))
        return np.where(still > 0.0, 0.0, np.minimum(np.nan_to_num(found), total))

    with np.errstate(invalid="ignore", divide="ignore"):
        rhat = np.nan_to_num(each(lambda x: az.rhat(x)), nan=np.inf)
    return Diagnosis(names, rhat, ess("bulk"), ess("tail"), ess("sd"), draws.shape[1])

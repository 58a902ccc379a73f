"""One draw's law as a table: stretch, criterion's measure and energy against nominal stress."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.forward.criteria import Criterion
from pullback.forward.laws.base import Law

Array = NDArray[np.float64]

_POINTS = 320
_SMALLEST = 1e-3


@dataclass(frozen=True)
class LawTable:
    """Rising part of the law from stretch 1.001 up: logs of stress, of the measure and of elongation, and energy.

    `limit`: the largest stress the law carries before its first maximum, inf where it rises over the whole table.
    """

    log_stress: Array
    log_measure: Array
    log_elongation: Array
    energy: Array
    limit: float

    @classmethod
    def of(cls, law: Law, theta: Array, criterion: Criterion, largest: float) -> LawTable:
        """Table up to the stretch `largest`; `theta` (k,)."""
        elongation = np.geomspace(_SMALLEST, largest - 1.0, _POINTS)
        stretch = 1.0 + elongation
        stress = law.stress(stretch, theta)
        rising = np.concatenate(([True], np.diff(stress) > 0.0)) & (stress > 0.0)
        n = _POINTS if np.all(rising) else max(int(np.argmin(rising)), 2)
        measure = criterion.measure(stretch[:n], stress[:n])
        limit = np.inf if n == _POINTS else float(stress[n - 1])
        energy = law.energy(stretch[:n], theta)
        return cls(np.log(np.maximum(stress[:n], 1e-300)), np.log(measure), np.log(elongation[:n]), energy, limit)

    def measure_at(self, stress: Array) -> Array:
        """log measure at each nominal stress; −inf where there is no tension, inf beyond the law's limit."""
        return self._at(self.log_measure, stress)

    def stretch_at(self, stress: Array) -> Array:
        """Stretch at each nominal stress in tension, 1 elsewhere; the table's end beyond it."""
        with np.errstate(divide="ignore", invalid="ignore"):
            log = np.interp(np.log(np.maximum(stress, 1e-300)), self.log_stress, self.log_elongation)
        return np.where(stress > 0.0, 1.0 + np.exp(log), 1.0)

    def energy_at(self, stress: Array) -> Array:
        """Strain energy per unstretched volume at each nominal stress, MPa."""
        with np.errstate(divide="ignore", invalid="ignore"):
            found = np.interp(np.log(np.maximum(stress, 1e-300)), self.log_stress, self.energy)
        return np.where(stress > np.exp(self.log_stress[0]), found, 0.0)

    def _at(self, column: Array, stress: Array) -> Array:
        with np.errstate(divide="ignore", invalid="ignore"):
            log = np.log(np.maximum(stress, 0.0))
        # Below the first entry every measure here is proportional to the stress; above the last it is extrapolated
        # with the last slope, the hazard there being overwhelming already.
        out = np.interp(log, self.log_stress, column)
        low = log < self.log_stress[0]
        out = np.where(low, column[0] + (log - self.log_stress[0]), out)
        end = (column[-1] - column[-2]) / (self.log_stress[-1] - self.log_stress[-2])
        high = log > self.log_stress[-1]
        beyond = np.inf if np.isfinite(self.limit) else column[-1] + end * (log - self.log_stress[-1])
        return np.where(high, beyond, out)

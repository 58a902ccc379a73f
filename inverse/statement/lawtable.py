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
    """Rising part of the law, from stretch 1.001 up, at even steps of log stress.

    `start`, `step`: first log stress and its step; `log_measure`, `log_elongation`, `energy` at each; `limit`: the
    largest stress the law carries before its first maximum, inf where it rises over the whole table.
    """

    start: float
    step: float
    log_measure: Array
    log_elongation: Array
    energy: Array
    limit: float

    @classmethod
    def of(cls, law: Law, theta: Array, criterion: Criterion, largest: float) -> LawTable:
        """Table up to the stretch `largest`; `theta` (k,)."""
        log_elongation = np.linspace(np.log(_SMALLEST), np.log(largest - 1.0), _POINTS)
        stretch = 1.0 + np.exp(log_elongation)
        stress = law.stress(stretch, theta)
        rising = np.concatenate(([True], np.diff(stress) > 0.0)) & (stress > 0.0)
        n = _POINTS if np.all(rising) else max(int(np.argmin(rising)), 2)
        log_stress = np.log(np.maximum(stress[:n], 1e-300))
        even = np.linspace(log_stress[0], log_stress[-1], _POINTS)
        elongation = np.interp(even, log_stress, log_elongation[:n])
        stretch = 1.0 + np.exp(elongation)
        measure, energy = criterion.measure(stretch, np.exp(even)), law.energy(stretch, theta)
        limit = np.inf if n == _POINTS else float(stress[n - 1])
        return cls(float(even[0]), float(even[1] - even[0]), np.log(measure), elongation, energy, limit)

    @property
    def end(self) -> float:
        """Last log stress."""
        return self.start + self.step * (_POINTS - 1)

    def log_measure_at(self, log_stress: Array) -> Array:
        """log measure at each log nominal stress; −inf where there is no tension, inf beyond the law's limit.

        Below the table the measure is taken as proportional to the stress; beyond it, where the hazard is overwhelming
        already, it goes on with the last slope.
        """
        x = (log_stress - self.start) / self.step
        k = np.clip(x, 0.0, _POINTS - 2.0).astype(np.intp)
        low = self.log_measure[k]
        out = low + (x - k) * (self.log_measure[k + 1] - low)
        below = x < 0.0
        if np.any(below):
            out = np.where(below, self.log_measure[0] + x * self.step, out)
        if np.isfinite(self.limit):
            out = np.where(x > _POINTS - 1.0, np.inf, out)
        return out

    def stretch_at(self, log_stress: Array) -> Array:
        """Stretch at each log nominal stress; the table's ends beyond it."""
        return 1.0 + np.exp(self._interp(self.log_elongation, log_stress))

    def energy_at(self, log_stress: Array) -> Array:
        """Strain energy per unstretched volume at each log nominal stress, MPa."""
        return self._interp(self.energy, log_stress) * (log_stress > self.start)

    def _interp(self, column: Array, log_stress: Array) -> Array:
        return np.interp(log_stress, self.start + self.step * np.arange(_POINTS), column)

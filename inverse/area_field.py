"""The departure of a real section from its outline along the part, as a sine series with spectral weights.

g(X) = sum over k of beta_k phi_k(X) on |X − middle| < boundary, phi_k = sin(omega_k (X − middle + boundary)) /
sqrt(boundary), omega_k = k pi / (2 boundary); beta_k has the standard deviation w_k with
w_k² = spread² sqrt(2 pi) ell exp(−omega_k² ell²/2), the spectral density of the squared-exponential covariance.
Solin & Särkkä, Stat. Comput. 30 (2020) 419, eqs. 20 and 68; Riutort-Mayol et al., Stat. Comput. 33 (2023) 17.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Basis:
    """The fixed basis of one part: `middle` and `boundary` (mm), `omega` (m,) rad/mm."""

    middle: float
    boundary: float
    omega: Array

    @classmethod
    def spanning(cls, length: float, ell_low: float, ell_high: float) -> Basis:
        """A basis that keeps the variance within 3e-4 for correlation lengths from `ell_low` to `ell_high` (mm).

        Boundary at half the length plus two of the largest correlation length, 3 boundary / ell_low terms.
        """
        boundary = 0.5 * length + 2.0 * ell_high
        terms = int(np.ceil(3.0 * boundary / ell_low))
        return cls(0.5 * length, boundary, np.arange(1.0, terms + 1.0) * float(np.pi / (2.0 * boundary)))

    def at(self, station: Array) -> Array:
        """phi_k at each station (mm), shape (stations, m)."""
        x = np.asarray(station, float)[:, None] - self.middle + self.boundary
        return np.sin(x * self.omega) / np.sqrt(self.boundary)

    def log_weight(self, spread: Array, ell: Array) -> Array:
        """log w_k, shape (m, lanes), for `spread` and `ell` (lanes,)."""
        phase = (self.omega[:, None] * ell) ** 2
        return np.log(spread) + 0.5 * np.log(np.sqrt(2.0 * np.pi) * ell) - 0.25 * phase

    def log_weight_by_log_ell(self, ell: Array) -> Array:
        """d log w_k / d log ell = 1/2 − omega_k² ell²/2, shape (m, lanes)."""
        return 0.5 - 0.5 * (self.omega[:, None] * ell) ** 2

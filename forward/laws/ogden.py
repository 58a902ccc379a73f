"""Ogden laws of one to three terms. Ogden, Proc. R. Soc. A 326 (1972) 565.

W = sum over terms of mu/alpha (stretch^alpha + 2 stretch^(−alpha/2) − 3); a term adds stiffness at rest where
mu alpha > 0, the initial shear modulus being half the sum of mu alpha.
"""

from __future__ import annotations

import numpy as np

from pullback.forward.laws.base import Array, Parameter

# Signs follow the three terms that Ogden (1972) fitted to natural rubber: a main term, a small stiff one for large
# stretches, and a small one with a negative exponent.
_DEFAULTS = (
    (("lognormal", 0.6, 3.0), ("lognormal", 1.8, 1.5)),
    (("lognormal", 1e-3, 10.0), ("lognormal", 5.0, 1.3)),
    (("lognormal", -1e-2, 10.0), ("lognormal", -2.0, 1.3)),
)


class Ogden:
    """P = sum of mu (stretch^(alpha−1) − stretch^(−alpha/2−1))."""

    source = "R. W. Ogden, Proc. R. Soc. A 326 (1972) 565"

    def __init__(self, terms: int) -> None:
        self.terms = terms
        self.name = f"ogden-{terms}"
        self.parameters = tuple(
            p
            for k, (mu, alpha) in enumerate(_DEFAULTS[:terms], 1)
            for p in (
                Parameter(f"mu{k}", "MPa", f"modulus of term {k}", mu),
                Parameter(f"alpha{k}", "", f"exponent of term {k}", alpha),
            )
        )

    def stress(self, stretch: Array, theta: Array) -> Array:
        """P, see the class."""
        log = np.log(stretch)
        total = np.zeros(())
        for mu, alpha in self._pairs(theta):
            total = total + mu * (np.exp((alpha - 1.0) * log) - np.exp((-0.5 * alpha - 1.0) * log))
        return total

    def stress_and_slope(self, stretch: Array, theta: Array) -> tuple[Array, Array]:
        """P, and dP/dstretch = sum of mu ((alpha−1) stretch^(alpha−2) + (alpha/2+1) stretch^(−alpha/2−2))."""
        log, r = np.log(stretch), 1.0 / stretch
        stress, slope = np.zeros(()), np.zeros(())
        for mu, alpha in self._pairs(theta):
            up = mu * np.exp((alpha - 1.0) * log)
            down = mu * np.exp((-0.5 * alpha - 1.0) * log)
            stress = stress + (up - down)
            slope = slope + ((alpha - 1.0) * up + (0.5 * alpha + 1.0) * down) * r
        return stress, slope

    def stress_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dP/dmu and dP/dalpha of each term in turn."""
        log = np.log(stretch)
        rows = []
        for mu, alpha in self._pairs(theta):
            up, down = np.exp((alpha - 1.0) * log), np.exp((-0.5 * alpha - 1.0) * log)
            rows += [up - down + 0.0 * mu, mu * log * (up + 0.5 * down)]
        return np.stack(rows)

    def energy(self, stretch: Array, theta: Array) -> Array:
        """W, see the module."""
        log = np.log(stretch)
        total = np.zeros(())
        for mu, alpha in self._pairs(theta):
            total = total + mu / alpha * (np.expm1(alpha * log) + 2.0 * np.expm1(-0.5 * alpha * log))
        return total

    def energy_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dW/dmu and dW/dalpha of each term in turn."""
        log = np.log(stretch)
        rows = []
        for mu, alpha in self._pairs(theta):
            up, down = np.exp(alpha * log), np.exp(-0.5 * alpha * log)
            psi = (np.expm1(alpha * log) + 2.0 * np.expm1(-0.5 * alpha * log)) / alpha
            rows += [psi + 0.0 * mu, mu / alpha * (log * (up - down) - psi)]
        return np.stack(rows)

    def _pairs(self, theta: Array) -> list[tuple[Array, Array]]:
        return [(theta[2 * k], theta[2 * k + 1]) for k in range(self.terms)]

"""Yeoh law: W = c10 i + c20 i² + c30 i³, i = stretch² + 2/stretch − 3. Yeoh, Rubber Chem. Technol. 66 (1993) 754."""

from __future__ import annotations

import numpy as np

from pullback.forward.laws.base import Array, Parameter


class Yeoh:
    """P = 2 d (c10 + 2 c20 i + 3 c30 i²) with d = stretch − stretch⁻² = (di/dstretch)/2."""

    name = "yeoh"
    source = "O. H. Yeoh, Rubber Chem. Technol. 66 (1993) 754"
    parameters = (
        Parameter("c10", "MPa", "half the initial shear modulus", ("lognormal", 0.3, 3.0)),
        Parameter("c20", "MPa", "softening after small strain", ("normal", 0.0, 0.01)),
        Parameter("c30", "MPa", "stiffening at large strain", ("lognormal", 2e-4, 4.0)),
    )

    def stress(self, stretch: Array, theta: Array) -> Array:
        """P = 2 d (c10 + 2 c20 i + 3 c30 i²)."""
        i = stretch**2 + 2.0 / stretch - 3.0
        return 2.0 * (stretch - stretch**-2) * (theta[0] + i * (2.0 * theta[1] + 3.0 * theta[2] * i))

    def stress_and_slope(self, stretch: Array, theta: Array) -> tuple[Array, Array]:
        """P, and dP/dstretch = 2 (1 + 2 stretch⁻³)(c10 + 2 c20 i + 3 c30 i²) + 4 d² (2 c20 + 6 c30 i)."""
        r = 1.0 / stretch
        r2 = r * r
        d = stretch - r2
        i = stretch * stretch + 2.0 * r - 3.0
        cubic = 3.0 * theta[2] * i
        quadratic = 2.0 * theta[1]
        f = 2.0 * (theta[0] + i * (quadratic + cubic))
        return d * f, (1.0 + 2.0 * r * r2) * f + 4.0 * d * d * (quadratic + 2.0 * cubic)

    def stress_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """2 d (1, 2 i, 3 i²)."""
        i = stretch**2 + 2.0 / stretch - 3.0 + 0.0 * theta[0]
        d = 2.0 * (stretch - stretch**-2)
        return np.stack((d + 0.0 * i, 2.0 * d * i, 3.0 * d * i * i))

    def energy(self, stretch: Array, theta: Array) -> Array:
        """W = c10 i + c20 i² + c30 i³."""
        i = stretch**2 + 2.0 / stretch - 3.0
        return i * (theta[0] + i * (theta[1] + i * theta[2]))

    def energy_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """(i, i², i³)."""
        i = stretch**2 + 2.0 / stretch - 3.0 + 0.0 * theta[0]
        return np.stack((i, i * i, i**3))


LAW = Yeoh()

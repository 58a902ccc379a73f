"""Neo-Hookean law: W = mu/2 (stretch² + 2/stretch − 3). Treloar, Trans. Faraday Soc. 40 (1944) 59."""

from __future__ import annotations

from pullback.forward.laws.base import Array, Parameter


class NeoHookean:
    """P = mu (stretch − stretch⁻²)."""

    name = "neo-hookean"
    source = "L. R. G. Treloar, Trans. Faraday Soc. 40 (1944) 59"
    parameters = (Parameter("mu", "MPa", "initial shear modulus", ("lognormal", 0.6, 3.0)),)

    def stress(self, stretch: Array, theta: Array) -> Array:
        """P = mu (stretch − stretch⁻²)."""
        return theta[0] * (stretch - stretch**-2)

    def stress_and_slope(self, stretch: Array, theta: Array) -> tuple[Array, Array]:
        """P, and dP/dstretch = mu (1 + 2 stretch⁻³)."""
        r = 1.0 / stretch
        r2 = r * r
        return theta[0] * (stretch - r2), theta[0] * (1.0 + 2.0 * r * r2)

    def stress_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dP/dmu."""
        return (stretch - stretch**-2 + 0.0 * theta[0])[None]

    def energy(self, stretch: Array, theta: Array) -> Array:
        """W = mu/2 (stretch² + 2/stretch − 3)."""
        return theta[0] * self.energy_by_parameter(stretch, theta)[0]

    def energy_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dW/dmu."""
        return (0.5 * (stretch**2 + 2.0 / stretch - 3.0) + 0.0 * theta[0])[None]


LAW = NeoHookean()

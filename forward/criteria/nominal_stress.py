"""Nominal stress: axial force over the unstretched section."""

from __future__ import annotations

from pullback.forward.criteria.base import Array


class NominalStress:
    """s = P, MPa."""

    name = "nominal stress"
    unit = "MPa"
    by_stress = True

    def measure(self, stretch: Array, stress: Array) -> Array:
        """P."""
        return stress

    def by_stretch(self, stretch: Array, slope: Array) -> Array:
        """dP/dstretch."""
        return slope


CRITERION = NominalStress()

"""Elongation: stretch − 1."""

from __future__ import annotations

import numpy as np

from pullback.forward.criteria.base import Array


class Elongation:
    """s = stretch − 1."""

    name = "elongation"
    unit = ""
    by_stress = False

    def measure(self, stretch: Array, stress: Array) -> Array:
        """stretch − 1."""
        return stretch - 1.0

    def by_stretch(self, stretch: Array, slope: Array) -> Array:
        """One."""
        return np.ones_like(stretch)


CRITERION = Elongation()

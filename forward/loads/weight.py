"""The part's own weight along its axis: density times section times g per unstretched length."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

STANDARD_GRAVITY = 9806.65
"""mm/s², the standard acceleration of gravity (3rd CGPM, 1901)."""

FORCE_UNIT = 1e-6
"""N per g mm/s²: grams, millimetres and seconds are not coherent with newtons."""


@dataclass(frozen=True)
class Weight:
    """Weight towards the pulled end, `g` in mm/s²; negative g where the held end is below."""

    g: float = STANDARD_GRAVITY

    def nodal(self, h: Array, area: Array, density: Array) -> Array:
        """Half of each element's weight on each of its nodes, N."""
        return _to_nodes(0.5 * FORCE_UNIT * self.g * density * h * area)

    def area_pull_back(self, adjoint: Array, h: Array, density: Array) -> Array:
        """See `Load.area_pull_back`."""
        return 0.5 * FORCE_UNIT * self.g * density * h * (adjoint[:-1] + adjoint[1:])

    def nodal_change(self, h: Array, area_change: Array, density: Array) -> Array:
        """Weight is linear in the section."""
        return self.nodal(h, area_change, density)


def _to_nodes(half: Array) -> Array:
    nodal = np.zeros((half.shape[0] + 1, *half.shape[1:]))
    nodal[:-1] += half
    nodal[1:] += half
    return nodal

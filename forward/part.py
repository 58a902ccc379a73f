"""The unstretched part: nodes along its axis, a section in each element, its density."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Part:
    """A part of n two-node elements.

    `nodes` (n+1,) mm, rising from the held end; `area` (n,) mm², the unstretched section at each element's middle;
    `density` g/mm³. Raises ValueError where nodes do not rise, or a section or the density is not positive and finite.
    """

    nodes: Array
    area: Array
    density: float = 0.0

    def __init__(self, nodes: ArrayLike, area: ArrayLike, density: float = 0.0) -> None:
        x, a = np.asarray(nodes, float), np.asarray(area, float)
        if x.ndim != 1 or x.size < 2 or not np.all(np.isfinite(x)) or np.any(np.diff(x) <= 0.0):
            raise ValueError("nodes must be a rising, finite sequence of at least two stations (mm)")
        if a.shape != (x.size - 1,):
            raise ValueError(f"area needs one section per element, {x.size - 1}; got shape {a.shape}")
        if not np.all(np.isfinite(a)) or np.any(a <= 0.0):
            raise ValueError("every section must be positive and finite (mm²)")
        if not np.isfinite(density) or density < 0.0:
            raise ValueError(f"density must be zero or positive and finite (g/mm³); got {density}")
        object.__setattr__(self, "nodes", x)
        object.__setattr__(self, "area", a)
        object.__setattr__(self, "density", float(density))

    @property
    def length(self) -> float:
        """Unstretched length, mm."""
        return float(self.nodes[-1] - self.nodes[0])

    @property
    def mass(self) -> float:
        """Mass, g."""
        return float(self.density * np.sum(self.area * np.diff(self.nodes)))

"""The contract of an axial load spread along the part.

Nodal forces have shape (nodes, steps, lanes), areas (elements, 1, lanes), density a scalar or (lanes,). Every load
here is dead: it does not depend on the shape the part takes.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


class Load(Protocol):
    """An axial load, positive towards the pulled end."""

    def nodal(self, h: Array, area: Array, density: Array) -> Array:
        """Force on each node (N); `h` (elements, 1, 1) mm."""

    def area_pull_back(self, adjoint: Array, h: Array, density: Array) -> Array:
        """Sum over nodes of adjoint times d nodal / d area of each element."""

    def nodal_change(self, h: Array, area_change: Array, density: Array) -> Array:
        """Change of `nodal` for a change of the areas."""

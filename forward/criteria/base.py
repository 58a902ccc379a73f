"""The contract of a failure criterion's measure: what is compared with the strength at each section."""

from __future__ import annotations

from typing import Protocol

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


class Criterion(Protocol):
    """A measure s of how far a section is loaded, rising with its stretch where the law is stable."""

    name: str
    unit: str
    by_stress: bool
    """Whether the measure depends on the law beyond the stretch, through the nominal stress."""

    def measure(self, stretch: Array, stress: Array) -> Array:
        """s for stretch and nominal stress (MPa) of any one shape."""

    def by_stretch(self, stretch: Array, slope: Array) -> Array:
        """ds/dstretch, `slope` being dP/dstretch (MPa)."""

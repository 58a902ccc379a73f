"""How the pulled end is driven, one value a load step; the other end is held at its station."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray


@dataclass(frozen=True)
class Travel:
    """The pulled end is moved by `values` (steps,) mm from its unstretched place."""

    values: NDArray[np.float64]

    def __init__(self, values: ArrayLike) -> None:
        object.__setattr__(self, "values", np.atleast_1d(np.asarray(values, float)))


@dataclass(frozen=True)
class Force:
    """The pulled end is drawn by a force of `values` (steps,) N."""

    values: NDArray[np.float64]

    def __init__(self, values: ArrayLike) -> None:
        object.__setattr__(self, "values", np.atleast_1d(np.asarray(values, float)))


End = Travel | Force

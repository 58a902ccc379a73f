"""Extrapolation to zero element size, and the observed order of convergence."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

EVEN = (2, 4, 6, 8)
"""Powers of the element size in the error of a quantity that is symmetric about its place."""

ALL = (2, 3, 4, 5)
"""Powers in the error of a quantity extrapolated to an end."""


def extrapolate(values: Sequence[float], powers: Sequence[int]) -> float:
    """Limit of values computed with n, 2n, 4n, … elements whose error is a series in these powers of the size."""
    row = np.array(values, float)
    for power in powers[: len(values) - 1]:
        row = (2.0**power * row[1:] - row[:-1]) / (2.0**power - 1.0)
    return float(row[-1])


def order(coarse: float, fine: float, exact: float) -> float:
    """Observed order: log2 of the ratio of the errors with n and 2n elements."""
    return float(np.log2(abs(coarse - exact) / abs(fine - exact)))

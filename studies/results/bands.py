"""Medians and credible bands of draws."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

LEVEL = 0.95


def band(draws: Array) -> Array:
    """Lower end, median and upper end of the 95 % interval, along the first axis; draws lie along the last."""
    ends = 0.5 * (1.0 - LEVEL)
    return np.quantile(draws, [ends, 0.5, 1.0 - ends], axis=-1)


def columns(draws: Array, quantity: str, unit: str = "") -> dict[str, Array]:
    """Columns `<quantity> median|lower|upper [unit]` of a table, one row an entry of `draws` (rows, draws)."""
    lower, median, upper = band(draws)
    tail = f" [{unit}]" if unit else ""
    found = {"median": median, "lower": lower, "upper": upper}
    return {f"{quantity} {which}{tail}": values.ravel() for which, values in found.items()}


def interval(draws: Array) -> dict[str, Any]:
    """`median`, `interval` and `level` of one quantity's draws (draws,)."""
    lower, median, upper = band(draws)
    return {"median": float(median), "interval": [float(lower), float(upper)], "level": LEVEL}

"""Coupons with an elongation or a stress at break that no rubber has."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.screen.base import place
from pullback.studies.study import Rows, Study

Array = NDArray[np.float64]
ELONGATION = (0.2, 15.0)
STRESS = (0.3, 80.0)


def find(study: Study) -> list[str]:
    """Columns whose median lies outside of what rubbers reach; the first row stands for all."""
    if study.strength is None:
        return []
    c = study.strength.coupons
    return [
        *_outside(c.rows, 100.0 * c.elongation, [100.0 * e for e in ELONGATION], "elongation at break", "%"),
        *_outside(c.rows, c.stress, list(STRESS), "nominal stress at break", "MPa"),
    ]


def _outside(rows: Rows, values: Array, limits: list[float], name: str, unit: str) -> list[str]:
    read = np.flatnonzero(np.isfinite(values))
    if not read.size or limits[0] <= (middle := float(np.median(values[read]))) <= limits[1]:
        return []
    return [
        f"{place(rows, int(read[0]))} and on: {name} is about {middle:.3g} {unit}; rubbers have {limits[0]:g} to "
        f"{limits[1]:g} {unit}. Look at the column's unit."
    ]

"""What the findings share: where a reading stands, and its step's rows."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pullback.studies.study import Gauge, MarksTable, Pull, Rows

Array = NDArray[np.float64]
SIGMAS = 3.0
"""What a gauge's error alone reaches once in 700 readings; beyond, a reading is looked into."""


def place(rows: Rows, k: int | np.integer[Any]) -> str:
    """File and line of a row."""
    return f"{rows.file}, line {rows.line[k]}"


def steps_of(marks: MarksTable) -> Iterator[tuple[str, NDArray[np.int64]]]:
    """Each step with its rows in the order of stations."""
    labels = np.array(marks.step)
    for step in dict.fromkeys(marks.step):
        rows = np.flatnonzero(labels == step)
        yield step, rows[np.argsort(marks.station[rows], kind="stable")]


def sigma(gauge: Gauge | None, reading: Array) -> Array:
    """Standard uncertainty of readings, zero without a gauge."""
    return np.zeros_like(reading) if gauge is None else gauge.sigma(reading)


def largest_force(pull: Pull) -> float | None:
    """The largest force read (N), or None."""
    read = pull.readings.force[np.isfinite(pull.readings.force)]
    return float(read.max()) if read.size else None

"""Checks that every table with stations shares."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.tables.table import Table

Array = NDArray[np.float64]
TOLERANCE = 1e-9  # of the length: what a change of units may round


def read_stations(table: Table, length: float) -> Array:
    """The stations (rows,) mm, each within 0…length; raises BadInput for those outside."""
    station = table.numbers("station", "length")
    slack = TOLERANCE * length
    outside = (station < -slack) | (station > length + slack)
    table.faults_where(outside, "station", lambda k: f"{station[k]:g} mm", f"a station within 0…{length:g} mm")
    return np.clip(station, 0.0, length)


def once(table: Table, station: Array, step: list[str] | None = None) -> None:
    """Raise BadInput for each station that stands twice (in one step)."""
    seen: set[tuple[str, float]] = set()
    twice = np.zeros(station.size, dtype=bool)
    for k, x in enumerate(station):
        place = (step[k] if step else "", float(x))
        twice[k] = place in seen
        seen.add(place)
    where = (lambda k: f' in step "{step[k]}"') if step else (lambda k: "")
    table.faults_where(twice, "station", lambda k: f"{station[k]:g} mm twice{where(k)}", "each station once")

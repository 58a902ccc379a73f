"""What an outline is between its stations: area, local width, and where it is steep."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.forward.outline import Outline
from pullback.studies.study import OutlineTable

Array = NDArray[np.float64]
STEEP = 0.25  # change of a width per length


def outline_of(table: OutlineTable) -> Outline:
    """The outline as the forward model takes it."""
    if table.area is not None:
        return Outline(table.station, (table.area,))
    assert table.width is not None
    if table.thickness is None:
        return Outline(table.station, (table.width, table.width), 0.25 * np.pi)
    return Outline(table.station, (table.width, table.thickness))


def area_at(outline: OutlineTable, station: Array) -> Array:
    """Nominal area (mm²) at any stations (mm)."""
    return outline_of(outline).area(station)


def width_at(outline: OutlineTable, station: Array) -> Array:
    """Local width (mm): width, diameter, or the side of a square of the area."""
    if outline.width is None:
        return np.sqrt(area_at(outline, station))
    return np.interp(station, outline.station, outline.width)


def steep_segments(outline: OutlineTable) -> list[tuple[float, float]]:
    """(from, to) in mm of each run between two rows where a width or the thickness changes by more than 1:4."""
    sides = [width_at(outline, outline.station)] + ([] if outline.thickness is None else [outline.thickness])
    run = np.diff(outline.station)
    slope = np.max([np.abs(np.diff(side)) / run for side in sides], axis=0)
    steep = np.flatnonzero(slope > STEEP * (1.0 + 1e-9))
    return [(float(outline.station[k]), float(outline.station[k + 1])) for k in steep]


def volume(outline: OutlineTable) -> float:
    """Nominal volume (mm³): Simpson's rule is exact for the product of two linear columns."""
    x = outline.station
    middle = 0.5 * (x[1:] + x[:-1])
    a, m = area_at(outline, x), area_at(outline, middle)
    return float(np.sum(np.diff(x) * (a[:-1] + 4.0 * m + a[1:]) / 6.0))

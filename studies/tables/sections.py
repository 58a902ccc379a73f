"""Measured sections, unstretched."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import BadInput, Fault
from pullback.studies.study import Gauge, Gauges, SectionsTable
from pullback.studies.tables.areas import COLUMNS, AreaColumns, read_areas
from pullback.studies.tables.stations import read_stations
from pullback.studies.tables.table import Table

Array = NDArray[np.float64]
KNOWN = ("station", *COLUMNS)


def read_sections(table: Table, length: float, gauges: Gauges) -> SectionsTable:
    """Areas with their relative standard uncertainty; the same station may be measured several times.

    Raises BadInput where the gauge of what was read is not given.
    """
    table.require("station")
    station, columns = read_stations(table, length), read_areas(table)
    area = _area(columns)
    return SectionsTable(station, area, _relative_error(columns, area, gauges), table.rows)


def _area(columns: AreaColumns) -> Array:
    if columns.area is not None:
        return columns.area
    if columns.diameter is not None:
        return np.asarray(0.25 * np.pi * columns.diameter**2)
    assert columns.width is not None and columns.thickness is not None
    return columns.width * columns.thickness


def _relative_error(columns: AreaColumns, area: Array, gauges: Gauges) -> Array:
    """From the gauges of the lengths read, to first order (JCGM 100:2008, 5.1.6), else that of the section."""
    if (
        columns.width is not None
        and columns.thickness is not None
        and gauges.width_reading
        and gauges.thickness_reading
    ):
        width, thickness = (
            _relative(gauges.width_reading, columns.width),
            _relative(gauges.thickness_reading, columns.thickness),
        )
        return np.hypot(width, thickness)
    if columns.diameter is not None and gauges.width_reading:
        return 2.0 * _relative(gauges.width_reading, columns.diameter)
    if gauges.section_reading:
        return _relative(gauges.section_reading, area)
    wanted = "section_reading" if columns.area is not None else "width_reading"
    missing = [wanted] + ["thickness_reading"] * (columns.width is not None)
    expected = "the gauge of a reading that is present, here of sections"
    raise BadInput(
        [Fault(key=f"gauges.{g}", read="nothing", expected=expected) for g in missing if not getattr(gauges, g)]
    )


def _relative(gauge: Gauge, reading: Array) -> Array:
    return gauge.sigma(reading) / reading

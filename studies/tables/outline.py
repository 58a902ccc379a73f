"""The outline: the nominal section along the part."""

from __future__ import annotations

import numpy as np

from pullback.studies.faults import BadInput
from pullback.studies.study import OutlineTable, Rows
from pullback.studies.tables.areas import COLUMNS, read_areas
from pullback.studies.tables.stations import TOLERANCE, once, read_stations
from pullback.studies.tables.table import Table

KNOWN = ("station", *COLUMNS)


def read_outline(table: Table, length: float) -> OutlineTable:
    """Rows in the order of stations, which must reach from 0 to `length` (mm)."""
    table.require("station")
    station = read_stations(table, length)
    once(table, station)
    areas = read_areas(table)
    low, high = int(np.argmin(station)), int(np.argmax(station))
    slack = TOLERANCE * length
    if station[low] > slack or station[high] < length - slack:
        row = low if station[low] > slack else high
        read = f"stations from {station[low]:g} to {station[high]:g} mm"
        raise BadInput(table.fault(row, "station", read, f"an outline from 0 to the part's length, {length:g} mm"))
    order = np.argsort(station)
    width = areas.diameter if areas.width is None else areas.width
    width, thickness, area = (None if a is None else a[order] for a in (width, areas.thickness, areas.area))
    return OutlineTable(station[order], width, thickness, area, Rows(table.file, table.line[order]))

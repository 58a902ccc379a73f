"""Mark positions, long (step, station, position) or wide (station, then one column per step)."""

from __future__ import annotations

import numpy as np

from pullback.studies.study import MarksTable, Rows
from pullback.studies.tables.stations import once, read_stations
from pullback.studies.tables.table import Table

KNOWN = ("step", "station", "position")


def is_wide(table: Table) -> bool:
    """Whether each column beside the station is a step."""
    return not table.has("step") and not table.has("position")


def read_marks(table: Table, length: float) -> MarksTable:
    """One row a reading; a missing position is a mark that was not read in that step."""
    return _wide(table, length) if is_wide(table) else _long(table, length)


def _long(table: Table, length: float) -> MarksTable:
    table.require(*KNOWN)
    step, station = table.labels("step"), read_stations(table, length)
    once(table, station, step)
    position = table.numbers("position", "length", missing=True)
    kept = np.isfinite(position)
    steps = tuple(s for s, k in zip(step, kept, strict=True) if k)
    return MarksTable(steps, station[kept], position[kept], Rows(table.file, table.line[kept]))


def _wide(table: Table, length: float) -> MarksTable:
    table.require("station")
    station = read_stations(table, length)
    once(table, station)
    steps = [h for h in table.headings if h.name not in ("station", "piece")]
    columns = [table.numbers(h.name, "length", missing=True) for h in steps]
    if not columns:
        table.require(*KNOWN)
    position = np.concatenate(columns)
    kept = np.isfinite(position)
    labels = np.repeat([_label(h.text, h.unit) for h in steps], station.size)[kept]
    rows = Rows(table.file, np.tile(table.line, len(steps))[kept])
    return MarksTable(tuple(str(s) for s in labels), np.tile(station, len(steps))[kept], position[kept], rows)


def _label(text: str, unit: str | None) -> str:
    """A step's label as it stands in the heading, without its unit."""
    bare = text.rstrip("]) ")
    return (
        bare[: -len(unit)].rstrip("[( ").strip()
        if unit and text.rstrip()[-1:] in "])" and bare.endswith(unit)
        else text
    )

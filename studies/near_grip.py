"""Marks near grips and steep slopes of the outline, where the stress is not uniform over the section."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import BadInput, Fault
from pullback.studies.outline_geometry import steep_segments, width_at
from pullback.studies.study import MarksTable, OutlineTable, Rows

Array = NDArray[np.float64]


def is_near(outline: OutlineTable, length: float, station: Array) -> NDArray[np.bool_]:
    """Which stations lie within their own local width of a grip or of a slope steeper than 1:4, or on such a slope."""
    width = width_at(outline, station)
    near = (station < width) | (length - station < width)
    for start, end in steep_segments(outline):
        near |= np.maximum(start - station, station - end) < width
    return near


def leave_out(marks: MarksTable, outline: OutlineTable, length: float) -> tuple[MarksTable, list[str]]:
    """The marks that are not near, and a sentence naming the stations left out.

    Raises BadInput where no mark is left.
    """
    near = is_near(outline, length, marks.station)
    if not near.any():
        return marks, []
    if near.all():
        read = f"{near.size} readings, all within one local width of a grip or of a slope steeper than 1:4"
        remedy = 'Set near_grip = "keep" in [[pull]] to read them all the same.'
        raise BadInput(Fault(file=marks.rows.file, read=read, expected="marks farther away", remedy=remedy))
    kept = ~near
    steps = tuple(s for s, k in zip(marks.step, kept, strict=True) if k)
    rest = MarksTable(steps, marks.station[kept], marks.position[kept], Rows(marks.rows.file, marks.rows.line[kept]))
    stations = ", ".join(f"{x:g}" for x in np.unique(marks.station[near]))
    why = "within one local width of a grip or of a slope steeper than 1:4"
    return rest, [f"{marks.rows.file}: {near.sum()} mark readings left out, {why}: stations {stations} mm"]

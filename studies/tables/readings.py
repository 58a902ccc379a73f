"""Travel and force of each step."""

from __future__ import annotations

import numpy as np

from pullback.studies.faults import BadInput, Fault
from pullback.studies.study import ReadingsTable
from pullback.studies.tables.table import Table

KNOWN = ("step", "travel", "force")


def read_readings(table: Table, driven_by: str, marked: set[str]) -> ReadingsTable:
    """One row a step; a missing cell only where marks were read in that step (`marked`).

    Driven by travel, both columns are needed; driven by force, travel may be left out.
    """
    needed = ("step", "force") if driven_by == "force" else KNOWN
    table.require(*needed)
    step = table.labels("step")
    first = {label: k for k, label in reversed(list(enumerate(step)))}
    twice = np.array([first[label] < k for k, label in enumerate(step)])
    table.faults_where(twice, "step", lambda k: f'the step "{step[k]}" twice', "each step once")
    values = {
        c: table.numbers(c, d, missing=True) for c, d in (("travel", "length"), ("force", "force")) if table.has(c)
    }
    unread = np.array([label not in marked for label in step])
    faults: list[Fault] = []
    for column in needed[1:]:
        for k in np.flatnonzero(np.isnan(values[column]) & unread):
            wanted = f'a number, as no marks were read in step "{step[k]}"'
            faults.append(table.fault(int(k), column, "a missing cell", wanted))
    if faults:
        raise BadInput(faults)
    absent = np.full(len(step), np.nan)
    return ReadingsTable(tuple(step), values.get("travel", absent), values["force"], table.rows)

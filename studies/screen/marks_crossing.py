"""Marks that have changed places within a step."""

from __future__ import annotations

import numpy as np

from pullback.studies.screen.base import place, steps_of
from pullback.studies.study import Study


def find(study: Study) -> list[str]:
    """Pairs of neighbouring marks whose positions do not rise with their stations."""
    found = []
    for marks in (p.marks for p in study.pulls if p.marks is not None):
        for step, rows in steps_of(marks):
            for k in np.flatnonzero(np.diff(marks.position[rows]) <= 0.0):
                a, b = rows[k], rows[k + 1]
                found.append(
                    f'{place(marks.rows, b)}: in step "{step}" the mark of station {marks.station[b]:g} mm lies at '
                    f"{marks.position[b]:g} mm, not beyond that of station {marks.station[a]:g} mm at "
                    f"{marks.position[a]:g} mm. Look whether the two were exchanged or one misread."
                )
    return found

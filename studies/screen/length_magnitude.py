"""Lengths that do not go together: mm against inches and the like."""

from __future__ import annotations

import numpy as np

from pullback.studies.screen.base import place, steps_of
from pullback.studies.study import Pull, Study

_FACTORS = {25.4: "inches against mm", 1.0 / 25.4: "mm against inches", 10.0: "cm against mm", 0.1: "mm against cm"}
_LARGEST_STRETCH = 12.0  # beyond what any rubber reaches
_LITTLE = 2.0  # mm of growth below which the ratio says nothing


def find(study: Study) -> list[str]:
    """Travels that the marks contradict by a factor of units, and travels beyond what rubber stretches."""
    return [s for pull in study.pulls for s in (*_against_marks(study, pull), *_too_far(study, pull))]


def _against_marks(study: Study, pull: Pull) -> list[str]:
    """Compares each travel with the growth of the stations up to the outermost mark, scaled to the whole length."""
    marks, r = pull.marks, pull.readings
    if marks is None:
        return []
    for step, rows in reversed(list(steps_of(marks))):
        last = rows[-1]
        if step not in r.step or marks.station[last] < 0.5 * study.part.length:
            continue
        k = r.step.index(step)
        growth = (marks.position[last] - marks.station[last]) * study.part.length / marks.station[last]
        if not np.isfinite(r.travel[k]) or growth < _LITTLE or r.travel[k] <= 0.0:
            continue
        ratio = growth / r.travel[k]
        for factor, what in _FACTORS.items():
            if 0.6 < ratio / factor < 1.6:
                return [
                    f'{place(r.rows, k)}: in step "{step}" the travel is {r.travel[k]:g} mm, but the marks '
                    f"({place(marks.rows, last)}) say about {growth:.4g} mm. Look at the units: {what}?"
                ]
        return []
    return []


def _too_far(study: Study, pull: Pull) -> list[str]:
    r = pull.readings
    if not np.isfinite(r.travel).any():
        return []
    k = int(np.nanargmax(r.travel))
    stretch = 1.0 + r.travel[k] / study.part.length
    if stretch <= _LARGEST_STRETCH:
        return []
    return [
        f"{place(r.rows, k)}: a travel of {r.travel[k]:g} mm stretches the part of {study.part.length:g} mm to "
        f"{stretch:.1f} times its length. Look at the units of travel and length."
    ]

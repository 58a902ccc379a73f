"""Lengths between marks that are shorter under load than without."""

from __future__ import annotations

import numpy as np

from pullback.studies.screen.base import SIGMAS, place, sigma, steps_of
from pullback.studies.study import Pull, Study


def find(study: Study) -> list[str]:
    """Neighbouring marks with a mean stretch below 1 by more than their gauges explain, but in unloaded steps."""
    found = []
    for pull in study.pulls:
        marks = pull.marks
        if marks is None:
            continue
        idle = _unloaded(study, pull)
        error = np.hypot(
            sigma(study.gauges.mark_reading, marks.position), sigma(study.gauges.mark_placement, marks.station)
        )
        for step, rows in steps_of(marks):
            if step in idle:
                continue
            apart, now = np.diff(marks.station[rows]), np.diff(marks.position[rows])
            slack = SIGMAS * np.hypot(error[rows[1:]], error[rows[:-1]])
            for k in np.flatnonzero((now < apart - slack) & (now > 0.0)):
                a, b = rows[k], rows[k + 1]
                found.append(
                    f'{place(marks.rows, b)}: in step "{step}" the mean stretch between stations '
                    f"{marks.station[a]:g} and {marks.station[b]:g} mm is {now[k] / apart[k]:.3f}, below 1. "
                    "Look for a misread mark, or positions in another unit."
                )
    return found


def _unloaded(study: Study, pull: Pull) -> set[str]:
    """Steps in which travel or force is no more than its gauge's error."""
    r, g = pull.readings, study.gauges
    with np.errstate(invalid="ignore"):
        no_travel = np.abs(r.travel) <= SIGMAS * (sigma(g.travel_reading, r.travel) + sigma(g.travel_zero, r.travel))
        no_force = np.abs(r.force) <= SIGMAS * (sigma(g.force_reading, r.force) + sigma(g.force_zero, r.force))
    return {s for s, idle in zip(r.step, no_travel | no_force, strict=True) if idle}

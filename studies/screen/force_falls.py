"""Force that falls while travel rises."""

from __future__ import annotations

from itertools import pairwise

import numpy as np

from pullback.studies.screen.base import SIGMAS, place, sigma
from pullback.studies.study import Study


def find(study: Study) -> list[str]:
    """Steps whose force is lower than the step's before by more than the gauge explains, at a larger travel."""
    found = []
    for r in (p.readings for p in study.pulls):
        rows = np.flatnonzero(np.isfinite(r.travel) & np.isfinite(r.force))
        error = sigma(study.gauges.force_reading, r.force)
        for a, b in pairwise(rows):
            slack = SIGMAS * np.hypot(error[a], error[b])
            if r.travel[b] > r.travel[a] and r.force[b] < r.force[a] - slack:
                found.append(
                    f'{place(r.rows, b)}: force falls from {r.force[a]:g} to {r.force[b]:g} N from step "{r.step[a]}" '
                    f'to "{r.step[b]}", while travel rises from {r.travel[a]:g} to {r.travel[b]:g} mm. Look for a slip '
                    "in a grip, a tear, or a misread value."
                )
    return found

"""Measured sections far from the outline."""

from __future__ import annotations

import numpy as np

from pullback.studies.outline_geometry import area_at
from pullback.studies.screen.base import place
from pullback.studies.study import Study

FAR = 0.15
"""Several times what lots and parts usually depart from their drawing."""


def find(study: Study) -> list[str]:
    """Sections that depart from the outline by more than 15 %."""
    found = []
    for s in (p.sections for p in study.pulls if p.sections is not None):
        nominal = area_at(study.part.outline, s.station)
        for k in np.flatnonzero(np.abs(s.area / nominal - 1.0) > FAR):
            found.append(
                f"{place(s.rows, k)}: the section at {s.station[k]:g} mm is {s.area[k]:.4g} mm², "
                f"{100 * (s.area[k] / nominal[k] - 1.0):+.0f} % from the outline's {nominal[k]:.4g} mm². "
                "Look at the reading, its unit, and the outline there."
            )
    return found

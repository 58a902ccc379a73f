"""Forces of a magnitude that no rubber of this section has: N against kN and the like."""

from __future__ import annotations

import numpy as np

from pullback.studies.outline_geometry import area_at
from pullback.studies.screen.base import place
from pullback.studies.study import Pull, Study

LOW, HIGH = 0.05, 20.0
"""Shear moduli (MPa) of soft gums and of the hardest rubbers, with room on both sides."""


def find(study: Study) -> list[str]:
    """Pulls whose forces, over the outline, ask for a shear modulus outside of what rubbers have."""
    found = []
    for pull in study.pulls:
        row = _row(pull)
        if row is None:
            continue
        modulus = _modulus(study, pull, row)
        if not LOW <= modulus <= HIGH:
            r = pull.readings
            found.append(
                f"{place(r.rows, row)}: {r.force[row]:g} N at a travel of {r.travel[row]:g} mm asks for a shear "
                f"modulus near {modulus:.3g} MPa; rubbers have {LOW:g} to {HIGH:g} MPa. "
                f"Look at the unit of force{_hint(modulus)}."
            )
    return found


def _row(pull: Pull) -> int | None:
    """The row of the largest travel that has a force, or None."""
    r = pull.readings
    usable = np.flatnonzero(np.isfinite(r.travel) & np.isfinite(r.force) & (r.travel > 0.0) & (r.force > 0.0))
    return int(usable[np.argmax(r.travel[usable])]) if usable.size else None


def _modulus(study: Study, pull: Pull, row: int) -> float:
    """Neo-Hookean modulus at the mean stretch: force over the harmonic mean section, by stretch − stretch⁻²."""
    at = np.linspace(0.0, study.part.length, 101)
    section = 1.0 / float(np.mean(1.0 / area_at(study.part.outline, at)))
    stretch = 1.0 + float(pull.readings.travel[row]) / study.part.length
    return float(pull.readings.force[row]) / section / (stretch - stretch**-2)


def _hint(modulus: float) -> str:
    if LOW <= modulus * 1000.0 <= HIGH:
        return ": it would fit if the values were kN"
    if LOW <= modulus / 1000.0 <= HIGH:
        return ": it would fit if the heading's kN were N"
    return ", and of the outline"

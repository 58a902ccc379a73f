"""A mass that does not fit the outline and the density."""

from __future__ import annotations

from pullback.studies.outline_geometry import volume
from pullback.studies.study import Study

FAR = 0.10


def find(study: Study) -> list[str]:
    """Pieces whose mass departs by more than 10 % from the outline's volume times the density."""
    found = []
    for pull in study.pulls:
        if pull.mass is None or study.part.density is None:
            continue
        free, nominal = pull.mass - pull.mass_outside, volume(study.part.outline) * study.part.density
        off = free / nominal - 1.0
        if abs(off) > FAR:
            found.append(
                f"study.toml, mass of {pull.piece}: {free:.4g} g between the grips is {100 * off:+.0f} % from "
                f"outline times density, {nominal:.4g} g. Look at both, at mass_outside, and at their units."
            )
    return found

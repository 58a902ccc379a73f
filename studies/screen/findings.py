"""All findings on a study's data, in the order in which they are worth looking at."""

from __future__ import annotations

from pullback.studies.screen import (
    coupon_magnitude,
    force_falls,
    force_magnitude,
    length_magnitude,
    marks_crossing,
    mass_off,
    sections_off,
    shortened,
)
from pullback.studies.study import Study

FINDINGS = (
    length_magnitude, force_magnitude, coupon_magnitude, marks_crossing, shortened, force_falls, sections_off, mass_off,
)  # fmt: skip


def screen(study: Study) -> list[str]:
    """What is suspicious in the readings: one sentence each, with file and row and what to look at."""
    return [sentence for finding in FINDINGS for sentence in finding.find(study)]

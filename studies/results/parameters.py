"""Posterior summary of every scalar unknown."""

from __future__ import annotations

from typing import Any

import numpy as np

from pullback.inverse.layout import Scalar
from pullback.studies.results.bands import interval
from pullback.studies.results.names import meaning
from pullback.studies.statement import Statement


def parameters(s: Statement) -> dict[str, dict[str, Any]]:
    """Per scalar unknown: meaning, unit, median, sd, interval, level, informed (null where the prior is flat), prior.

    Meaning and prior are in words, the prior's numbers in the unit.

    `informed` is 1 − posterior variance / prior variance in the coordinate whose prior is standard normal.
    """
    out = {}
    law, strength = s.calibration.model.law, s.study.strength
    criterion = strength.criterion if strength else ""
    for block in s.calibration.model.posterior.layout.blocks:
        if not isinstance(block, Scalar):
            continue
        draws = s.values[block.name]
        z = block.prior.coordinate(draws)
        informed = float(np.clip(1.0 - np.var(z), 0.0, 1.0)) if block.prior.proper else None
        found = {"meaning": meaning(block.name, law, criterion), "unit": block.unit} | interval(draws)
        found |= {"sd": float(np.std(draws)), "informed": informed}
        out[block.name] = found | {"prior": str(block.prior)}
    return out

"""[sampler]: how far sampling goes."""

from __future__ import annotations

from typing import Annotated, ClassVar

from pydantic import Field, PlainValidator

from pullback.studies.file.base import Section
from pullback.studies.file.values import PositiveNumber, chosen, counted

_LATER_MOVES = ("affine hamiltonian", "stretch", "differential evolution")


class SamplerSection(Section):
    """Effective draws, time, and the move."""

    reasons: ClassVar[dict[str, str]] = {
        "effective_samples": "sampler.effective_samples = 2000: puts 95 % intervals to a few per cent of their width",
        "max_minutes": "sampler.max_minutes = 30: longer than any single piece needs",
    }
    effective_samples: Annotated[int, PlainValidator(counted(100, 1_000_000))] = Field(default=2000)
    max_minutes: PositiveNumber = Field(default=30.0)
    move: Annotated[str, PlainValidator(chosen("hamiltonian", later=_LATER_MOVES))] = "hamiltonian"

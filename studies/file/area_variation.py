"""[part.area_variation]: how far real sections depart from the outline."""

from __future__ import annotations

from typing import Annotated, ClassVar

from pydantic import Field, PlainValidator

from pullback.inverse.priors import HalfNormal, LogNormal, Quantity
from pullback.studies.file.base import Section
from pullback.studies.file.distributions import Bounded, uncertain
from pullback.studies.file.values import RelativeDeviation

_SD = 'a relative standard deviation, as in "2 %"'
Spread = Annotated[Quantity, PlainValidator(uncertain("relative", Bounded, zero=True))]
# A half-normal length reaches zero, and would ask for endlessly many basis functions.
CorrelationLength = Annotated[Quantity, PlainValidator(uncertain("length", ("lognormal", "uniform")))]


class AreaVariationSection(Section):
    """Relative departures: of the lot, of each part, and along the length."""

    reasons: ClassVar[dict[str, str]] = {
        "lot": "part.area_variation.lot = 2 %: what moulds and calendered sheets usually hold",
        "part_to_part": "part.area_variation.part_to_part = 2 %: the usual scatter of cut and moulded parts",
        "spread": "part.area_variation.spread = half-normal 5 %: wide, so that the readings decide",
    }
    lot: RelativeDeviation = Field(default=0.02, description=_SD)
    part_to_part: RelativeDeviation = Field(default=0.02, description=_SD)
    spread: Spread = Field(
        default=HalfNormal(0.05), description='a relative spread, as in "4 %" or { halfnormal = ["5 %"] }'
    )
    correlation_length: CorrelationLength | None = Field(default=None, description='a length, as in "15 mm"')

    def correlation(self, length: float) -> Quantity:
        """The correlation length in mm, for a part of `length` mm."""
        return LogNormal(length / 8.0, 1.5) if self.correlation_length is None else self.correlation_length

    def assumed(self) -> list[str]:
        """As for every section; the correlation length's default depends on the part's length."""
        default = (
            "part.area_variation.correlation_length = log-normal, median an eighth of the length, geometric standard "
            "deviation 1.5: section changes over a good part of the length, neither from mark to mark nor as a whole"
        )
        return super().assumed() + ([default] if self.correlation_length is None else [])

"""[strength]: how parts break, learnt from coupons."""

from __future__ import annotations

from typing import Annotated, Any, ClassVar

from pydantic import Field, PlainValidator, model_validator

from pullback.inverse.priors import Proper
from pullback.studies.faults import BadInput, not_yet
from pullback.studies.file.base import Section
from pullback.studies.file.distributions import Bounded, distribution
from pullback.studies.file.values import Table, Volume, chosen

LATER_CRITERIA = ("true stress", "energy density", "tearing")
_MEASURE = {"elongation": "relative", "nominal stress": "stress"}
_FORMS = ("normal", *Bounded)


class PriorSection(Section):
    """Priors of the Weibull scale, in the criterion's unit, and modulus, a pure number; read by `priors`."""

    modulus: Any = None
    scale: Any = None


class StrengthSection(Section):
    """Criterion, family of the scatter, coupons."""

    later: ClassVar[tuple[str, ...]] = ("tearing_energy", "flaw_size")
    criterion: Annotated[str, PlainValidator(chosen("elongation", "nominal stress", later=LATER_CRITERIA))] = Field(
        description='"elongation" or "nominal stress"'
    )
    scatter: Annotated[str, PlainValidator(chosen("weibull", "lognormal"))] = Field(
        description='"weibull" or "lognormal"'
    )
    coupons: Table = Field(description='a CSV table, as in "coupons.csv"')
    coupon_volume: Volume | None = Field(default=None, description='a volume, as in "396 mm^3"')
    prior: PriorSection = Field(default=PriorSection(), description="a table with modulus and scale")

    def priors(self) -> tuple[Proper | None, Proper | None]:
        """(modulus, scale), None where not given; raises BadInput where one cannot be read."""
        if self.scatter == "lognormal" and self.prior.model_fields_set:
            raise BadInput(not_yet("a prior of lognormal strengths").at(key="prior"))
        return self._prior("modulus", "number"), self._prior("scale", _MEASURE[self.criterion])

    def _prior(self, key: str, dimension: str) -> Proper | None:
        given = getattr(self.prior, key)
        try:
            return None if given is None else distribution(given, dimension, _FORMS)
        except BadInput as bad:
            raise BadInput([f.at(key=f"prior.{key}") for f in bad.faults]) from None

    @model_validator(mode="after")
    def _priors_are_read(self) -> StrengthSection:
        self.priors()
        return self

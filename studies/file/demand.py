"""[[demand]]: what the part must carry."""

from __future__ import annotations

from typing import Annotated, ClassVar

from pydantic import Field, PlainValidator

from pullback.inverse.priors import Quantity, Varies
from pullback.studies.file.base import Section
from pullback.studies.file.distributions import uncertain
from pullback.studies.file.values import PositiveNumber, Words


class DemandSection(Section):
    """A force with its factor."""

    later: ClassVar[tuple[str, ...]] = ("travel", "least_tension", "at_travel", "service")
    reasons: ClassVar[dict[str, str]] = {"factor": "factor = 1: what is required is the demand itself"}
    name: Words = Field(description='a name, as in "hold-down"')
    force: Annotated[Quantity | Varies, PlainValidator(uncertain("force", varies=True))] = Field(
        description='a force, as in "75 N"'
    )
    factor: PositiveNumber = Field(default=1.0, description="a pure number, as in 1.5")

    def assumed(self) -> list[str]:
        """As for every section, under the demand's name."""
        return [f'demand "{self.name}": {reason}' for reason in super().assumed()]

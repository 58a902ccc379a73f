"""study.toml as a whole."""

from __future__ import annotations

from typing import ClassVar

from pydantic import Field, field_validator, model_validator

from pullback.studies.faults import BadInput, Fault, shown
from pullback.studies.file.base import Section
from pullback.studies.file.demand import DemandSection
from pullback.studies.file.gauges import GaugesSection
from pullback.studies.file.law import LawSection
from pullback.studies.file.part import PartSection
from pullback.studies.file.pull import PullSection
from pullback.studies.file.record import Record
from pullback.studies.file.sampler import SamplerSection
from pullback.studies.file.statement import StatementSection
from pullback.studies.file.strength import StrengthSection
from pullback.studies.file.study import StudySection


class StudyFile(Section):
    """All sections."""

    later: ClassVar[tuple[str, ...]] = ("curve", "service")
    study: StudySection = Field(description="a section [study] with title and seed")
    record: Record = Field(default={}, description="a section [record] of texts")
    part: PartSection = Field(description="a section [part] with length and outline")
    law: LawSection = Field(description='a section [law] with names, as in ["yeoh"]')
    pull: list[PullSection] = Field(description="a section [[pull]], in double brackets")
    gauges: GaugesSection = Field(default=GaugesSection(), description="a section [gauges]")
    strength: StrengthSection | None = Field(default=None, description="a section [strength]")
    demand: list[DemandSection] = Field(description="one or more sections [[demand]], in double brackets")
    statement: StatementSection = Field(default=StatementSection(), description="a section [statement]")
    sampler: SamplerSection = Field(default=SamplerSection(), description="a section [sampler]")

    @field_validator("pull")
    @classmethod
    def _one_pull(cls, pulls: list[PullSection]) -> list[PullSection]:
        if not pulls:
            raise BadInput(Fault(read="none", expected="one section [[pull]]"))
        if len(pulls) > 1:
            raise BadInput(Fault(read=f"{len(pulls)} pulls", expected="one; several pulls are not yet read"))
        return pulls

    @field_validator("demand")
    @classmethod
    def _named_demands(cls, demands: list[DemandSection]) -> list[DemandSection]:
        if not demands:
            raise BadInput(Fault(read="none", expected="at least one section [[demand]]"))
        names = [d.name for d in demands]
        twice = [i for i, name in enumerate(names) if name in names[:i]]
        if twice:
            raise BadInput(
                [Fault(key=f"[{i + 1}].name", read=shown(names[i]), expected="each name once") for i in twice]
            )
        return demands

    @model_validator(mode="after")
    def _strength_is_given(self) -> StudyFile:
        if self.strength is None:
            expected = "a section [strength], which a demand by force needs"
            raise BadInput(Fault(key="strength", read="nothing", expected=expected))
        return self

    def assumed(self) -> list[str]:
        """The defaults taken in all sections."""
        sections = (self.part.area_variation, self.law, *self.pull, *self.demand, self.statement, self.sampler)
        return [sentence for section in sections for sentence in section.assumed()]

"""[[pull]]: one pull of one piece."""

from __future__ import annotations

from typing import Annotated, ClassVar

from pydantic import Field, PlainValidator, model_validator

from pullback.studies.faults import BadInput, Fault
from pullback.studies.file.base import Section
from pullback.studies.file.gauges import GaugesSection
from pullback.studies.file.record import Record
from pullback.studies.file.values import Mass, MassOrNone, Table, Temperature, Time, Words, chosen


class PullSection(Section):
    """How the piece was pulled, and where its readings stand."""

    later: ClassVar[tuple[str, ...]] = (
        "broke", "survived", "length", "outline", "shape", "fixture_compliance", "spin", "bed", "drum", "gauge_lengths",
        "transverse",
    )  # fmt: skip
    reasons: ClassVar[dict[str, str]] = {
        "axis": 'pull.axis = "horizontal": the usual pull bench, where no weight acts along the part',
        "force_at": 'pull.force_at = "pulled end": the load cell rides on the crosshead in most machines',
        "tared": 'pull.tared = "without piece": the load cell is zeroed before the piece is hung in',
        "near_grip": 'pull.near_grip = "leave out": near grips and steep tapers stress is not uniform over the section',
    }
    piece: Words = Field(description='the piece\'s name, as in "P1"')
    driven_by: Annotated[str, PlainValidator(chosen("travel", "force"))] = Field(description='"travel" or "force"')
    axis: Annotated[str, PlainValidator(chosen("held end above", "held end below", "horizontal"))] = "horizontal"
    force_at: Annotated[str, PlainValidator(chosen("pulled end", "held end"))] = "pulled end"
    tared: Annotated[str, PlainValidator(chosen("without piece", "with piece"))] = "without piece"
    marks: Table | None = Field(default=None, description='a CSV table, as in "P1_marks.csv"')
    readings: Table = Field(description='a CSV table, as in "P1_readings.csv"')
    sections: Table | None = Field(default=None, description='a CSV table, as in "P1_sections.csv"')
    mass: Mass | None = Field(default=None, description='a mass, as in "6.93 g"')
    mass_outside: MassOrNone = Field(default=0.0, description='a mass, as in "2.1 g"')
    temperature: Temperature | None = Field(default=None, description='a temperature, as in "23 degC"')
    hold: Time | None = Field(default=None, description='a time, as in "1 min"')
    conditioned: Words | None = Field(default=None, description='"no", or how, as in "5 cycles to 150 %"')
    near_grip: Annotated[str, PlainValidator(chosen("leave out", "keep"))] = "leave out"
    origin: Annotated[str, PlainValidator(chosen("grip", later=("free",)))] = "grip"
    record: Record = Field(default={}, description="a table of texts")
    gauges: GaugesSection = Field(default=GaugesSection(), description="a table of gauges, as [gauges]")

    @model_validator(mode="after")
    def _mass_is_left(self) -> PullSection:
        if self.mass_outside and self.mass is None:
            raise BadInput(Fault(key="mass", read="nothing", expected="the mass that mass_outside is part of"))
        if self.mass is not None and self.mass_outside >= self.mass:
            read = f"{self.mass_outside:g} g of {self.mass:g} g"
            raise BadInput(Fault(key="mass_outside", read=read, expected="less than what was weighed in all"))
        return self

    def assumed(self) -> list[str]:
        """As for every section; near_grip only where marks are read."""
        return [s for s in super().assumed() if self.marks or not s.startswith("pull.near_grip")]

    def recorded(self) -> dict[str, str]:
        """The record, with what the pull's own keys tell of it."""
        own = {
            "temperature": self.temperature and f"{self.temperature - 273.15:.4g} degC",
            "conditioning": self.conditioned,
        }
        return {k: v for k, v in own.items() if v} | self.record

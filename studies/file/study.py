"""[study]: the title and the seed."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, PlainValidator

from pullback.studies.file.base import Section
from pullback.studies.file.values import Words, counted


class StudySection(Section):
    """What the study is called, and the seed from which every random draw follows."""

    title: Words = Field(description='a title, as in "Hold-down strap, lot 7"')
    seed: Annotated[int, PlainValidator(counted(0, 2**63 - 1))] = Field(description="a whole number, as in 7")

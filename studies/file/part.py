"""[part]: nominal geometry and material."""

from __future__ import annotations

import re
from typing import Annotated, ClassVar, NamedTuple

from pydantic import Field, PlainValidator

from pullback.studies.faults import BadInput, Fault, not_yet, shown
from pullback.studies.file.area_variation import AreaVariationSection
from pullback.studies.file.base import Section
from pullback.studies.file.values import Density, Length, Words, chosen, table

_HARDNESS = re.compile(r"([0-9]+(?:\.[0-9]+)?)\s+(Shore A|IRHD)")
_STANDARD = re.compile(r"(ISO|ASTM|DIN|BS|JIS|GB)\b|.*\b(type|die)\s", re.IGNORECASE)


class Hardness(NamedTuple):
    """A reading of hardness on its scale."""

    value: float
    scale: str


def read_hardness(value: object) -> Hardness:
    """Reads `"55 Shore A"` or `"55 IRHD"`, from 10 to 95."""
    found = _HARDNESS.fullmatch(value.strip()) if isinstance(value, str) else None
    if not found or not 10.0 <= float(found[1]) <= 95.0:
        raise BadInput(Fault(read=shown(value), expected='a hardness from 10 to 95, as in "55 Shore A" or "55 IRHD"'))
    return Hardness(float(found[1]), found[2])


def read_outline(value: object) -> str:
    """The path of the outline's table; a standard dumbbell's name is reserved."""
    if isinstance(value, str) and not value.lower().endswith(".csv") and _STANDARD.match(value):
        raise BadInput(not_yet(value, remedy="Give the outline as a CSV table."))
    return table(value)


class PartSection(Section):
    """The part, unstretched."""

    later: ClassVar[tuple[str, ...]] = ("thickness",)
    length: Length = Field(description='the unstretched length between the grips, as in "120 mm"')
    outline: Annotated[str, PlainValidator(read_outline)] = Field(description='a CSV table, as in "outline.csv"')
    shape: Annotated[str, PlainValidator(chosen("open", later=("closed",)))] = "open"
    density: Density | None = Field(default=None, description='a density, as in "1120 kg/m^3"')
    hardness: Annotated[Hardness, PlainValidator(read_hardness)] | None = None
    rubber: Words | None = Field(default=None, description='a rubber\'s letters, as in "NR"')
    area_variation: AreaVariationSection = Field(
        default=AreaVariationSection(), description="a table, [part.area_variation]"
    )

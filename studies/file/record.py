"""[record]: free text under any key, copied and never computed with; what is missing is listed."""

from __future__ import annotations

import datetime
from collections.abc import Iterable
from typing import Annotated

from pydantic import PlainValidator

from pullback.studies.faults import BadInput, Fault, shown

EXPECTED = (
    "laboratory", "date", "machine", "load_cell", "certificate", "temperature", "speed", "conditioning", "compound",
    "batch", "drawing",
)  # fmt: skip


def record(value: object) -> dict[str, str]:
    """The record's entries as text; raises BadInput for one that is a list or a table."""
    if not isinstance(value, dict):
        raise BadInput(Fault(read=shown(value), expected="a table of texts"))
    nested = [k for k, v in value.items() if not isinstance(v, str | int | float | datetime.date | datetime.time)]
    if nested:
        raise BadInput([Fault(key=k, read=shown(value[k]), expected="text in quotation marks") for k in nested])
    return {str(k): str(v).strip() for k, v in value.items()}


def not_recorded(record: dict[str, str], pulls: Iterable[dict[str, str]]) -> list[str]:
    """The expected entries that neither the study's record nor those of all its pulls hold."""
    pulls = list(pulls)
    return [k for k in EXPECTED if not record.get(k) and not (pulls and all(p.get(k) for p in pulls))]


Record = Annotated[dict[str, str], PlainValidator(record)]

"""[statement]: which guarantee is stated."""

from __future__ import annotations

from typing import Annotated, ClassVar

from pydantic import Field, PlainValidator

from pullback.studies.faults import BadInput, Fault, shown
from pullback.studies.file.base import Section
from pullback.studies.file.values import Share, chosen, share


def read_reliability(value: object) -> tuple[float, ...]:
    """One or several shares of parts, without repeats."""
    if not isinstance(value, list) or not value or len(value) > 10:
        raise BadInput(Fault(read=shown(value), expected="a list of shares, as in [0.90, 0.99]"))
    shares = tuple(share(v) for v in value)
    if len(set(shares)) < len(shares):
        raise BadInput(Fault(read=shown(value), expected="each share once"))
    return shares


class StatementSection(Section):
    """Shares of parts, the confidence, and of which parts."""

    reasons: ClassVar[dict[str, str]] = {
        "reliability": "statement.reliability = 0.90 and 0.99: with 95 % confidence the trade's usual pairs",
        "confidence": "statement.confidence = 0.95: the trade's usual level",
        "applies_to": 'statement.applies_to = "next part": a review asks for parts still to be made',
    }
    reliability: Annotated[tuple[float, ...], PlainValidator(read_reliability)] = Field(default=(0.90, 0.99))
    confidence: Share = Field(default=0.95)
    applies_to: Annotated[str, PlainValidator(chosen("next part", "pulled pieces"))] = "next part"

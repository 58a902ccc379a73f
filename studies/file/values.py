"""Single values of the study file: quantities, numbers, words, paths of tables."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Annotated

from pydantic import PlainValidator

from pullback.studies.faults import BadInput, Fault, nearest, not_yet, shown
from pullback.studies.units import is_usual, quantity


def bounded(value: float, text: object, low: float, high: float, open_low: bool, unit: str = "") -> float:
    """The value, or BadInput where it is outside of low…high (`open_low`: low itself is outside)."""
    if low < value < high or value == high or (value == low and not open_low):
        return value
    least = f"more than {low:g}" if open_low else f"at least {low:g}"
    most = f", at most {high:g}" if math.isfinite(high) else ""
    raise BadInput(Fault(read=shown(text), expected=f"a value of {least}{most}{unit}"))


def measured(dimension: str, zero: bool = False, high: float = math.inf) -> Callable[[object], float]:
    """Reader of a positive quantity (`zero`: or zero) of a dimension, in its unit inside."""
    return lambda text: bounded(quantity(text, dimension), text, 0.0, high, open_low=not zero)


def number(value: object) -> float:
    """A pure, finite number."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise BadInput(Fault(read=shown(value), expected="a pure number, without quotation marks"))
    if not is_usual(value):
        raise BadInput(Fault(read=shown(value), expected="a finite number of usual size"))
    return float(value)


def positive_number(value: object) -> float:
    """A pure number above zero."""
    return bounded(number(value), value, 0.0, math.inf, open_low=True)


def share(value: object) -> float:
    """A share between 0 and 1, both outside: 0.95 or "95 %"."""
    read = quantity(value, "relative") if isinstance(value, str) else number(value)
    if not 0.0 < read < 1.0:
        raise BadInput(Fault(read=shown(value), expected="a share between 0 and 1, as in 0.95"))
    return read


def counted(low: int, high: int) -> Callable[[object], int]:
    """Reader of a whole number from low to high."""

    def read(value: object) -> int:
        if isinstance(value, bool) or not isinstance(value, int):
            raise BadInput(Fault(read=shown(value), expected="a whole number, without quotation marks"))
        if not low <= value <= high:
            raise BadInput(Fault(read=shown(value), expected=f"a whole number from {low} to {high}"))
        return value

    return read


def chosen(*words: str, later: tuple[str, ...] = ()) -> Callable[[object], str]:
    """Reader of one of some words; those of `later` are reserved."""
    wanted = "one of " + ", ".join(f'"{w}"' for w in words) if len(words) > 1 else f'"{words[0]}"'

    def read(value: object) -> str:
        if isinstance(value, str) and value in words:
            return value
        if isinstance(value, str) and value in later:
            raise BadInput(not_yet(value, remedy=f"Give {wanted}."))
        near = nearest(value, [*words, *later]) if isinstance(value, str) else None
        raise BadInput(Fault(read=shown(value), expected=wanted, remedy=f'Did you mean "{near}"?' if near else ""))

    return read


def words(value: object) -> str:
    """Some text, not blank."""
    if not isinstance(value, str):
        raise BadInput(Fault(read=shown(value), expected="text in quotation marks"))
    if not value.strip():
        raise BadInput(Fault(read="empty text", expected="some text"))
    return value.strip()


def table(value: object) -> str:
    """The path of a CSV table."""
    path = words(value)
    if ".xlsx" in path.lower():
        raise BadInput(not_yet(path, remedy="Save the sheet as CSV."))
    return path


Words = Annotated[str, PlainValidator(words)]
Table = Annotated[str, PlainValidator(table)]
Length = Annotated[float, PlainValidator(measured("length"))]
Volume = Annotated[float, PlainValidator(measured("volume"))]
Density = Annotated[float, PlainValidator(measured("density"))]
Mass = Annotated[float, PlainValidator(measured("mass"))]
MassOrNone = Annotated[float, PlainValidator(measured("mass", zero=True))]
Time = Annotated[float, PlainValidator(measured("time"))]
Temperature = Annotated[float, PlainValidator(measured("temperature"))]
RelativeDeviation = Annotated[float, PlainValidator(measured("relative", zero=True, high=1.0))]
PositiveNumber = Annotated[float, PlainValidator(positive_number)]
Share = Annotated[float, PlainValidator(share)]

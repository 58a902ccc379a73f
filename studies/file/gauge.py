"""A gauge's error: a standard uncertainty, an expanded one with its factor, or a resolution."""

from __future__ import annotations

import math
from collections.abc import Callable

from pullback.studies.faults import BadInput, Fault, not_yet, shown, unknown
from pullback.studies.file.values import number
from pullback.studies.study import Gauge
from pullback.studies.units import DIMENSIONS, quantity

_FORMS = ("expanded", "resolution")


def gauge(dimension: str, relative: bool = True, zero: bool = False) -> Callable[[object], Gauge]:
    """Reader of a gauge: absolute in `dimension`, also in % where `relative`; `zero` says that it may be zero."""

    def read(value: object) -> Gauge:
        if not isinstance(value, dict):
            return _standard(value, dimension, relative, zero)
        if "infer" in value:
            raise BadInput(not_yet("infer", remedy="Give the standard uncertainty."))
        if len(value) != 1:
            raise BadInput(Fault(read=shown(value), expected=_wanted(dimension)))
        [(form, given)] = value.items()
        if form not in _FORMS:
            raise BadInput(unknown(form, _FORMS, "form"))
        return (
            _expanded(given, dimension, relative, zero)
            if form == "expanded"
            else _resolution(given, dimension, relative)
        )

    return read


def _standard(value: object, dimension: str, relative: bool, zero: bool) -> Gauge:
    in_percent = isinstance(value, str) and value.rstrip().endswith("%")
    if in_percent and not relative:
        raise BadInput(Fault(read=shown(value), expected=_wanted(dimension), remedy="A share has no meaning here."))
    size = quantity(value, "relative" if in_percent else dimension)
    if size < 0.0 or (size == 0.0 and not zero):
        raise BadInput(
            Fault(read=shown(value), expected=f"a standard uncertainty {'of zero or ' if zero else ''}above zero")
        )
    if in_percent and size > 1.0:
        raise BadInput(Fault(read=shown(value), expected="at most 100 %"))
    return Gauge(size, relative=in_percent)


def _expanded(given: object, dimension: str, relative: bool, zero: bool) -> Gauge:
    if not isinstance(given, list) or len(given) != 2:
        example = f'{{ expanded = ["{DIMENSIONS[dimension][2]}", 2] }}'
        raise BadInput(Fault(read=shown(given), expected=f"the expanded uncertainty and its factor, as in {example}"))
    factor = number(given[1])
    if not 1.0 <= factor <= 10.0:
        raise BadInput(Fault(read=shown(given[1]), expected="a coverage factor from 1 to 10, as in 2"))
    full = _standard(given[0], dimension, relative, zero)
    return Gauge(full.value / factor, full.relative)


def _resolution(given: object, dimension: str, relative: bool) -> Gauge:
    """Rectangular over the full width a: standard uncertainty a/√12 (JCGM 100:2008, 4.3.7)."""
    width = _standard(given, dimension, relative, zero=False)
    return Gauge(width.value / math.sqrt(12.0), width.relative)


def _wanted(dimension: str) -> str:
    example = DIMENSIONS[dimension][2]
    forms = f'{{ expanded = ["{example}", 2] }}, or {{ resolution = "{example}" }}'
    return f'a standard uncertainty, as in "{example}", or {forms}'

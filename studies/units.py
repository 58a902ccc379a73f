"""Quantities with their units: a printed, closed list of unit names, read with pint.

A unit is a listed name, with a whole power (`mm2`, `mm^2`, `mm²`), or a product or quotient of such (`kg/m3`, `N*mm`).
No other prefixes and no other names. Inside are N, mm, MPa, g, s and K.
"""

from __future__ import annotations

import re
from functools import cache
from typing import Any

from pullback.studies.faults import BadInput, Fault, listed, nearest, shown

# Listed name -> the name by which pint knows it.
NAMES = {
    "mm": "millimeter", "cm": "centimeter", "m": "meter", "um": "micrometer", "in": "inch", "ft": "foot",
    "N": "newton", "kN": "kilonewton", "kgf": "kilogram_force", "lbf": "pound_force", "ozf": "ounce_force",
    "Pa": "pascal", "kPa": "kilopascal", "MPa": "megapascal", "psi": "pound_force / inch ** 2",
    "ksi": "1000 * pound_force / inch ** 2",
    "mg": "milligram", "g": "gram", "kg": "kilogram", "lb": "pound", "oz": "ounce",
    "s": "second", "min": "minute", "h": "hour", "day": "day", "week": "week", "year": "year",
    "K": "kelvin", "degC": "degC", "degF": "degF",
}  # fmt: skip

# Dimension -> (unit inside, as pint; its spelling; an example; the spellings that are printed).
DIMENSIONS: dict[str, tuple[str, str, str, tuple[str, ...]]] = {
    "length": ("millimeter", "mm", "120 mm", ("mm", "cm", "m", "um", "in", "ft")),
    "area": ("millimeter ** 2", "mm^2", "36 mm^2", ("mm^2", "cm^2", "m^2", "in^2")),
    "volume": ("millimeter ** 3", "mm^3", "396 mm^3", ("mm^3", "cm^3", "m^3", "in^3")),
    "force": ("newton", "N", "75 N", ("N", "kN", "kgf", "lbf", "ozf")),
    "stress": ("megapascal", "MPa", "0.3 MPa", ("MPa", "kPa", "Pa", "N/mm^2", "kgf/cm^2", "psi", "ksi")),
    "mass": ("gram", "g", "6.93 g", ("g", "mg", "kg", "lb", "oz")),
    "density": (
        "gram / millimeter ** 3",
        "g/mm^3",
        "1120 kg/m^3",
        ("kg/m^3", "g/cm^3", "g/mm^3", "lb/in^3", "lb/ft^3"),
    ),
    "time": ("second", "s", "1 min", ("s", "min", "h", "day", "week", "year")),
    "temperature": ("kelvin", "K", "23 degC", ("degC", "degF", "K")),
    "relative": ("dimensionless", "1", "2 %", ("%",)),
}

# What is often written -> the listed name, by itself or inside a product.
_MEANT = {
    "c": "degC", "°c": "degC", "celsius": "degC", "deg c": "degC", "f": "degF", "°f": "degF", "fahrenheit": "degF",
    "lbs": "lb", "pound": "lb", "pounds": "lb", "ounce": "oz", "ounces": "oz", "inch": "in", "inches": "in", "''": "in",
    "foot": "ft", "feet": "ft", "µm": "um", "μm": "um", "micron": "um", "percent": "%", "pct": "%", "sec": "s",
    "second": "s", "seconds": "s", "minute": "min", "minutes": "min", "hr": "h", "hrs": "h", "hour": "h", "hours": "h",
    "d": "day", "days": "day", "weeks": "week", "yr": "year", "years": "year", "a": "year", "newton": "N", "kp": "kgf",
    "gram": "g", "grams": "g", "lbm": "lb", "meter": "m", "metre": "m",
}  # fmt: skip
_FORCE_OF_MASS = {"lb": "lbf", "kg": "kgf", "oz": "ozf"}
LARGEST = 1e15
_NUMBER = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")
_COMMA = re.compile(r"[+-]?[0-9]+(?:,[0-9]+)+")
_FACTOR = re.compile(r"([A-Za-z]+)(?:(?:\^|\*\*)?([1-9]))?")
_SUPERSCRIPT = str.maketrans("²³", "23")


def spellings() -> dict[str, list[tuple[str, float]]]:
    """The printed list: by dimension, each spelling with its factor to the unit inside (temperatures: of a degree)."""
    return {name: [(s, conversion(s, name)[0]) for s in printed] for name, (_, _, _, printed) in DIMENSIONS.items()}


def quantity(text: object, dimension: str) -> float:
    """The value of `"120 mm"` in the unit inside of its dimension (a key of DIMENSIONS).

    Raises BadInput, with the right spelling, where the text is no number with a unit of that dimension.
    """
    if not isinstance(text, str):
        what = (
            "a number without its unit" if isinstance(text, int | float) and not isinstance(text, bool) else "no text"
        )
        raise BadInput(
            Fault(read=f"{shown(text)}, {what}", expected=_wanted(dimension), remedy=_in_quotes(text, dimension))
        )
    number, unit = _split(text.strip().replace("−", "-"), dimension)
    try:
        factor, offset = conversion(unit, dimension)
    except BadInput as bad:
        fault = bad.faults[0]
        remedy = f'Write "{number:g} {fault.remedy}".' if fault.remedy else f"Read are {_printed(dimension)}."
        raise BadInput(Fault(read=shown(text), expected=fault.expected, remedy=remedy)) from None
    value = number * factor + offset
    if not is_usual(value):
        raise BadInput(Fault(read=shown(text), expected=f"a finite number of usual size; {_wanted(dimension)}"))
    return value


def is_usual(value: float) -> bool:
    """Whether a value is zero or of a size that can be computed with, from 1e-15 to 1e15 in the unit inside."""
    return value == 0.0 or 1.0 / LARGEST <= abs(value) <= LARGEST


@cache
def conversion(unit: str, dimension: str) -> tuple[float, float]:
    """(factor, offset) with value inside = factor · value + offset.

    Raises BadInput whose fault's `remedy` is the bare right spelling of the unit, empty where none is known.
    """
    if dimension == "relative" and unit == "%":
        return 0.01, 0.0
    inside = DIMENSIONS[dimension][0]
    factors = _factors(unit, dimension)
    if _dimensionality(factors) != _pint().Unit(inside).dimensionality:
        raise _unit_fault(f"a unit of {dimension}, not {shown(unit)}", _respelt(unit, dimension))
    if factors == (("degC", 1),):
        return 1.0, 273.15
    if factors == (("degF", 1),):
        return 5.0 / 9.0, 459.67 * 5.0 / 9.0
    return float(f"{_product(factors).to(inside).magnitude:.15g}"), 0.0  # 15 digits: exact factors stay exact


def is_unit(text: str) -> bool:
    """Whether the text is a unit of the list, or made of such."""
    try:
        return text == "%" or bool(_factors(text, ""))
    except BadInput:
        return False


def _split(text: str, dimension: str) -> tuple[float, str]:
    """Number and unit of a quantity."""
    if found := _COMMA.match(text):
        remedy = _without_comma(text, found.end())
        raise BadInput(Fault(read=shown(text), expected="a decimal point, not a comma", remedy=remedy))
    found = _NUMBER.match(text)
    if not found:
        finite = "a finite number; " if re.match(r"[+-]?(inf|nan)", text, re.IGNORECASE) else ""
        raise BadInput(Fault(read=shown(text), expected=finite + _wanted(dimension)))
    unit = text[found.end() :].strip()
    if not unit:
        raise BadInput(Fault(read=f"{shown(text)}, without a unit", expected=_wanted(dimension)))
    return float(found.group()), unit


def _without_comma(text: str, end: int) -> str:
    """What to write instead; a comma before a point, or several, part thousands, one before three digits perhaps."""
    number, rest = text[:end], text[end:]
    thousands, point = number.replace(",", "") + rest, number.replace(",", ".") + rest
    if number.count(",") > 1 or "." in rest.split(" ")[0]:
        return f'Write "{thousands}".'
    either = f' or "{thousands}"' if len(number.split(",")[1]) == 3 else ""
    return f'Write "{point}"{either}.'


def _factors(unit: str, dimension: str) -> tuple[tuple[str, int], ...]:
    """A unit as names with powers; raises as `conversion` does."""
    plain = unit.translate(_SUPERSCRIPT).replace("·", "*").replace("**", "^").strip()
    parts = re.split(r"\s*([*/])\s*", plain)
    if len(parts) > 9:
        raise _unit_fault(f"a simpler unit, not {shown(unit)}", "")
    found = []
    for sign, part in zip(["*", *parts[1::2]], parts[::2], strict=True):
        match = _FACTOR.fullmatch(part)
        if not match or match[1] not in NAMES:
            raise _unit_fault(f"a unit that is read, not {shown(unit)}", _respelt(unit, dimension))
        found.append((match[1], int(match[2] or 1) * (1 if sign == "*" else -1)))
    return tuple(found)


def _product(factors: tuple[tuple[str, int], ...]) -> Any:
    result = _pint().Quantity(1.0, "dimensionless")
    for name, power in factors:
        result = result * _unit(name) ** power
    return result


def _dimensionality(factors: tuple[tuple[str, int], ...]) -> Any:
    if any(name.startswith("deg") for name, _ in factors):
        return _pint().Unit("kelvin").dimensionality if len(factors) == 1 and factors[0][1] == 1 else None
    return _product(factors).dimensionality


@cache
def _unit(name: str) -> Any:
    return _pint().Quantity(1.0, "dimensionless") * _pint().parse_expression(NAMES[name])


@cache
def _pint() -> Any:
    """pint's registry, imported when the first unit is read: it takes a third of a second."""
    import pint

    return pint.UnitRegistry()


def _respelt(unit: str, dimension: str) -> str:
    """The listed spelling of that dimension which was probably meant, or an empty string."""
    if dimension == "relative" and unit.startswith("%"):
        return "%"
    named = re.sub(r"°\s*[A-Za-z]|[^\W\d]+|''", lambda m: _meant(m[0]), unit)
    weighed = re.sub("[A-Za-z]+", lambda m: _FORCE_OF_MASS.get(m[0], m[0]), named)  # lb, kg/cm2 meant as a force
    for candidate in (named, weighed):
        if candidate != unit and _fits(candidate, dimension):
            return "psi" if candidate.translate(_SUPERSCRIPT).replace("^", "") == "lbf/in2" else candidate
    return ""


def _fits(unit: str, dimension: str) -> bool:
    if unit == "%":
        return dimension == "relative"
    if not dimension or not is_unit(unit):
        return False
    return bool(_dimensionality(_factors(unit, dimension)) == _pint().Unit(DIMENSIONS[dimension][0]).dimensionality)


def _meant(word: str) -> str:
    if word in NAMES:
        return word
    low = word.lower().replace(" ", "")
    by_lower = {n.lower(): n for n in NAMES}
    return _MEANT.get(low) or by_lower.get(low) or (nearest(word, NAMES) if len(word) > 3 else None) or word


def _unit_fault(expected: str, right: str) -> BadInput:
    return BadInput(Fault(expected=expected, remedy=right))


def _wanted(dimension: str) -> str:
    article = "an" if dimension == "area" else "a"
    noun = "share" if dimension == "relative" else dimension
    return f'{article} {noun} with its unit, as in "{DIMENSIONS[dimension][2]}"'


def _printed(dimension: str) -> str:
    return listed(DIMENSIONS[dimension][3])


def _in_quotes(value: object, dimension: str) -> str:
    unit = DIMENSIONS[dimension][2].split(" ", 1)[1]
    number = isinstance(value, int | float) and not isinstance(value, bool)
    return f'Write it as text with its unit, as in "{value} {unit}".' if number and dimension != "relative" else ""

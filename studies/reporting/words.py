"""How the report writes numbers and says that one is absent.

A number with an uncertainty gets two significant digits of that uncertainty and no more; a guaranteed value is rounded
down, never up; an absent number is written as its reason.
"""

from __future__ import annotations

import math
import re
from collections.abc import Sequence
from typing import Any, TypeGuard

MINUS, NO_BREAK, THIN = "\u2212", "\u00a0", "\u202f"
DASH = "\u2013"
_POWERS = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")
_UNITS = {"mm^2": "mm²", "mm^3": "mm³", "1": "", "-": "", "N/mm^2": "MPa"}

MET = {"met": "met", "not met": "not met", "not shown": "not shown"}
SIGN = {"met": "✓", "not met": "✕", "not shown": "?"}
STATE = {
    "stated": "Stated: the evidence carries this sentence.",
    "withheld": "Withheld: the evidence does not carry a statement.",
}
QUICK = "Quick approximation: no posterior was sampled. Never a statement."


def unit(name: str) -> str:
    """A unit as printed: `mm^2` becomes mm²; empty for a pure number."""
    return _UNITS.get(name, name)


def is_number(value: Any) -> TypeGuard[float]:
    """Whether a value is there and finite."""
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)


def fixed(value: float, decimals: int) -> str:
    """`value` with so many decimals (negative: rounded to tens, hundreds), a true minus sign and thousands apart."""
    rounded = round(value, decimals) + 0.0
    text = f"{abs(rounded):_.{max(decimals, 0)}f}"
    whole, _, rest = text.partition(".")
    whole = whole.replace("_", THIN) if len(whole) > 5 else whole.replace("_", "")
    return (MINUS if rounded < 0 else "") + whole + (f".{rest}" if rest else "")


def number(value: Any, digits: int = 3) -> str:
    """A number without uncertainty, to so many significant digits; a dash where it is absent."""
    if not is_number(value):
        return DASH
    if value == 0 or (isinstance(value, int) and abs(value) < 10**9):
        return fixed(value, 0)
    exponent = _exponent(value, digits)
    if -4 <= exponent < 6:
        return fixed(value, max(digits - 1 - exponent, 0))
    return _with_power(fixed(value / 10.0**exponent, digits - 1), exponent)


def _exponent(value: float, digits: int) -> int:
    """Power of ten of the leading digit once rounded to so many digits."""
    return int(f"{abs(value):.{digits - 1}e}".partition("e")[2])


def _with_power(text: str, exponent: int) -> str:
    return f"{text}{NO_BREAK}×{NO_BREAK}10{str(exponent).translate(_POWERS)}"


def decimals(uncertainty: float, digits: int = 2) -> int:
    """Decimals that show so many significant digits of an uncertainty > 0."""
    return digits - 1 - _exponent(uncertainty, digits)


def estimate(median: Any, sd: Any, interval: Sequence[Any] | None) -> tuple[str, str, str]:
    """Median, standard deviation and interval as text, all to two significant digits of the uncertainty.

    The uncertainty is `sd`, or a quarter of the interval's width. Absent parts come out as dashes.
    """
    ends = list(interval) if interval is not None else [None, None]
    uncertainty = _uncertainty(sd, ends)
    if uncertainty is None:
        return number(median), number(sd), between(*(number(end) for end in ends))
    places = decimals(uncertainty)
    largest = max(abs(v) for v in [median, sd, *ends] if is_number(v))
    exponent = _exponent(largest, 3) if largest > 0 and (places > 5 or largest >= 1e6) else 0
    texts = [_scaled(v, places, exponent) for v in (median, sd, *ends)]
    span = between(texts[2], texts[3])
    if not exponent:
        return texts[0], texts[1], span
    powered = [_with_power(t, exponent) if t != DASH else t for t in texts[:2]]
    return powered[0], powered[1], _with_power(f"({span})", exponent) if span != DASH else DASH


def _uncertainty(sd: Any, ends: Sequence[Any]) -> float | None:
    if is_number(sd) and sd > 0:
        return float(sd)
    if all(is_number(end) for end in ends) and ends[1] > ends[0]:
        return float(ends[1] - ends[0]) / 4.0
    return None


def _scaled(value: Any, places: int, exponent: int) -> str:
    return fixed(value / 10.0**exponent, places + exponent) if is_number(value) else DASH


def between(lower: str, upper: str) -> str:
    """`lower to upper`, or one dash where neither is there."""
    return DASH if lower == DASH and upper == DASH else f"{lower}{NO_BREAK}to{NO_BREAK}{upper}"


def percent(value: Any, places: int = 1, signed: bool = False) -> str:
    """A fraction in percent; a dash where it is absent."""
    if not is_number(value):
        return DASH
    text = fixed(100.0 * value, places)
    plus = "+" if signed and value > 0 and text.strip("0.") else ""
    return f"{plus}{text}{NO_BREAK}%"


def share(value: Any) -> str:
    """A share such as 0.9, 0.95 or 0.999 in percent with the digits it was given."""
    return f"{100.0 * value:.6g}{NO_BREAK}%" if is_number(value) else DASH


def margin_band(median: Any, interval: Sequence[Any] | None) -> tuple[str, str]:
    """Median margin and its band in percent, to two significant digits of the band's uncertainty."""
    ends = [100.0 * end if is_number(end) else None for end in interval or (None, None)]
    centre = 100.0 * median if is_number(median) else None
    middle, _, span = estimate(centre, None, ends)
    sign = "+" if is_number(centre) and centre > 0 and middle != "0" else ""
    return _percented(sign + middle), _percented(span)


def _percented(text: str) -> str:
    return text if text == DASH else f"{text}{NO_BREAK}%"


def floor_percent(value: Any) -> str:
    """A guaranteed margin in percent, rounded down to a tenth."""
    if not is_number(value):
        return DASH
    down = math.floor(round(1000.0 * value, 6)) / 10.0
    return ("+" if down > 0 else "") + fixed(down, 1) + NO_BREAK + "%"


def floor_load(value: Any, required: float) -> str:
    """A guaranteed load rounded down, to three digits or as many more as show that it reaches `required`."""
    if not is_number(value):
        return DASH
    places = max(2 - _exponent(value, 3), 0) if value > 0 else 1
    while True:
        down = math.floor(round(value * 10.0**places, 6)) / 10.0**places
        if value < required or down >= required or places >= 6:
            return fixed(down, places)
        places += 1


def given(value: float) -> str:
    """A number that somebody chose, with the digits it was chosen with (at most six)."""
    text = f"{value:.6g}"
    return number(value, 6) if "e" in text else text.replace("-", MINUS)


def found(value: Any) -> str:
    """A number that a rule looked at, to at most four significant digits and no closing zeros."""
    return given(float(f"{value:.4g}")) if is_number(value) else DASH


def plain(text: str) -> str:
    """A rule's text with the unknowns' names as words: `P1 field[12]` is a coefficient, `force_scale` two words."""
    text = re.sub(r"(\S+) field\[(\d+)\]", r"coefficient \2 of the section of \1", text)
    return re.sub(r"(?<=[a-z])_(?=[a-z])", " ", re.sub(r"(?<=\s)-(?=[\d.])", MINUS, text))


def ceil_percent(value: float) -> str:
    """An upper bound in percent, rounded up to two digits."""
    places = max(1 - _exponent(100.0 * value, 2), 0) if value > 0 else 0
    up = math.ceil(round(100.0 * value * 10.0**places, 6)) / 10.0**places
    return fixed(up, places) + NO_BREAK + "%"


def law(name: str) -> str:
    """A law's name as printed: neo-hookean becomes Neo-Hookean."""
    return name.title()


def withheld(reason: str | None) -> str:
    """Why a number is not there."""
    return f"withheld: {reason}" if reason else "not given by the results"


def demand_result(margin: dict[str, Any]) -> str:
    """`met` where every guaranteed value reaches the demand; otherwise the worst of `not met`, `not shown`."""
    found = [entry.get("met", "not shown") for entry in margin["guaranteed"]]
    if not found or ("not shown" in found and "not met" not in found):
        return "not shown"
    return "not met" if "not met" in found else "met"


def overall_result(margins: Sequence[dict[str, Any]]) -> str:
    """The worst result over all demands; `not shown` where there is none."""
    found = [demand_result(margin) for margin in margins]
    return next((worst for worst in ("not met", "not shown", "met") if worst in found), "not shown")

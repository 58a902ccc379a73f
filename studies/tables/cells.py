"""One cell of a table: missing, a number with a point or a comma, or neither."""

from __future__ import annotations

import re

_MISSING = {"", "-", "n/a", "nan"}
_NUMBER = re.compile(r"[+-]?(?:[0-9]+[.,]?[0-9]*|[.,][0-9]+)(?:[eE][+-]?[0-9]+)?")
_INFINITE = re.compile(r"[+-]?inf(inity)?", re.IGNORECASE)


def is_missing(cell: str) -> bool:
    """Whether the cell stands for a reading that was not taken."""
    return cell.lower() in _MISSING


def is_number(cell: str) -> bool:
    """Whether the cell is one number, with a decimal point or a decimal comma."""
    return bool(_NUMBER.fullmatch(cell.replace("−", "-")))


def number(cell: str) -> float:
    """The cell's number; raises ValueError, with what was expected, where it is none or is not finite."""
    plain = cell.replace("−", "-")
    if _INFINITE.fullmatch(plain):
        raise ValueError("a finite number")
    if not _NUMBER.fullmatch(plain):
        raise ValueError("a number")
    return float(plain.replace(",", "."))

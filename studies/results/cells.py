"""Text cells that a spreadsheet would take for a formula, made harmless; and the way back."""

from __future__ import annotations

import pandas as pd

_STARTS = ("=", "+", "-", "@", "\t", "\r", "'")
QUOTE = "'"


def defused(table: pd.DataFrame) -> pd.DataFrame:
    """The table with a quotation mark before every text that begins like a formula; numbers stay as they are.

    A text that begins with the mark itself gets another one, so that `original` has every text back.
    """
    text = [name for name in table.columns if table[name].map(lambda cell: isinstance(cell, str)).any()]
    return table.assign(**{name: table[name].map(_defused) for name in text})


def original(cell: str) -> str:
    """The text that `defused` was given."""
    return cell[1:] if cell.startswith(QUOTE) else cell


def _defused(cell: object) -> object:
    if isinstance(cell, str) and cell.startswith(_STARTS) and not _number(cell):
        return QUOTE + cell
    return cell


def _number(cell: str) -> bool:
    try:
        float(cell)
    except ValueError:
        return False
    return True

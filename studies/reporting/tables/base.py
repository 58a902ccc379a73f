"""What a table is to the page."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


@dataclass(frozen=True)
class Table:
    """Rows of ready text under headings.

    `text` gives the places of columns that hold words and stand left; all others hold numbers and stand right.
    `empty` says why there are no rows.
    """

    title: str
    heads: tuple[str, ...]
    rows: Sequence[tuple[str, ...]] = ()
    text: tuple[int, ...] = (0,)
    note: str = ""
    empty: str = "The results hold no such numbers."

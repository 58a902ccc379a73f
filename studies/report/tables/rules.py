"""The verdict's rules, each with its number and its limit."""

from __future__ import annotations

from typing import Any

from pullback.studies.report import words
from pullback.studies.report.load import ResultsFolder
from pullback.studies.report.tables.base import Table

_PASSED = {True: "✓ kept", False: "✕ broken", None: "does not apply"}


def rules(folder: ResultsFolder) -> Table:
    """One row a rule; all must be kept for a statement."""
    found = folder.results["verdict"].get("rules", [])
    rows = [
        (r["rule"], r["text"], words.found(r.get("number")), limit(r.get("limit")), _PASSED[r["passed"]]) for r in found
    ]
    heads = ("Rule", "What is looked at", "Found", "Limit", "Outcome")
    return Table("Rules of the verdict", heads, rows, (0, 1, 4), "A statement needs every rule kept.")


def limit(found: Any) -> str:
    """A limit, or the range between two."""
    if isinstance(found, list):
        return f"{words.NO_BREAK}to{words.NO_BREAK}".join(words.given(end) for end in found)
    return words.given(found) if words.is_number(found) else words.DASH

"""The verdict's rules, each with its number and its limit."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_PASSED = {True: "✓ kept", False: "✕ broken", None: "does not apply"}


_SHARES = ("stable", "prior")
"""Rules whose numbers are shares, shown in percent."""


def rules(folder: ResultsFolder) -> Table:
    """One row a rule; all must be kept for a statement."""
    rows = [_row(r) for r in folder.results["verdict"].get("rules", [])]
    heads = ("Rule", "What was found", "Number", "Limit", "Outcome")
    note = "A statement needs every rule kept. The prior's change may exceed its limit by its Monte Carlo error."
    return Table("Rules of the verdict", heads, rows, (0, 1, 4), note)


def _row(r: dict[str, Any]) -> tuple[str, ...]:
    number, most = r.get("number"), r.get("limit")
    if r["rule"] in _SHARES:
        number, bound = words.percent(number, 2), words.percent(most, 1)
    else:
        number, bound = words.found(number), limit(most)
    if words.is_number(most):
        bound = f"{_side(r['rule'], most)}{words.NO_BREAK}{bound}"
    return r["rule"], words.plain(r["text"]), number, bound, _PASSED[r["passed"]]


def _side(rule: str, most: float) -> str:
    """Effective draws and a small p are bounded from below, all else from above."""
    below = (rule == "sampled" and most > 2.0) or (rule == "fits" and most < 0.5)
    return f"at{words.NO_BREAK}{'least' if below else 'most'}"


def limit(found: Any) -> str:
    """A limit, or the range between two."""
    if isinstance(found, list):
        return f"{words.NO_BREAK}to{words.NO_BREAK}".join(words.given(end) for end in found)
    return words.given(found) if words.is_number(found) else words.DASH

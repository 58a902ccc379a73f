"""Loads at failure: of each pulled piece and of the next part."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_NOTE = (
    "Predicted: for one part, scatter and ignorance together. A share's load: the load below which that share of "
    "parts fails, with the credible interval of what is not known. A pulled piece "
    "enters as it was measured, and has held its last step; its share is the chance that this piece fails."
)


def capacities(folder: ResultsFolder) -> Table:
    """One row for each prediction and for each quantile."""
    parts = {"next part": (folder.results["next_part"] or {"capacity": []})["capacity"]}
    parts |= {f"piece {name}": piece["capacity"] for name, piece in folder.results["pieces"].items()}
    rows = [row for part, found in parts.items() for capacity in found for row in _rows(part, capacity)]
    heads = ("Part", "What", "Median", "Interval", "Level", "Unit")
    return Table("Capacity", heads, rows, (0, 1, 5), _NOTE)


def _rows(part: str, capacity: dict[str, Any]) -> list[tuple[str, ...]]:
    name = part + (f", {capacity['service']}" if capacity["service"] else "")
    found = [_row(name, f"{capacity['measure'].replace('_', ' ')} at failure, predicted", capacity, capacity["unit"])]
    for quantile in capacity.get("quantiles", []):
        share = words.share(quantile["share"])
        what = f"load below which {share} fail" if part == "next part" else f"load below which it fails: {share} chance"
        found.append(_row(name, what, quantile, capacity["unit"]))
    return found


def _row(part: str, what: str, found: dict[str, Any], unit: str) -> tuple[str, ...]:
    median, _, span = words.estimate(found["median"], None, found["interval"])
    if median == words.DASH:
        span = words.withheld(found.get("reason"))
    return part, what, median, span, words.share(found["level"]), words.unit(unit)

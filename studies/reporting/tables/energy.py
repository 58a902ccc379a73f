"""Elastic energy that a stretched part holds, for the recoil caution."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_NOTE = (
    "Medians, with the interval where the results give one, for the demand that requires the greatest load. This "
    "energy is set free when a part breaks or slips."
)


def energy(folder: ResultsFolder) -> Table:
    """One row a demand."""
    rows = [(e["demand"], _at(e, "at_demand"), _at(e, "at_capacity"), e["unit"]) for e in folder.results["energy"]]
    heads = ("Demand", "At the load required", "At failure", "Unit")
    return Table("Stored elastic energy", heads, rows, (0, 3), _NOTE)


def _at(entry: dict[str, Any], key: str) -> str:
    ends = entry.get(f"{key}_interval")
    if not words.is_number(entry[key]):
        return words.withheld(entry.get("reason"))
    if ends is None:
        return words.number(entry[key], 2)
    median, _, span = words.estimate(entry[key], None, ends)
    return f"{median} ({span})"

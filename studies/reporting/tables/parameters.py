"""Everything inferred: value, uncertainty, prior, and how much the data said."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

PRIOR_CARRIED = 0.5
"""Informed below this, the prior says more than the data."""

_NOTE = (
    "Informed: 1 − posterior variance / prior variance, in the coordinate whose prior is standard normal; near 0 the "
    "prior alone speaks, near 100 % the data do. A flat prior has no variance to compare with. Priors are in the "
    "parameter's unit."
)
_CARRIED = (
    " Carried mostly by their prior (informed below 50 %): {}. For a gauge's error that is its certificate; for what "
    "differs between parts it is the study's own figure, which one pulled piece cannot measure."
)


def parameters(folder: ResultsFolder) -> Table:
    """One row a parameter."""
    found = folder.results["parameters"]
    levels = sorted({words.share(entry["level"]) for entry in found.values()}) or ["95 %"]
    heads = ("Parameter", "Median", "Std dev", f"{' / '.join(levels)} interval", "Informed", "Prior")
    carried = [_spoken(name) for name, entry in found.items() if _carried(entry)]
    note = _NOTE + (_CARRIED.format(", ".join(carried)) if carried else "")
    return Table("Parameters", heads, [_row(name, entry) for name, entry in found.items()], (0, 5), note)


def _carried(entry: dict[str, Any]) -> bool:
    return words.is_number(entry["informed"]) and entry["informed"] < PRIOR_CARRIED


def _spoken(name: str) -> str:
    return name.replace("_", " ")


def _row(name: str, entry: dict[str, Any]) -> tuple[str, ...]:
    median, sd, span = words.estimate(entry["median"], entry["sd"], entry["interval"])
    if median == words.DASH:
        span = words.withheld(entry.get("reason"))
    informed = "flat prior" if entry["informed"] is None else words.percent(entry["informed"], 0)
    informed += ", mostly prior" if _carried(entry) else ""
    prior = words.plain(entry["prior"]) if entry.get("prior") else words.DASH
    return _head(name, entry), median, sd, span, informed, prior


def _head(name: str, entry: dict[str, Any]) -> str:
    """Name, symbol and unit, then what it is in plain words."""
    symbol = entry.get("symbol", "")
    shown = f"{_spoken(name)} ({symbol})" if symbol and symbol != name else _spoken(name)
    unit = words.unit(entry["unit"])
    shown += f", {unit}" if unit and unit != "sd" else ""
    return f"{shown}: {entry['meaning']}" if entry.get("meaning") else shown

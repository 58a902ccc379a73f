"""Everything inferred: value, uncertainty, prior, and how much the data said."""

from __future__ import annotations

from typing import Any

from pullback.studies.report import words
from pullback.studies.report.load import ResultsFolder
from pullback.studies.report.tables.base import Table

_NOTE = (
    "Informed: 1 − posterior variance / prior variance, in the coordinate that is sampled; near 0 the prior alone "
    "speaks, near 100 % the data do. A flat prior has no variance to compare with."
)


def parameters(folder: ResultsFolder) -> Table:
    """One row a parameter."""
    found = folder.results["parameters"]
    levels = sorted({words.share(entry["level"]) for entry in found.values()}) or ["95 %"]
    heads = ("Parameter", "Median", "Std dev", f"{' / '.join(levels)} interval", "Informed", "Prior")
    return Table("Parameters", heads, [_row(name, entry) for name, entry in found.items()], (0, 5), _NOTE)


def _row(name: str, entry: dict[str, Any]) -> tuple[str, ...]:
    median, sd, span = words.estimate(entry["median"], entry["sd"], entry["interval"])
    if median == words.DASH:
        span = words.withheld(entry.get("reason"))
    informed = "flat prior" if entry["informed"] is None else words.percent(entry["informed"], 0)
    symbol = entry.get("symbol", "")
    spoken = name.replace("_", " ")
    shown = f"{spoken} ({symbol})" if symbol and symbol != name else spoken
    unit = words.unit(entry["unit"])
    shown += f", {unit}" if unit else ""
    return shown, median, sd, span, informed, entry.get("prior", words.DASH)

"""Compares results with the truth, and counts what covers."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import numpy as np
from scipy.stats import binom

STUDIES, NEEDED, LEVEL = 60, 52, 0.95


def threshold(count: int) -> int:
    """The number of `count` true 95 % intervals that cover too rarely no more often than 51 or fewer of 60 do."""
    allowed = binom.cdf(NEEDED - 1, STUDIES, LEVEL)
    return int(binom.ppf(allowed * (1.0 + 1e-9), count, LEVEL))


@dataclass
class Score:
    """What one study's intervals cover: yes or no by name; the 90/95 load over the true 10 % quantile of capacity."""

    covers: dict[str, bool] = field(default_factory=dict)
    position: dict[str, float] = field(default_factory=dict)
    ratio: float | None = None
    state: str = ""


def score(results: dict[str, Any], true: dict[str, Any]) -> Score:
    """The score of one study, from its results.json and its truth.json."""
    found = Score(state=results["verdict"]["state"])
    for name, value in true["parameters"].items():
        one = results["parameters"][name]
        _note(found, f"{true['law']} {name}", value, *one["interval"])
    piece = next(iter(results["pieces"].values()))
    area = piece["area"]
    pairs = zip(true["section"]["station"], true["section"]["area"], strict=True)
    for part, (station, value) in zip(("1/4", "1/2", "3/4"), pairs, strict=True):
        ends = (float(np.interp(station, piece["station"], area[k])) for k in ("lower", "upper"))
        _note(found, f"section at {part}", value, *ends)
    found.ratio = _ratio(results, true)
    if found.ratio is not None:
        found.covers["90/95 load below true quantile"] = found.ratio <= 1.0
    return found


def _note(found: Score, name: str, value: float, low: float, high: float) -> None:
    found.covers[name] = low <= value <= high
    found.position[name] = (value - low) / (high - low)


def _ratio(results: dict[str, Any], true: dict[str, Any]) -> float | None:
    quantile = dict(zip(true["capacity"]["share"], true["capacity"]["force"], strict=True))[0.10]
    for guaranteed in results["next_part"]["capacity"][0]["guaranteed"]:
        if guaranteed["reliability"] == 0.9 and guaranteed["value"] is not None:
            return float(guaranteed["value"]) / quantile
    return None


def table(scores: list[Score]) -> dict[str, Any]:
    """Counts by name over all studies, law parameters also by their place in the law, and the median ratio."""
    counts: dict[str, list[bool]] = {}
    for one in scores:
        place = 0
        for name, covered in one.covers.items():
            counts.setdefault(name, []).append(covered)
            if not name.startswith(("section", "90/95")):
                place += 1
                counts.setdefault(f"law parameter {place}", []).append(covered)
    rows = {
        name: {"covered": sum(c), "of": len(c), "needed": threshold(len(c)), "enough": sum(c) >= threshold(len(c))}
        for name, c in sorted(counts.items())
    }
    ratios = [s.ratio for s in scores if s.ratio is not None]
    states = [s.state for s in scores]
    return {
        "rows": rows,
        "median_ratio": float(np.median(ratios)) if ratios else None,
        "states": {state: states.count(state) for state in sorted(set(states))},
    }

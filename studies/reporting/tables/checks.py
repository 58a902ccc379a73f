"""Posterior predictive checks, and how far each prior carries the result."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_CHECKS = (
    "p: how often readings replicated from the calibrated model lie as far off as those read. Near 0 the model or "
    "the gauge errors do not explain the readings; near 1 the errors are stated too large."
)
_SENSITIVITY = (
    "Relative change of the guaranteed load when the scale of one prior is multiplied, ± its Monte Carlo standard "
    "error. Small changes mean that the data, not the prior, carry the statement."
)
_KINDS = {
    "coupons": "coupons' stress, against the law",
    "coupon strength": "coupons' strength, against its scatter",
    "force": "forces",
}


def checks(folder: ResultsFolder) -> Table:
    """One row for each piece and kind of reading."""
    rows = [_check(entry) for entry in folder.results["checks"]]
    heads = ("Readings", "Piece", "Number", "χ² per reading", "p")
    return Table("Posterior predictive checks", heads, rows, (0, 1), _CHECKS, "No check was made.")


def _check(entry: dict[str, Any]) -> tuple[str, ...]:
    p = words.number(entry["p"], 2) if words.is_number(entry["p"]) else words.withheld(entry.get("reason"))
    chi2 = entry["chi2_per_reading"]
    chi = words.fixed(chi2, 2) if words.is_number(chi2) else words.DASH
    kind, piece = _KINDS.get(entry["kind"], entry["kind"]), entry.get("piece") or words.DASH
    return kind, piece, words.number(entry["readings"]), chi, p


def sensitivity(folder: ResultsFolder) -> Table:
    """One row a prior, one column for each factor and share of parts."""
    found = folder.results["prior_sensitivity"]
    columns = sorted({(e["factor"], e["reliability"]) for e in found})
    cells = {(_prior(e), e["factor"], e["reliability"]): _change(e) for e in found}
    names = dict.fromkeys(_prior(e) for e in found)
    rows = [(name, *[cells.get((name, *column), words.DASH) for column in columns]) for name in names]
    doubts = sorted({f"{e['prior'].replace('_', ' ')}: {e['reason']}" for e in found if _doubtful(e)})
    note = _SENSITIVITY + (f" * {'; '.join(doubts)}." if doubts else "")
    heads = ("Prior", *[f"scale × {words.given(f)}, {words.share(r)} of parts" for f, r in columns])
    return Table("Prior sensitivity", heads, rows, (0,), note, "No prior was varied.")


def _prior(entry: dict[str, Any]) -> str:
    return entry["prior"].replace("_", " ") + (f", {entry['demand']}" if entry.get("demand") else "")


def _change(entry: dict[str, Any]) -> str:
    if not words.is_number(entry["change"]):
        return words.withheld(entry.get("reason"))
    change = words.percent(entry["change"], 1, signed=True)
    text = f"{change} ± {words.percent(entry['error'], 1)}" if words.is_number(entry["error"]) else change
    return f"{text} *" if _doubtful(entry) else text


def _doubtful(entry: dict[str, Any]) -> bool:
    """A change that is given, with a reason why not to lean on it."""
    return words.is_number(entry["change"]) and bool(entry.get("reason"))

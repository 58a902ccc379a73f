"""The first page's two tables: what is guaranteed against what is required, and what is expected."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_GUARANTEED_NOTE = (
    "The load that at least this share of parts carries, with this confidence. Loads and margins are rounded down."
)
_NOT_EXACT = " Where the requirement is uncertain or varies, the margin counts that too; it is not load / required − 1."
_BELOW = " Shares below one in ten times the number of coupons are not given as numbers: coupons cannot show them."
_SHORTFALL_NOTE = (
    "Median and interval are predictive for one part: differences between parts and what is not known, together. "
    "Shortfall is the share of parts that carry less than required, with its upper bound."
)


def required(margin: dict[str, Any]) -> str:
    """What is required, with the spread of an uncertain or varying demand."""
    ends, unit = margin.get("required_interval"), words.unit(margin["unit"])
    if not ends or not all(words.is_number(end) for end in ends):
        return f"{words.given(margin['required'])} {unit}"
    kind = margin.get("required_kind", "")
    middle, _, span = words.estimate(margin["required"], None, ends)
    return f"{middle} {unit} ({span}{', ' + kind if kind in ('varies', 'not known') else ''})"


def named(margin: dict[str, Any]) -> str:
    """The demand's name with its service case."""
    return margin["demand"] + (f", {margin['service']}" if margin["service"] else "")


def guaranteed(folder: ResultsFolder) -> Table:
    """One row for each demand and stated reliability; where the statement is withheld nothing is called guaranteed."""
    stated = folder.results["verdict"]["state"] == "stated"
    rows = [
        _guaranteed(margin, entry, stated) for margin in folder.results["margins"] for entry in margin["guaranteed"]
    ]
    heads = (
        "Demand",
        "Required",
        "Parts / confidence",
        "Guaranteed load" if stated else "Computed load",
        "Margin",
        "Result",
    )
    note = _GUARANTEED_NOTE
    if any(margin.get("required_interval") for margin in folder.results["margins"]):
        note += _NOT_EXACT
    if not stated:
        note += " The statement is withheld: the computed loads and margins are not guaranteed."
    return Table(
        "Required and guaranteed" if stated else "Required and computed",
        heads,
        rows,
        (0, 5),
        note,
        "The study states no demand.",
    )


def _guaranteed(margin: dict[str, Any], entry: dict[str, Any], stated: bool) -> tuple[str, ...]:
    head = (
        named(margin),
        required(margin),
        f"{words.share(entry['reliability'])} / {words.share(entry['confidence'])}",
    )
    met = entry.get("met", "not shown")
    if not words.is_number(entry["value"]):
        return (*head, words.DASH, words.DASH, f"{words.SIGN[met]} {met}: {words.withheld(entry.get('reason'))}")
    load = f"{words.floor_load(entry['value'], margin['required'])} {words.unit(margin['unit'])}"
    return (*head, load, words.floor_percent(entry.get("margin")), _result(met, stated))


def _result(met: str, stated: bool) -> str:
    shown = met if stated else "not shown"
    return f"{words.SIGN[shown]} {shown}"


def expected(folder: ResultsFolder) -> Table:
    """One row a demand: median margin, its interval, and the shortfall."""
    rows = [_expected(margin) for margin in folder.results["margins"]]
    level = {words.share(margin["level"]) for margin in folder.results["margins"]} or {"95 %"}
    heads = (
        "Demand",
        "Median margin",
        f"{' / '.join(sorted(level))} interval",
        "Shortfall, median",
        "Shortfall, upper bound",
    )
    note = _SHORTFALL_NOTE
    if any((margin["shortfall_probability"] or {}).get("below") for margin in folder.results["margins"]):
        note += _BELOW
    return Table("Expected margins", heads, rows, (0,), note, "The study states no demand.")


def _expected(margin: dict[str, Any]) -> tuple[str, ...]:
    median, span = words.margin_band(margin["median"], margin["interval"])
    if median == words.DASH and margin.get("reason"):
        median = words.withheld(margin["reason"])
    return (named(margin), median, span, *shortfall(margin["shortfall_probability"]))


def shortfall(found: dict[str, Any] | None) -> tuple[str, str]:
    """Median and upper bound of the share that falls short, or what may be said instead."""
    if found is None:
        return words.DASH, words.withheld(None)
    least = found.get("below")
    said = [_share_or_below(found[key], least) for key in ("median", "upper")]
    if words.DASH in said and found.get("reason"):
        said = [text if text != words.DASH else words.withheld(found["reason"]) for text in said]
    upper = f"{said[1]} ({words.share(found['confidence'])} confidence)" if words.is_number(found["upper"]) else said[1]
    return said[0], upper


def _share_or_below(value: Any, least: Any) -> str:
    if words.is_number(value):
        return f"{words.number(100.0 * value, 2)}{words.NO_BREAK}%"
    return f"below {words.ceil_percent(least)}" if words.is_number(least) else words.DASH

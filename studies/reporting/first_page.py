"""What the first page says: the statement, and what it rests on."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables import demands
from pullback.studies.reporting.tables.base import Table
from pullback.studies.reporting.tables.provenance import identification
from pullback.studies.reporting.tables.rules import limit

_KINDS = {
    "pieces": ("piece pulled", "pieces pulled"),
    "steps": ("load step", "load steps"),
    "mark_readings": ("mark reading", "mark readings"),
    "force_readings": ("force reading", "force readings"),
    "travel_readings": ("travel reading", "travel readings"),
    "sections": ("section measured", "sections measured"),
    "masses": ("mass weighed", "masses weighed"),
    "coupons": ("coupon", "coupons"),
    "coupons_broken": ("of them broken", "of them broken"),
}


@dataclass(frozen=True)
class Reason:
    """Why a statement is withheld: the rule, in words, with its number beside its limit, and what to do."""

    rule: str
    text: str
    measured: str
    remedy: str


@dataclass(frozen=True)
class Block:
    """A named list of sentences; `none` stands where the list is empty."""

    name: str
    sentences: list[str]
    none: str


@dataclass(frozen=True)
class FirstPage:
    """Everything on the first page, as text."""

    title: str
    identification: list[tuple[str, str]]
    state: str
    state_words: str
    sentence: str
    result: str
    sign: str
    reasons: list[Reason]
    tables: list[Table]
    blocks: list[Block]


def first_page(folder: ResultsFolder) -> FirstPage:
    """The first page's words from the results."""
    results, verdict = folder.results, folder.results["verdict"]
    result = words.overall_result(results["margins"]) if verdict["state"] == "stated" else "not shown"
    return FirstPage(
        title=results["study"]["title"],
        identification=identification(folder),
        state=verdict["state"],
        state_words=words.STATE[verdict["state"]],
        sentence=verdict["sentence"],
        result=result,
        sign=words.SIGN[result],
        reasons=[_reason(found) for found in verdict["reasons"]],
        tables=[demands.guaranteed(folder)],
        blocks=_blocks(results),
    )


def _reason(found: dict[str, Any]) -> Reason:
    measured = ""
    if words.is_number(found.get("number")):
        measured = f"found {words.found(found['number'])}"
        measured += f", limit {limit(found['limit'])}" if found.get("limit") is not None else ""
    return Reason(found["rule"], _sentence(words.plain(found["text"])), measured, _sentence(found.get("remedy") or ""))


def _sentence(text: str) -> str:
    return text[:1].upper() + text[1:]


def _blocks(results: dict[str, Any]) -> list[Block]:
    missing = ", ".join(entry.replace("_", " ") for entry in results["not_recorded"])
    return [
        Block("Warnings", results["warnings"], "The screening of the data found nothing suspicious."),
        Block("Rests on", [rests_on(results["rests_on"])], ""),
        Block("Assumed", results["assumed"], "Nothing: the study gives everything itself."),
        Block("Not recorded", [missing] if missing else [], "Nothing: the record is complete."),
        Block("Excluded", results["excluded"], "No reading was left out."),
        Block("Not covered", results["left_out"], "The results name nothing."),
        Block("Cautions", results["cautions"], "The results name none."),
    ]


def rests_on(counts: dict[str, int]) -> str:
    """`1 piece pulled, 8 load steps, …`; kinds that were not read are named as such."""
    present = [f"{words.number(n)} {_kind(key, n)}" for key, n in counts.items() if n]
    absent = [_kind(key, 2) for key, n in counts.items() if not n]
    text = ", ".join(present) or "no reading"
    return text + (f"; no {', no '.join(absent)}." if absent else ".")


def _kind(key: str, count: int) -> str:
    spaced = key.replace("_", " ")
    return _KINDS.get(key, (spaced, spaced))[0 if count == 1 else 1]

"""The first sentence of report and verdict, in plain words."""

from __future__ import annotations

from pullback.inverse.priors import Varies
from pullback.inverse.statement.guarantee import Guaranteed, Margin
from pullback.studies.reporting import words
from pullback.studies.statement import Statement

_BROKEN = {
    "sampled": "the draws do not suffice",
    "fits": "the readings do not agree with the model and their gauges",
    "stable": "the law loses its stiffness before the part fails",
    "informed": "parts fail at stretches where no force or stress was read",
    "prior": "a prior, not the readings, carries the load",
}


def sentence(s: Statement) -> str:
    """The lowest guaranteed margin and whether its demand is met; or that no statement is made, and by which rules."""
    study = s.study
    if not s.margins:
        why = "the study asks for no demand" if study.strength else "the study gives no strength"
        return f"No margin is stated: {why}."
    if not s.stated:
        broken = [_BROKEN.get(r.rule, r.rule) + f" ({words.plain(r.text)})" for r in s.rules if not r.passed]
        return "No margin is stated, because the evidence does not carry one: " + "; ".join(broken) + "."
    lowest = _lowest(s)
    if lowest is None:
        reasons = sorted({g.reason for m in s.margins for g in m.guaranteed if g.reason})
        return "No margin is shown: " + "; ".join(reasons) + "."
    return " ".join([_met(s, *lowest), _carried(s, *lowest), _scope(s)])


def _met(s: Statement, m: Margin, g: Guaranteed) -> str:
    """The lowest margin, and the result over every share of parts that the study asks for."""
    found = words.demand_result({"guaranteed": [{"met": each.met} for each in m.guaranteed]})
    told = {"met": "is met", "not met": "is not met", "not shown": "is not shown to be met"}[found]
    among = f", the lowest of {len(s.margins)} demands," if len(s.margins) > 1 else ""
    margin = words.floor_percent(g.margin)
    text = f"The lowest guaranteed margin is {margin}: demand “{m.demand}”{among} {told}"
    absent = [each for each in m.guaranteed if each.margin is None]
    if found == "not shown" and absent:
        text += f", for nothing is shown at {words.share(absent[0].reliability)} of parts ({absent[0].reason})"
    return text + "."


def _carried(s: Statement, m: Margin, g: Guaranteed) -> str:
    share, confidence = words.share(g.reliability), words.share(g.confidence)
    load = f"{words.floor_load(g.value, m.required)} N"
    demand = next(d for d in s.study.demands if d.name == m.demand)
    if isinstance(demand.force, float | int):
        need = f"{words.given(m.required)} N is required"
    else:
        kind = "varies from use to use" if isinstance(demand.force, Varies) else "is not known exactly"
        need = f"the {words.number(m.required)} N required {kind}, which the margin counts"
    if s.study.statement.applies_to == "next part":
        return f"With {confidence} confidence at least {share} of further parts of this lot carry {load}; {need}."
    piece = s.study.pulls[0].piece
    return f"With {confidence} confidence piece {piece} carries {load} with a probability of at least {share}; {need}."


def _scope(s: Statement) -> str:
    criterion = s.study.strength.criterion if s.study.strength else ""
    law = words.law(s.study.law.name)
    return f"This holds for failure by {criterion}, in the conditions of the test, by the one law tried, {law}."


def _lowest(s: Statement) -> tuple[Margin, Guaranteed] | None:
    found = [(m, g) for m in s.margins for g in m.guaranteed if g.margin is not None]
    return min(found, key=lambda pair: pair[1].margin or 0.0, default=None)

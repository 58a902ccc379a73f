"""The statement's sentence: rounded down, no more than was shown; every text worked out by hand."""

from __future__ import annotations

from types import SimpleNamespace
from typing import Any

import numpy as np
import pytest

from pullback.inverse.priors import Normal, Varies
from pullback.inverse.statement.guarantee import Guaranteed, Margin
from pullback.inverse.statement.verdict import Rule
from pullback.studies.reporting.words import NO_BREAK
from pullback.studies.results.sentence import sentence

NONE = np.zeros(0)


def margin(*found: Guaranteed, demand: str = "rough road", required: float = 30.0) -> Margin:
    return Margin(demand, required, NONE, NONE, list(found), NONE, NONE)


def kept(reliability: float, value: float, required: float = 30.0) -> Guaranteed:
    least = value / required - 1.0
    return Guaranteed(reliability, 0.95, value, least, "met" if least >= 0.0 else "not met")


def absent(reliability: float) -> Guaranteed:
    return Guaranteed(reliability, 0.95, None, None, "not shown", "7 distinct failures; 10 are needed")


def told(margins: list[Margin], rules: tuple[Rule, ...] = (), applies_to: str = "next part", force: Any = 20.0) -> str:
    study = SimpleNamespace(
        strength=SimpleNamespace(criterion="elongation"),
        statement=SimpleNamespace(applies_to=applies_to),
        law=SimpleNamespace(name="yeoh"),
        pulls=[SimpleNamespace(piece="P1")],
        demands=[SimpleNamespace(name=m.demand, force=force) for m in margins],
    )
    stated = all(r.passed for r in rules)
    found: Any = SimpleNamespace(study=study, margins=margins, stated=stated, rules=rules)
    return sentence(found).replace(NO_BREAK, " ")


def test_the_lowest_margin_comes_first_with_its_load_rounded_down() -> None:
    other = margin(kept(0.9, 90.0), kept(0.99, 80.0), demand="pull-over")
    found = told([margin(kept(0.9, 67.69), kept(0.99, 52.99)), other])
    first = "The lowest guaranteed margin is +76.6 %: demand “rough road”, the lowest of 2 demands, is met. "
    assert found.startswith(first)
    assert "With 95 % confidence at least 99 % of further parts of this lot carry 52.9 N; 30 N is required." in found
    assert found.endswith("failure by elongation, in the conditions of the test, by the one law tried, Yeoh.")


def test_a_share_that_is_not_shown_keeps_the_demand_from_being_met() -> None:
    found = told([margin(kept(0.9, 67.69), absent(0.99))])
    assert "is met" not in found
    why = "for nothing is shown at 99 % of parts (7 distinct failures; 10 are needed)."
    assert f"is not shown to be met, {why}" in found


def test_a_load_below_the_demand_is_not_met_and_never_rounded_onto_it() -> None:
    found = told([margin(kept(0.9, 29.999))])
    assert "is −0.1 %: demand “rough road” is not met." in found and "carry 29.9 N; 30 N is required" in found


def test_a_varying_demand_and_a_pulled_piece_are_named_as_such() -> None:
    found = told([margin(kept(0.9, 67.69))], applies_to="pulled pieces", force=Varies(Normal(20.0, 2.0)))
    assert "piece P1 carries 67.6 N with a probability of at least 90 %" in found
    assert "required varies from use to use, which the margin counts" in found


@pytest.mark.parametrize("rule", ["informed", "sampled", "a rule to come"])
def test_a_withheld_statement_names_no_load(rule: str) -> None:
    broken = Rule(rule, False, "prior of force_scale, P1 field[3]", 1.42, 1.1, "pull further")
    found = told([margin(kept(0.9, 67.69))], (broken,))
    assert found.startswith("No margin is stated, because the evidence does not carry one: ")
    assert "(prior of force scale, coefficient 3 of the section of P1)." in found
    assert "67" not in found and "met" not in found


def test_without_a_demand_nothing_is_stated() -> None:
    assert told([]) == "No margin is stated: the study asks for no demand."

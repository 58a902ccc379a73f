"""The schema takes what RESULTS describe and refuses, by place, what breaks it."""

from __future__ import annotations

import copy
from typing import Any

import pytest
from jsonschema import Draft202012Validator
from report_results import quick, withheld

from pullback.studies.results.schema import ResultsError, schema, validate


def test_schema_is_itself_valid() -> None:
    Draft202012Validator.check_schema(schema())


@pytest.mark.parametrize("variant", [dict, withheld, quick])
def test_complete_results_are_taken(found: dict[str, Any], variant: Any) -> None:
    validate(variant(found))


BREAKS = [
    (("verdict", "state"), "perhaps", r"verdict\.state: 'perhaps' is not one of"),
    (("margins", 0, "median"), "high", r"margins\[0\]\.median: 'high' is not of type"),
    (("margins", 0, "guaranteed", 0, "met"), "maybe", r"margins\[0\]\.guaranteed\[0\]\.met"),
    (("diagnostics", "rhat_max"), float("nan"), r"diagnostics\.rhat_max: nan is not a finite number"),
    (("parameters", "c10", "colour"), "red", r"parameters\.c10: Additional properties .*'colour'"),
    (("unknown",), 1, r"top level: Additional properties .*'unknown'"),
    (
        ("next_part", "capacity", 0, "quantiles", 0, "share"),
        1.5,
        r"quantiles\[0\]\.share: 1\.5 is greater than the maximum",
    ),
]


@pytest.mark.parametrize(("path", "value", "message"), BREAKS)
def test_a_break_is_named_by_its_place(found: dict[str, Any], path: tuple[Any, ...], value: Any, message: str) -> None:
    broken = copy.deepcopy(found)
    inner: Any = broken
    for step in path[:-1]:
        inner = inner[step]
    inner[path[-1]] = value
    with pytest.raises(ResultsError, match=message):
        validate(broken)


def test_a_missing_key_is_named(found: dict[str, Any]) -> None:
    with pytest.raises(ResultsError, match="'margins' is a required property"):
        validate({key: value for key, value in found.items() if key != "margins"})

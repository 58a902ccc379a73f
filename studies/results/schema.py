"""The contract of `results.json`: the JSON Schema that ships with the package, and the check against it."""

from __future__ import annotations

import json
import math
from collections.abc import Iterator
from functools import cache
from importlib.resources import files
from typing import Any

_MOST_FAULTS = 10


class ResultsError(ValueError):
    """A results dictionary that breaks the contract; the message names every place, at most ten of them."""


@cache
def schema() -> dict[str, Any]:
    """The JSON Schema (draft 2020-12) of `results.json`."""
    text = files("pullback.studies.results").joinpath("schema.json").read_text(encoding="utf-8")
    loaded: dict[str, Any] = json.loads(text)
    return loaded


def validate(results: dict[str, Any]) -> None:
    """Check a results dictionary against the schema.

    Numbers that are not finite are refused too: JSON has none, and one would reach the report as a word.

    Raises:
        ResultsError: naming the place of each fault and what was wanted there.
    """
    faults = [*_not_finite(results, ()), *_against_schema(results)]
    if faults:
        more = len(faults) - _MOST_FAULTS
        lines = [*faults[:_MOST_FAULTS], *([f"and {more} more"] if more > 0 else [])]
        raise ResultsError("results.json breaks its schema:\n" + "\n".join(f"  {line}" for line in lines))


def _against_schema(results: Any) -> list[str]:
    from jsonschema import Draft202012Validator

    found = Draft202012Validator(schema()).iter_errors(results)
    ordered = sorted(found, key=lambda fault: [str(step) for step in fault.absolute_path])
    return [f"{_place(tuple(fault.absolute_path))}: {_short(fault.message)}" for fault in ordered]


def _not_finite(value: Any, path: tuple[str | int, ...]) -> Iterator[str]:
    if isinstance(value, dict):
        for key, item in value.items():
            yield from _not_finite(item, (*path, key))
    elif isinstance(value, list | tuple):
        for index, item in enumerate(value):
            yield from _not_finite(item, (*path, index))
    elif isinstance(value, float) and not math.isfinite(value):
        yield f"{_place(path)}: {value} is not a finite number; write null with a reason"


def _place(path: tuple[str | int, ...]) -> str:
    text = "".join(f"[{step}]" if isinstance(step, int) else f".{step}" for step in path)
    return text.lstrip(".") or "top level"


def _short(message: str, most: int = 200) -> str:
    return message if len(message) <= most else message[: most // 2] + " … " + message[-most // 2 :]

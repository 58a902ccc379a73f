"""How numbers are written; every expected text is worked out by hand from the rule in the name."""

from __future__ import annotations

from typing import Any

import pytest

from pullback.studies.reporting import words

NB = words.NO_BREAK


@pytest.mark.parametrize(
    ("median", "sd", "interval", "expected"),
    [
        (0.30123, 0.00812, [0.286, 0.3171], ("0.3012", "0.0081", f"0.2860{NB}to{NB}0.3171")),
        (13.24, 2.91, [8.0, 19.33], ("13.2", "2.9", f"8.0{NB}to{NB}19.3")),
        (1234.0, 123.0, [990.0, 1480.0], ("1230", "120", f"990{NB}to{NB}1480")),
        (-0.0041, 0.000996, None, ("−0.0041", "0.0010", words.DASH)),
        (2.046e-7, 1.6e-8, None, (f"2.05{NB}×{NB}10⁻⁷", f"0.16{NB}×{NB}10⁻⁷", words.DASH)),
        (None, None, None, (words.DASH, words.DASH, words.DASH)),
        (float("nan"), 1.0, [None, None], (words.DASH, "1.0", words.DASH)),
    ],
)
def test_two_digits_of_the_uncertainty(median: Any, sd: Any, interval: Any, expected: tuple[str, str, str]) -> None:
    assert words.estimate(median, sd, interval) == expected


@pytest.mark.parametrize(
    ("value", "required", "expected"),
    [
        (91.57, 112.5, "91.5"),
        (112.4999, 112.5, "112"),
        (112.549, 112.53, "112.54"),
        (112.5, 112.5, "112.5"),
        (None, 1.0, words.DASH),
    ],
)
def test_a_guaranteed_load_is_never_rounded_up_nor_across_the_demand(
    value: Any, required: float, expected: str
) -> None:
    assert words.floor_load(value, required) == expected


@pytest.mark.parametrize(
    ("value", "expected"), [(-0.0004, "−0.1"), (0.2499, "+24.9"), (0.0, "0.0"), (-0.1861, "−18.7")]
)
def test_a_guaranteed_margin_is_rounded_down(value: float, expected: str) -> None:
    assert words.floor_percent(value) == f"{expected}{NB}%"


def test_thousands_stand_apart_from_five_digits_on() -> None:
    assert words.number(123456) == "123\u202f456"
    assert words.number(2100) == "2100"


def test_units_are_printed_as_such() -> None:
    assert [words.unit(name) for name in ("mm^2", "1", "MPa")] == ["mm²", "", "MPa"]


@pytest.mark.parametrize(
    ("met", "expected"),
    [
        (["met", "met"], "met"),
        (["met", "not shown"], "not shown"),
        (["not shown", "not met"], "not met"),
        ([], "not shown"),
    ],
)
def test_a_demand_is_met_only_at_every_reliability(met: list[str], expected: str) -> None:
    assert words.demand_result({"guaranteed": [{"met": entry} for entry in met]}) == expected


def test_the_worst_demand_decides() -> None:
    met, short = {"guaranteed": [{"met": "met"}]}, {"guaranteed": [{"met": "not met"}]}
    assert words.overall_result([met, short]) == "not met"
    assert words.overall_result([]) == "not shown"

"""The worked study against the truth it was made from, and pinned numbers."""

from __future__ import annotations

import json

import numpy as np
import pytest
from job_worked import WORKED, Ran

EXPECTED = json.loads((WORKED / "expected.json").read_text(encoding="utf-8"))
TRUTH = EXPECTED["truth"]


def test_it_is_stated(sampled: Ran) -> None:
    assert sampled.code == 0
    verdict = sampled.results["verdict"]
    assert verdict["state"] == "stated" and verdict["reasons"] == []
    assert all(rule["passed"] for rule in verdict["rules"])


@pytest.mark.parametrize("name", list(TRUTH["parameters"]))
def test_the_truth_of_the_law_lies_in_its_band(sampled: Ran, name: str) -> None:
    low, high = sampled.results["parameters"][name]["interval"]
    assert low <= TRUTH["parameters"][name] <= high


def test_the_true_section_lies_in_its_band(sampled: Ran) -> None:
    piece = sampled.results["pieces"]["P1"]
    for station, area in zip(TRUTH["section"]["station"], TRUTH["section"]["area"], strict=True):
        low, high = (np.interp(station, piece["station"], piece["area"][end]) for end in ("lower", "upper"))
        assert low <= area <= high


@pytest.mark.parametrize("share", [0.01, 0.1])
def test_the_guarantee_is_below_the_true_quantile_and_not_idle(sampled: Ran, share: float) -> None:
    quantile = dict(zip(TRUTH["capacity"]["share"], TRUTH["capacity"]["force"], strict=True))[share]
    found = {g["reliability"]: g["value"] for g in sampled.results["next_part"]["capacity"][0]["guaranteed"]}
    assert 0.7 * quantile <= found[round(1.0 - share, 2)] <= quantile


def test_a_narrower_band_would_miss_the_truth_somewhere(sampled: Ran) -> None:
    # The bands are not idle: at a fiftieth of their width some would miss.
    missed = 0
    for name, true in TRUTH["parameters"].items():
        p = sampled.results["parameters"][name]
        missed += abs(true - p["median"]) > (p["interval"][1] - p["interval"][0]) / 100.0
    assert missed


@pytest.mark.parametrize("name", list(EXPECTED["pinned"]))
def test_pinned_numbers(sampled: Ran, name: str) -> None:
    pinned = EXPECTED["pinned"][name]
    found = sampled.results
    for key in pinned["path"]:
        found = found[key]
    assert found == pytest.approx(pinned["value"], abs=pinned["tolerance"])

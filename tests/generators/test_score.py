"""The counting of the coverage command."""

from copy import deepcopy

import pytest

from generators.coverage import arguments, report, seeds
from generators.score import score, table, threshold

TRUE = {
    "law": "yeoh",
    "parameters": {"c10": 0.3, "c20": -0.004},
    "section": {"station": [25.0, 50.0, 75.0], "area": [20.0, 21.0, 22.0]},
    "capacity": {"share": [0.01, 0.10], "force": [80.0, 100.0]},
}
RESULTS = {
    "verdict": {"state": "stated"},
    "parameters": {"c10": {"interval": [0.29, 0.31]}, "c20": {"interval": [-0.006, -0.002]}},
    "pieces": {"P1": {"station": [0.0, 100.0], "area": {"lower": [18.0, 22.0], "upper": [21.0, 24.0]}}},
    "next_part": {"capacity": [{"guaranteed": [{"reliability": 0.9, "confidence": 0.95, "value": 90.0}]}]},
}


def test_all_cover():
    found = score(RESULTS, TRUE)
    assert all(found.covers.values()) and found.ratio == pytest.approx(0.9)
    assert set(found.covers) == {
        "yeoh c10", "yeoh c20", "section at 1/4", "section at 1/2", "section at 3/4", "90/95 load below true quantile",
    }  # fmt: skip


def test_misses_are_counted():
    wrong = deepcopy(RESULTS)
    wrong["parameters"]["c10"]["interval"] = [0.31, 0.33]
    wrong["pieces"]["P1"]["area"]["upper"] = [19.0, 30.0]
    wrong["next_part"]["capacity"][0]["guaranteed"][0]["value"] = 101.0
    covers = score(wrong, TRUE).covers
    assert [k for k, v in covers.items() if not v] == ["yeoh c10", "90/95 load below true quantile"]
    rows = table([score(RESULTS, TRUE), score(wrong, TRUE)])["rows"]
    assert rows["yeoh c10"]["covered"] == 1 and rows["law parameter 1"]["of"] == 2
    assert rows["law parameter 2"]["covered"] == 2


def test_section_is_interpolated_between_stations():
    wrong = deepcopy(RESULTS)
    wrong["pieces"]["P1"]["area"]["lower"] = [18.0, 24.0]
    assert [k for k, v in score(wrong, TRUE).covers.items() if not v] == ["section at 3/4"]


def test_withheld_load_has_no_ratio():
    wrong = deepcopy(RESULTS)
    wrong["next_part"]["capacity"][0]["guaranteed"][0]["value"] = None
    assert score(wrong, TRUE).ratio is None


def test_thresholds():
    assert threshold(60) == 52
    assert threshold(120) > 2 * 52
    assert [threshold(n) for n in (1, 6)] == [0, 4]


def test_a_count_too_low_fails_the_report(capsys):
    wrong = deepcopy(RESULTS)
    wrong["parameters"]["c10"]["interval"] = [0.31, 0.33]
    good = table([score(RESULTS, TRUE)] * 60) | {"without_results": 0}
    bad = table([score(RESULTS, TRUE)] * 51 + [score(wrong, TRUE)] * 9) | {"without_results": 0}
    assert report(good) and not report(bad)
    assert "TOO FEW" in capsys.readouterr().out


def test_seeds():
    assert seeds("1000-1003,7") == [1000, 1001, 1002, 1003, 7]
    assert arguments(["--out", "x"]).seeds == "1000-1059"

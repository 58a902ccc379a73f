"""Texts in the tables that a spreadsheet would run as formulas."""

from __future__ import annotations

import shutil
from pathlib import Path
from typing import Any

import pandas as pd
import pytest
from report_folder import write_results

from pullback.studies.reporting.load import load
from pullback.studies.reporting.pages import fill
from pullback.studies.results.cells import defused, original

FORMULA = "=HYPERLINK(0)"


@pytest.mark.parametrize("text", [FORMULA, "+1+1", "-P1", "@SUM(1)", "\tx", "'quoted", "plain", "", "a=b"])
def test_a_text_is_harmless_in_the_table_and_whole_after_it(text: str) -> None:
    cell = defused(pd.DataFrame({"demand": [text, "other"]}))["demand"][0]
    assert not cell.startswith(("=", "+", "-", "@", "\t"))
    assert original(cell) == text


def test_numbers_stay_numbers() -> None:
    table = pd.DataFrame({"step": ["-1", "+2.5e3"], "margin": [-0.25, 1.0], "mixed": ["=x", -3.0]})
    found = defused(table)
    assert list(found["step"]) == ["-1", "+2.5e3"] and list(found["margin"]) == [-0.25, 1.0]
    assert list(found["mixed"]) == ["'=x", -3.0]


def test_the_report_knows_a_demand_and_a_piece_by_their_own_names(
    folder: Path, found: dict[str, Any], tmp_path: Path
) -> None:
    copied = shutil.copytree(folder, tmp_path / "results")
    for path in (copied / "tables").glob("*.csv"):
        table = pd.read_csv(path, dtype=str, keep_default_na=False)
        defused(table.replace({"hold-down": FORMULA, "P1": "@P1"})).to_csv(path, index=False)
    changed = found | {"margins": [found["margins"][0] | {"demand": FORMULA}], "pieces": {"@P1": found["pieces"]["P1"]}}
    write_results(copied, changed)
    figures = [figure for page in fill(load(copied)) for figure in page.figures]
    assert not [figure.absent for figure in figures if figure.absent]
    assert "Piece @P1" in [figure.title for figure in figures]

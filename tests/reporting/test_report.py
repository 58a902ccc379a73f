"""The report drawn from a synthetic results folder: complete, safe from hostile text, with its gaps explained."""

from __future__ import annotations

import copy
import html
import re
import shutil
from pathlib import Path
from typing import Any

import pandas as pd
import pytest
from report_folder import write_results
from report_results import quick, withheld
from report_text import figure, text_of

from pullback.studies.faults import BadInput
from pullback.studies.reporting import draw
from pullback.studies.reporting.words import QUICK

FIGURES = ("marks-0", "section-0", "force-0", "margin", "capacity", "where", "corner", "law", "stress-0", "trace")
HOSTILE = "</title></style><script>alert('x')</script> $\\frac$ & \"quoted\""


@pytest.fixture(scope="module")
def page(folder: Path) -> str:
    return draw(folder).read_text(encoding="utf-8")


@pytest.fixture
def changed(folder: Path, found: dict[str, Any], tmp_path: Path) -> tuple[Path, dict[str, Any]]:
    """A copy of the folder and of its results, both free to be changed."""
    copied = shutil.copytree(folder, tmp_path / "results")
    return copied, copy.deepcopy(found)


@pytest.mark.parametrize("name", FIGURES)
def test_every_figure_is_drawn_with_caption_and_words_for_the_blind(page: str, name: str) -> None:
    drawn = figure(page, name)
    assert drawn.count("<svg") == drawn.count("<title ") == drawn.count("<desc ") >= 1
    assert len(text_of(drawn.partition("<figcaption>")[2])) > 80


def test_every_axis_names_its_unit(page: str) -> None:
    for label in (
        "station X (mm)",
        "position x (mm)",
        "force (N)",
        "section A₀ (mm²)",
        "nominal stress P (MPa)",
        "stretch λ (1)",
    ):
        assert label in page


def test_the_first_page_says_what_is_required_and_whether_it_is_met(page: str, found: dict[str, Any]) -> None:
    front = text_of(page.partition("<nav")[0])
    for sentence in (found["verdict"]["sentence"], found["assumed"][0], found["left_out"][0], found["cautions"][0]):
        assert sentence in front
    assert "112.5 N" in front and "✕ not met" in front
    assert "not shown: withheld: 11 coupons broke" in front


def test_nothing_is_fetched_and_no_script_runs(page: str) -> None:
    assert "http" not in page and "<script" not in page and "@import" not in page
    assert not re.search(r'(?:src|href)="(?!#)', page)
    assert not re.search(r"url\((?!#)", page)


def test_ids_are_unique_and_references_lead_somewhere(page: str) -> None:
    ids = re.findall(r'\bid="([^"]+)"', page)
    assert len(ids) == len(set(ids)) > 100
    wanted = set(re.findall(r'href="#([^"]+)"', page)) | set(re.findall(r"url\(#([^)]+)\)", page))
    assert wanted <= set(ids)


GAP = r"\b(nan|None|null|inf|undefined|NaN)\b"


def test_no_number_comes_out_as_a_word(page: str) -> None:
    assert not re.search(GAP, text_of(page))


def test_missing_cells_and_numbers_are_explained(changed: tuple[Path, dict[str, Any]]) -> None:
    copied, results = changed
    for name, column in (
        ("readings", "force read [N]"),
        ("marks", "position read [mm]"),
        ("coupons", "nominal stress read [MPa]"),
    ):
        table = pd.read_csv(copied / "tables" / f"{name}.csv")
        table.loc[1, column] = float("nan")
        table.to_csv(copied / "tables" / f"{name}.csv", index=False)
    margin = results["margins"][0] | {"median": None, "interval": None, "reason": "fewer than 3 distinct failures"}
    results["margins"] = [
        margin | {"shortfall_probability": {"median": None, "upper": None, "confidence": 0.95, "below": 0.0083}}
    ]
    results["parameters"]["lot"] |= {"median": None, "sd": None, "interval": None, "reason": "held fixed"}
    write_results(copied, results)
    told = text_of(draw(copied).read_text(encoding="utf-8"))
    assert not re.search(GAP, told)
    for reason in ("withheld: fewer than 3 distinct failures", "below 0.83 %", "withheld: held fixed"):
        assert reason in told


def test_hostile_text_is_shown_not_run(changed: tuple[Path, dict[str, Any]]) -> None:
    copied, results = changed
    results["study"]["title"] = HOSTILE
    results["margins"][0]["demand"] = results["margins"][0]["demand"] + HOSTILE
    results["record"] = {HOSTILE: HOSTILE}
    results["warnings"] = [HOSTILE]
    for name, column in (
        ("marks", "step"),
        ("profile", "step"),
        ("capacity", "part"),
        ("marks", "piece"),
        ("profile", "piece"),
    ):
        table = pd.read_csv(copied / "tables" / f"{name}.csv", dtype={column: str})
        table[column] = table[column] + HOSTILE
        table.to_csv(copied / "tables" / f"{name}.csv", index=False)
    write_results(copied, results)
    drawn = draw(copied).read_text(encoding="utf-8")
    assert (
        "<script" not in drawn
        and drawn.count("</style>") == 1
        and drawn.count("</title>") == 1 + drawn.count("<title ")
    )
    assert HOSTILE in html.unescape(drawn.partition("<h1>")[2].partition("</h1>")[0])


def test_a_withheld_statement_gives_rule_number_and_remedy(changed: tuple[Path, dict[str, Any]]) -> None:
    copied, results = changed
    write_results(copied, withheld(results))
    front = text_of(draw(copied).read_text(encoding="utf-8").partition("<nav")[0])
    assert "Withheld: the evidence does not carry a statement." in front
    assert "informed (found 1.73, limit 1.1)" in front and "Report the coupons' stress at break" in front
    assert "Guaranteed load" not in front and "Computed load" in front
    assert "? not shown" in front and "✕ not met" not in front


def test_a_stated_report_claims_nothing_of_the_other_kind(page: str) -> None:
    assert "Withheld:" not in text_of(page) and QUICK not in page


def test_the_quick_banner_stands_on_every_section_and_printed_page(changed: tuple[Path, dict[str, Any]]) -> None:
    copied, results = changed
    write_results(copied, quick(results))
    drawn = draw(copied).read_text(encoding="utf-8")
    sections = drawn.count('<section class="evidence"')
    assert sections == 12 and drawn.count(f'<p class="quick">{QUICK}</p>') == sections + 1
    assert re.search(r"@top-right\{content:\"Quick approximation", drawn)
    assert "Not drawn: the quick approximation runs no chain." in drawn


@pytest.mark.parametrize(
    ("file", "name", "reason"),
    [
        ("tables/law.csv", "law", "no rows in tables/law.csv"),
        ("posterior.nc", "corner", "no draws of the law's parameters"),
    ],
)
def test_a_figure_without_data_says_why(
    changed: tuple[Path, dict[str, Any]], file: str, name: str, reason: str
) -> None:
    copied, _ = changed
    (copied / file).unlink()
    assert reason in text_of(figure(draw(copied).read_text(encoding="utf-8"), name))


def test_drawing_again_gives_the_same_page(folder: Path, page: str) -> None:
    assert draw(folder).read_text(encoding="utf-8") == page


def test_a_failed_write_leaves_the_old_report_alone(
    changed: tuple[Path, dict[str, Any]], monkeypatch: pytest.MonkeyPatch
) -> None:
    copied, _ = changed
    (copied / "report.html").write_text("the old one", encoding="utf-8")

    def full_disk(self: Path, target: Path) -> Path:
        raise OSError("no space left on device")

    monkeypatch.setattr(Path, "replace", full_disk)
    with pytest.raises(OSError, match="no space left"):
        draw(copied)
    assert (copied / "report.html").read_text(encoding="utf-8") == "the old one"
    assert [path.name for path in copied.glob("*report*")] == ["report.html"]


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (None, "results.json: read nothing there"),
        (b"{", "expected JSON in UTF-8"),
        (b"\xff\xfe", "expected JSON"),
        (b"{}", "required property"),
    ],
)
def test_a_folder_without_results_is_refused_by_name(tmp_path: Path, content: bytes | None, message: str) -> None:
    if content is not None:
        (tmp_path / "results.json").write_bytes(content)
    with pytest.raises(BadInput, match=message):
        draw(tmp_path)


def test_a_table_or_posterior_that_cannot_be_read_is_refused_by_name(changed: tuple[Path, dict[str, Any]]) -> None:
    copied, _ = changed
    (copied / "posterior.nc").write_bytes(b"not netCDF")
    with pytest.raises(BadInput, match=r"posterior\.nc: .*expected draws in netCDF"):
        draw(copied)
    (copied / "tables" / "law.csv").write_bytes(b"")
    with pytest.raises(BadInput, match=r"law\.csv: .*expected a comma-separated table"):
        draw(copied)

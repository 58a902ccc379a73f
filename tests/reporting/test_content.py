"""What the results say beyond numbers: names in plain words, bars that add up, legends that are whole."""

from __future__ import annotations

import re
from pathlib import Path
from types import SimpleNamespace
from typing import Any

import numpy as np
import pytest
from report_results import quick, withheld
from report_text import figure, text_of

from pullback.forward.laws import registry
from pullback.inverse.layout import Scalar
from pullback.studies.assemble import assemble
from pullback.studies.read import read_study
from pullback.studies.reporting import words
from pullback.studies.reporting.document import render
from pullback.studies.reporting.figures import style
from pullback.studies.reporting.load import ResultsFolder, load
from pullback.studies.reporting.tables.checks import sensitivity
from pullback.studies.reporting.tables.diagnostics import diagnostics
from pullback.studies.reporting.tables.parameters import parameters
from pullback.studies.reporting.tables.rules import rules
from pullback.studies.results.names import meaning
from pullback.studies.results.tables import margin_distribution

WORKED = Path(__file__).parents[2] / "studies" / "worked" / "battery-strap"
GAUGE_ERRORS = ("position_scale", "grip_position", "force_zero", "travel_zero", "coupon_scale", "stiffness_scatter")


def test_every_unknown_has_a_meaning_in_plain_words() -> None:
    model = assemble(read_study(WORKED / "study.toml"), 8)
    names = [b.name for b in model.posterior.layout.blocks if isinstance(b, Scalar)]
    assert len(names) > 10
    for name in (*names, *GAUGE_ERRORS, "strength_median", "strength_log_sd"):
        said = meaning(name, model.law, "elongation")
        assert len(said.split()) >= 3 and "_" not in said, name


def test_every_law_s_parameters_have_a_meaning() -> None:
    for law in registry.values():
        assert all(meaning(p.name, law) == f"law: {p.meaning}" for p in law.parameters)


def test_margin_bars_add_up_and_zero_is_an_edge() -> None:
    draws = np.random.default_rng(5).standard_t(3, 4000) * 0.4 + 0.5
    statement: Any = SimpleNamespace(margins=[SimpleNamespace(demand="d", draws=draws)])
    table = margin_distribution(statement)
    assert table["probability"].sum() == pytest.approx(1.0)
    edges = np.append(table["margin from"], table["margin to"].iloc[-1])
    assert np.min(np.abs(edges)) == 0.0
    short = table["probability"][table["margin to"] <= 0.0].sum()
    assert short == pytest.approx(np.mean(draws < 0.0))


@pytest.mark.parametrize("labels", [["a"], ["share failed, 95 %", "one part", "pull-over at fitting", "guaranteed"]])
def test_a_legend_stays_on_its_canvas(labels: list[str]) -> None:
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    with style.look():
        canvas, axes = style.panel("x", "y")
        for label in labels:
            axes.plot([0, 1], [0, 1], label=label)
        style.legend(axes)
        drawn = FigureCanvasAgg(canvas)
        drawn.draw()
    box, width, height = axes.get_legend().get_window_extent(), *drawn.get_width_height()
    assert box.x0 >= 0 and box.x1 <= width and box.y1 <= height
    assert box.y0 >= axes.get_window_extent().y1


@pytest.fixture
def loaded(folder: Path) -> ResultsFolder:
    return load(folder)


def with_results(folder: ResultsFolder, found: dict[str, Any]) -> ResultsFolder:
    return ResultsFolder(**(vars(folder) | {"results": found}))


@pytest.mark.parametrize("variant", [withheld, quick])
def test_nothing_is_called_guaranteed_where_the_statement_is_withheld(loaded: ResultsFolder, variant: Any) -> None:
    page = render(with_results(loaded, variant(loaded.results)))
    for name in ("margin", "capacity"):
        bare = figure(page, name).replace("computed, not guaranteed", "")
        assert bare != figure(page, name) and "guaranteed" not in bare


def test_margins_are_traced_though_they_are_had_at_fewer_draws(loaded: ResultsFolder) -> None:
    assert "margin, hold-down (1)" in text_of(figure(render(loaded), "trace"))


def test_names_of_keys_are_words_in_tables(loaded: ResultsFolder) -> None:
    sampling = loaded.results["diagnostics"]["sampling"] | {"outside_stable_laws": 2, "sampling_seconds": 3.0}
    sampling |= {"elements": 120, "largest_discretisation_error_over_gauge_error": 0.004}
    diagnosed = loaded.results["diagnostics"] | {"sampling": sampling}
    known = with_results(loaded, loaded.results | {"diagnostics": diagnosed})
    names = [row[0] for row in diagnostics(known).rows]
    assert "Elements along a part" in names and len(names) == len(set(names))
    for table in (diagnostics(known), parameters(known), rules(known), sensitivity(known)):
        assert not re.search("[a-z]_[a-z]", " ".join(cell for row in table.rows for cell in row))
    assert all(name[0].isupper() or name[0] == "χ" for name in names), names


def test_a_parameter_says_what_it_is_and_whether_its_prior_carries_it(loaded: ResultsFolder) -> None:
    found = {k: dict(v) for k, v in loaded.results["parameters"].items()}
    found["lot"] |= {"informed": 0.14, "meaning": "departure of the lot"}
    table = parameters(with_results(loaded, loaded.results | {"parameters": found}))
    lot = next(row for row in table.rows if row[0].startswith("lot"))
    assert lot[0] == "lot: departure of the lot" and lot[4].endswith("mostly prior")
    assert "(informed below 50 %): lot." in table.note
    assert "Carried" not in parameters(loaded).note


def test_a_change_not_to_be_trusted_is_marked(loaded: ResultsFolder) -> None:
    rows = [dict(entry) for entry in loaded.results["prior_sensitivity"]]
    rows[0] |= {"reason": "Pareto shape 0.81: not to be trusted"}
    table = sensitivity(with_results(loaded, loaded.results | {"prior_sensitivity": rows}))
    assert len(table.rows) == 2 and table.rows[0][1].endswith(" *") and not table.rows[1][1].endswith("*")
    assert "* spread: Pareto shape 0.81: not to be trusted." in table.note


def test_a_bound_from_above_is_rounded_up() -> None:
    assert words.ceil_percent(0.00625) == f"0.63{words.NO_BREAK}%"
    assert words.ceil_percent(0.0083) == f"0.83{words.NO_BREAK}%"
    assert words.ceil_percent(0.01) == f"1.0{words.NO_BREAK}%"


def test_force_readings_carry_their_own_errors(loaded: ResultsFolder) -> None:
    assert "read − fitted, ±2 se" in figure(render(loaded), "force-0")

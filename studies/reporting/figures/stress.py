"""Nominal and true stress, current section and volume ratio along the part at each step."""

from __future__ import annotations

import pandas as pd

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import Band, column, need, steps, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Stress along the part"
_CAPTION = (
    "At each step (lines named by the step, with 95 % bands): nominal stress (force over unstretched section), true "
    "stress (force over current section), the current section, and J, the ratio of current to unstretched volume. "
    "The compound is taken as incompressible: J = 1 is an assumption, not a finding."
)
_QUANTITIES = (
    ("nominal stress", "MPa", "nominal stress P (MPa)"),
    ("true stress", "MPa", "true stress σ (MPa)"),
    ("current section", "mm^2", "current section A (mm²)"),
    ("J", "", "J (1)"),
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One figure of four panels a piece."""
    need(folder, "profile")
    return [_piece(folder, piece, k) for k, piece in enumerate(folder.entries("profile", "piece"))]


def _piece(folder: ResultsFolder, piece: str, index: int) -> Figure:
    rows = need(folder, "profile", piece=piece)
    panels = [_panel(rows, *quantity) for quantity in _QUANTITIES]
    return figure(f"stress-{index}", f"Piece {piece}", _CAPTION, panels)


def _panel(rows: pd.DataFrame, quantity: str, unit: str, label: str) -> PanelDrawn:
    canvas, axes = style.panel("station X (mm)", label)
    names, last = steps(rows), []
    for k, name in enumerate(names):
        here = rows[rows["step"] == name]
        at, found, look = column(here, "station [mm]"), _found(here, quantity, unit), style.step_style(k, len(names))
        axes.fill_between(at, found.lower, found.upper, color=look["color"], alpha=0.25, linewidth=0)
        axes.plot(at, found.median, **look)
        last.append(float(found.median[-1]))
    if quantity == "J":
        _assumed(axes, rows)
    else:
        style.label_ends(axes, float(column(rows, "station [mm]").max()), last, names)
    return PanelDrawn(canvas, label, f"{label} along the part at {len(names)} steps.")


def _found(rows: pd.DataFrame, quantity: str, unit: str) -> Band:
    if quantity in rows.columns:
        values = column(rows, quantity)
        return Band(values, values, values)
    return triple(rows, quantity, unit)


def _assumed(axes, rows: pd.DataFrame) -> None:  # type: ignore[no-untyped-def]
    if "J" in rows.columns and (column(rows, "J") == 1.0).all():
        axes.set_ylim(0.9, 1.1)
        axes.text(0.5, 0.62, "all steps: 1, assumed", transform=axes.transAxes, ha="center", fontsize=7.5)

"""Marks: where they were read, where the calibrated part has them, and what is left between the two."""

from __future__ import annotations

import numpy as np
import pandas as pd

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import column, need, steps, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Marks"
_CAPTION = (
    "Above: positions read (points) on the fitted position of every point of the part (lines, one a step, with the "
    "95 % band), and the stretch that goes with them, with its 95 % band; lines are named by their step. Below: each "
    "reading minus the fitted position, divided by its standard error, one row a step, with the range of ±2 shaded "
    "(beyond ±3 a cross), and all of them together against the standard normal curve. A pattern that repeats from "
    "step to step at one station is a misplaced mark; a row that leans is a step whose scale or grip moved; readings "
    "far outside ±2 are suspect."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One figure a piece."""
    need(folder, "profile")
    return [_piece(folder, piece, k) for k, piece in enumerate(folder.entries("profile", "piece"))]


def _piece(folder: ResultsFolder, piece: str, index: int) -> Figure:
    profile, marks = need(folder, "profile", piece=piece), folder.table("marks", piece=piece)
    panels = [_position(profile, marks), _stretch(profile)]
    if not marks.empty:
        panels += [_rows(marks), _together(marks)]
    return figure(f"marks-{index}", f"Piece {piece}", _CAPTION, panels)


def _position(profile: pd.DataFrame, marks: pd.DataFrame) -> PanelDrawn:
    canvas, axes = style.panel("station X (mm)", "position x (mm)")
    names = steps(profile)
    for k, name in enumerate(names):
        rows = profile[profile["step"] == name]
        look, at, fitted = style.step_style(k, len(names)), column(rows, "station [mm]"), triple(rows, "position", "mm")
        axes.fill_between(at, fitted.lower, fitted.upper, color=look["color"], alpha=0.25, linewidth=0)
        axes.plot(at, fitted.median, **look)
        read = marks[marks["step"] == name] if not marks.empty else marks
        if not read.empty:
            axes.plot(
                column(read, "station [mm]"),
                column(read, "position read [mm]"),
                "o",
                color=look["color"],
                mfc="none",
                mew=0.6,
            )
    _name_steps(canvas, axes, profile, names, "position", "mm")
    told = f"Fitted positions of {len(names)} steps as lines, mark readings as points."
    return PanelDrawn(canvas, "Position against station", told)


def _stretch(profile: pd.DataFrame) -> PanelDrawn:
    canvas, axes = style.panel("station X (mm)", "stretch λ (1)")
    names = steps(profile)
    for k, name in enumerate(names):
        rows = profile[profile["step"] == name]
        look, at, fitted = style.step_style(k, len(names)), column(rows, "station [mm]"), triple(rows, "stretch")
        axes.fill_between(at, fitted.lower, fitted.upper, color=look["color"], alpha=0.25, linewidth=0)
        axes.plot(at, fitted.median, **look)
    _name_steps(canvas, axes, profile, names, "stretch", "")
    return PanelDrawn(canvas, "Stretch along the part", f"Stretch with 95 % band at {len(names)} steps.")


def _name_steps(canvas, axes, profile: pd.DataFrame, names: list[str], quantity: str, unit: str) -> None:  # type: ignore[no-untyped-def]
    last = [float(triple(profile[profile["step"] == name], quantity, unit).median[-1]) for name in names]
    end = float(column(profile, "station [mm]").max())
    style.label_ends(axes, end, last, names)


def _rows(marks: pd.DataFrame) -> PanelDrawn:
    names = steps(marks)
    canvas, axes = style.panel("station X (mm)", "step", height=max(style.HEIGHT, 0.3 * len(names) + 0.6))
    axes.set_yticks(range(len(names)), [style.short(name, 8) for name in names])
    axes.set_ylim(-0.6, len(names) - 0.4)
    for k, name in enumerate(names):
        rows = marks[marks["step"] == name]
        at, residual = column(rows, "station [mm]"), column(rows, "residual")
        axes.axhspan(k - 0.4, k + 0.4, color=style.GREY, alpha=0.15, linewidth=0)
        axes.axhline(k, color=style.GREY, linewidth=0.5)
        axes.vlines(at, k, k + np.clip(residual, -2.5, 2.5) / 5.0, color=style.BLUE, linewidth=0.9)
        far = np.abs(residual) > 3.0
        axes.plot(at[far], k + np.clip(residual[far], -2.5, 2.5) / 5.0, "x", color=style.VERMILION, markersize=5)
    told = "Standardised residuals as sticks; the grey strip is plus or minus two; beyond three a cross."
    return PanelDrawn(canvas, "Standardised residuals by step", told)


def _together(marks: pd.DataFrame) -> PanelDrawn:
    canvas, axes = style.panel("residual / standard error (1)", "density (1)")
    residual = column(marks, "residual")
    residual = residual[np.isfinite(residual)]
    reach = max(4.0, float(np.ceil(np.max(np.abs(residual), initial=0.0))))
    edges = np.linspace(-reach, reach, int(4 * reach) + 1).tolist()
    axes.hist(
        residual,
        edges,
        density=True,
        color=style.SKY,
        edgecolor=style.INK,
        linewidth=0.5,
        label=f"{residual.size} readings",
    )
    z = np.linspace(-reach, reach, 200)
    axes.plot(z, np.exp(-0.5 * z * z) / np.sqrt(2 * np.pi), color=style.INK, linestyle="--", label="standard normal")
    style.legend(axes)
    return PanelDrawn(
        canvas, "All standardised residuals", f"Histogram of {residual.size} residuals and the standard normal curve."
    )

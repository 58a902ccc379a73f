"""Force against travel: the calibrated part's curve with its band, and the readings."""

from __future__ import annotations

from typing import Any

import numpy as np
import pandas as pd

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import Array, column, need, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Force and travel"
_CAPTION = (
    "Force at the pulled end against travel, with the 95 % band of the calibrated part and the readings (points); on "
    "the right each reading minus the fitted force of its step, with ±2 standard errors of the reading, and the 95 % "
    "band of the fitted force around zero. Readings whose bars miss the band are suspect; readings that all lie on one "
    "side, growing with the force, point to the load cell's scale. "
    "The band on the left is of the force at the pulled end; cell errors, and the weight between the pulled end and "
    "the cell, are in the band on the right."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One figure a piece."""
    need(folder, "readings")
    return [_piece(folder, piece, k) for k, piece in enumerate(folder.entries("readings", "piece"))]


def _piece(folder: ResultsFolder, piece: str, index: int) -> Figure:
    readings = need(folder, "readings", piece=piece)
    panels = [_curve(folder.table("force_travel", piece=piece), readings), _left_over(readings)]
    return figure(f"force-{index}", f"Piece {piece}", _CAPTION, panels)


def _curve(curve: pd.DataFrame, readings: pd.DataFrame) -> PanelDrawn:
    canvas, axes = style.panel("travel (mm)", "force (N)")
    if not curve.empty:
        at, fitted = column(curve, "travel [mm]"), triple(curve, "force", "N")
        style.band(axes, at, fitted.lower, fitted.upper)
        axes.plot(at, fitted.median, color=style.BLUE, label="fitted, 95 % band")
    travel, force = column(readings, "travel read [mm]"), column(readings, "force read [N]")
    axes.plot(travel, force, "o", color=style.VERMILION, mfc="white", mew=1.0, label="read")
    style.legend(axes)
    return PanelDrawn(canvas, "Force against travel", f"Fitted curve with band and {len(readings)} readings.")


def _left_over(readings: pd.DataFrame) -> PanelDrawn:
    canvas, axes = style.panel("travel (mm)", "force read − fitted (N)")
    travel, fitted = column(readings, "travel median [mm]"), triple(readings, "force", "N")
    order = np.argsort(travel, kind="stable")
    below, above = (fitted.lower - fitted.median)[order], (fitted.upper - fitted.median)[order]
    style.band(axes, travel[order], below, above, label="fitted, 95 %")
    left = column(readings, "force read [N]") - fitted.median
    error, name = _error(readings)
    look: dict[str, Any] = {"color": style.VERMILION, "mfc": "white", "mew": 1.0, "capsize": 2.5, "linewidth": 0.9}
    axes.errorbar(travel, left, error, fmt="o", label=name, **look)
    axes.axhline(0.0, color=style.GREY, linewidth=0.6)
    style.legend(axes)
    return PanelDrawn(
        canvas, "Force left over", "Readings minus fitted force against travel, with the fit's 95 % band about zero."
    )


def _error(readings: pd.DataFrame) -> tuple[Array | None, str]:
    """Two standard errors of each force reading, where the results give them, and the points' name."""
    if "force standard error [N]" not in readings.columns:
        return None, "read − fitted"
    return 2.0 * column(readings, "force standard error [N]"), "read − fitted, ±2 se"

"""Force against travel: the calibrated part's curve with its band, and the readings."""

from __future__ import annotations

import pandas as pd

from pullback.studies.report.figures import style
from pullback.studies.report.figures.base import Figure, PanelDrawn, figure
from pullback.studies.report.figures.columns import column, need, triple
from pullback.studies.report.load import ResultsFolder

TITLE = "Force and travel"
_CAPTION = (
    "Force at the pulled end against travel, with the 95 % band of the calibrated part and the readings (points); on "
    "the right each reading minus the fitted force of its step, with the 95 % interval of that force around zero. "
    "Readings that all lie on one side, growing with the force, point to the load cell's scale."
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
    reach = (fitted.median - fitted.lower, fitted.upper - fitted.median)
    axes.errorbar(travel, 0 * travel, reach, fmt="_", color=style.BLUE, capsize=3, linewidth=1.0, label="fitted, 95 %")
    left = column(readings, "force read [N]") - fitted.median
    axes.plot(travel, left, "o", color=style.VERMILION, mfc="white", mew=1.0, label="read − fitted")
    axes.axhline(0.0, color=style.GREY, linewidth=0.6)
    style.legend(axes)
    return PanelDrawn(
        canvas, "Force left over", "Readings minus fitted force against travel, with 95 % intervals about zero."
    )

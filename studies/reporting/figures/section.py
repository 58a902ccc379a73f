"""The section along each part: fitted with its band, as drawn, and as measured."""

from __future__ import annotations

import numpy as np
import pandas as pd

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import Array, column, need, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Section"
_CAPTION = (
    "Unstretched section with its 95 % band, the outline (dashed) and the sections measured (points with ±2 standard "
    "errors); on the right the same as departure from the outline. Where the band leaves the dashed line, the part "
    "is thinner or thicker than drawn; where it widens, neither marks nor gauges say much."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One figure a piece."""
    need(folder, "area")
    return [_piece(folder, piece, k) for k, piece in enumerate(folder.entries("area", "piece"))]


def _piece(folder: ResultsFolder, piece: str, index: int) -> Figure:
    area, read = need(folder, "area", piece=piece), folder.table("sections", piece=piece)
    nominal = column(area, "outline [mm^2]")
    panels = [_panel(area, read, nominal, relative=False), _panel(area, read, nominal, relative=True)]
    return figure(f"section-{index}", f"Piece {piece}", _CAPTION, panels)


def _panel(area: pd.DataFrame, read: pd.DataFrame, nominal: Array, relative: bool) -> PanelDrawn:
    title = "Departure of the section from the outline" if relative else "Unstretched section"
    canvas, axes = style.panel("station X (mm)", "A₀ / outline − 1 (%)" if relative else "section A₀ (mm²)")
    at, fitted = column(area, "station [mm]"), triple(area, "area", "mm^2")

    def shown(value: Array, where: Array) -> Array:
        return 100.0 * (value / np.interp(where, at, nominal) - 1.0) if relative else value

    style.band(axes, at, shown(fitted.lower, at), shown(fitted.upper, at))
    axes.plot(at, shown(fitted.median, at), color=style.BLUE, label="fitted, 95 %")
    axes.plot(at, shown(nominal, at), color=style.INK, linestyle="--", linewidth=0.9, label="outline")
    if not read.empty:
        where, value = column(read, "station [mm]"), column(read, "area read [mm^2]")
        error = 2.0 * column(read, "standard error [mm^2]")
        error = 100.0 * error / np.interp(where, at, nominal) if relative else error
        axes.errorbar(
            where,
            shown(value, where),
            error,
            fmt="s",
            color=style.VERMILION,
            capsize=2.5,
            linewidth=0.9,
            label="measured, ±2 se",
        )
    style.legend(axes)
    return PanelDrawn(canvas, title, f"Fitted section with band, outline, and {len(read)} measured sections.")

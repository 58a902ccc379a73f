"""Where along the part it fails."""

from __future__ import annotations

import numpy as np

from pullback.studies.report.figures import style
from pullback.studies.report.figures.base import Figure, PanelDrawn, figure
from pullback.studies.report.figures.columns import column, need
from pullback.studies.report.load import ResultsFolder

TITLE = "Where it fails"
_CAPTION = (
    "Probability that the failure begins at each place along the unstretched part, given that the part fails between "
    "the grips. It is averaged over everything that is not known. A clamp that damages the part is not in it."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One panel for the next part and one for each pulled piece."""
    need(folder, "where")
    parts = folder.entries("where", "part")
    layout = "beside" if len(parts) == 1 else "pair"
    return [figure("where", TITLE, _CAPTION, [_panel(folder, part) for part in parts], layout)]


def _panel(folder: ResultsFolder, part: str) -> PanelDrawn:
    rows = need(folder, "where", part=part)
    at, probability = column(rows, "station [mm]"), 100 * column(rows, "probability")
    width = float(np.median(np.diff(at))) if at.size > 1 else 1.0
    canvas, axes = style.panel(f"station X (mm), {style.short(part, 30)}", f"probability per {width:.3g} mm (%)")
    axes.bar(at, probability, width, color=style.SKY, edgecolor=style.INK, linewidth=0.4)
    axes.set_ylim(bottom=0)
    return PanelDrawn(
        canvas,
        f"Place of failure, {style.short(part, 40)}",
        f"Bars; most probable near station {at[np.argmax(probability)]:.3g} mm.",
    )

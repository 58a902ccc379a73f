"""Where along the part it fails."""

from __future__ import annotations

import numpy as np

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import Array, column, need
from pullback.studies.reporting.load import ResultsFolder

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


def _edges(middle: Array) -> Array:
    """Ends of the cells with these middles; cells may differ in width, and the first begins at station 0."""
    edges = [0.0]
    for m in middle:
        edges.append(2.0 * m - edges[-1])
    found = np.array(edges)
    # Middles that do not fill the part from 0 on are taken as evenly spread.
    if np.all(np.diff(found) > 0.0):
        return found
    half = 0.5 * float(np.median(np.diff(middle))) if middle.size > 1 else 0.5
    return np.append(middle - half, middle[-1] + half)


def _panel(folder: ResultsFolder, part: str) -> PanelDrawn:
    rows = need(folder, "where", part=part)
    at, probability = column(rows, "station [mm]"), 100 * column(rows, "probability")
    edges = _edges(at)
    canvas, axes = style.panel(f"station X (mm), {style.short(part, 30)}", "probability per mm (%)")
    axes.stairs(probability / np.diff(edges), edges, fill=True, facecolor=style.SKY, edgecolor=style.INK, linewidth=0.8)
    axes.set_ylim(bottom=0)
    return PanelDrawn(
        canvas,
        f"Place of failure, {style.short(part, 40)}",
        f"Filled curve; most probable near station {at[np.argmax(probability)]:.3g} mm.",
    )

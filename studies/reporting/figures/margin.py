"""Distribution of the margin over parts and over what is not known."""

from __future__ import annotations

from typing import Any

import numpy as np

from pullback.studies.reporting import words
from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import column, need
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Margin"
_CAPTION = (
    "Predictive distribution of the margin, capacity / required − 1: parts differ and the data leave some things "
    "open, both are in it. The part of the bars left of the heavy line at zero falls short (hatched). Broken lines: "
    "{} margins, each named by the share of parts and the confidence (90/95: 90 % of parts, 95 % "
    "confidence). The bar above spans the 95 % interval, with the median as a point."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One figure with a panel a demand."""
    margins = folder.results["margins"]
    need(folder, "margin_distribution")
    panels = [_panel(folder, margin) for margin in margins]
    stated = folder.results["verdict"]["state"] == "stated"
    caption = _CAPTION.format("guaranteed" if stated else "computed, not guaranteed,")
    return [figure("margin", TITLE, caption, panels, layout="wide" if len(panels) == 1 else "pair")]


def _panel(folder: ResultsFolder, margin: dict[str, Any]) -> PanelDrawn:
    name = margin["demand"]
    wide = len(folder.results["margins"]) == 1
    canvas, axes = style.panel(
        f"margin (%), {style.short(name, 30)}",
        "probability per bar (%)",
        width=2 * style.WIDTH if wide else style.WIDTH,
    )
    rows = need(folder, "margin_distribution", demand=name)
    left, right = 100 * column(rows, "margin from"), 100 * column(rows, "margin to")
    height = 100 * column(rows, "probability")
    short = right <= 1e-9
    axes.bar(
        left[~short],
        height[~short],
        (right - left)[~short],
        align="edge",
        color=style.SKY,
        edgecolor="white",
        linewidth=0.3,
    )
    axes.bar(
        left[short],
        height[short],
        (right - left)[short],
        align="edge",
        color="white",
        edgecolor=style.VERMILION,
        hatch="////",
        linewidth=0.6,
    )
    top = float(np.max(height)) if height.size else 1.0
    axes.set_ylim(0, 1.36 * top)
    axes.axvline(0.0, color=style.INK, linewidth=1.8)
    _interval(axes, margin, 1.08 * top)
    _guaranteed(axes, margin, top)
    return PanelDrawn(canvas, f"Margin over {style.short(name, 40)}", _told(margin))


def _interval(axes: Any, margin: dict[str, Any], height: float) -> None:
    ends = margin["interval"] or (None, None)
    low, high = ends
    if not (words.is_number(margin["median"]) and words.is_number(low) and words.is_number(high)):
        return
    axes.plot([100 * low, 100 * high], [height] * 2, color=style.BLUE, linewidth=2.0, solid_capstyle="butt")
    axes.plot(100 * margin["median"], height, "o", color=style.BLUE, mfc="white", markersize=5)


def _guaranteed(axes: Any, margin: dict[str, Any], top: float) -> None:
    for k, entry in enumerate(margin["guaranteed"]):
        if words.is_number(entry.get("margin")):
            at = 100 * entry["margin"]
            axes.axvline(at, ymax=0.86, color=style.INK, linestyle=style.LINES[1 + k % 3], linewidth=1.0)
            pair = f"{100 * entry['reliability']:g}/{100 * entry['confidence']:g}"
            axes.annotate(pair, (at, (1.27 - 0.09 * (k % 2)) * top), ha="center", va="center", fontsize=7)


def _told(margin: dict[str, Any]) -> str:
    median, span = words.margin_band(margin["median"], margin["interval"])
    return f"Histogram of the margin with the zero line; median {median}, 95 % interval {span}."

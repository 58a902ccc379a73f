"""Capacity: share of parts that fail below a load."""

from __future__ import annotations

from typing import Any

from pullback.studies.report.figures import style
from pullback.studies.report.figures.base import Figure, PanelDrawn, figure
from pullback.studies.report.figures.columns import column, need, triple
from pullback.studies.report.load import ResultsFolder

TITLE = "Capacity"
_CAPTION = (
    "Share of parts that have failed when the load is reached. Full line and band: the share's median and 95 % "
    "credible band, what is not known; dotted: prediction for one part, scatter and ignorance together. Upright "
    "lines: loads required. Triangles: guaranteed loads, where the band's upper edge at the stated confidence meets "
    "the share that may fail."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One panel for the next part and one for each pulled piece."""
    need(folder, "capacity")
    parts = folder.entries("capacity", "part")
    panels = [_panel(folder, part) for part in parts]
    return [figure("capacity", TITLE, _CAPTION, panels, layout="wide" if len(panels) == 1 else "pair")]


def _panel(folder: ResultsFolder, part: str) -> PanelDrawn:
    wide = len(folder.entries("capacity", "part")) == 1
    canvas, axes = style.panel(
        f"load (N), {style.short(part, 30)}", "share failed (%)", width=2 * style.WIDTH if wide else style.WIDTH
    )
    rows = need(folder, "capacity", part=part)
    load, share = column(rows, "load [N]"), triple(rows, "share failed")
    style.band(axes, load, 100 * share.lower, 100 * share.upper)
    axes.plot(load, 100 * share.median, color=style.BLUE, label="share failed, 95 %")
    if "predictive" in rows.columns:
        axes.plot(
            load, 100 * column(rows, "predictive"), color=style.INK, linestyle=":", linewidth=1.4, label="one part"
        )
    for k, margin in enumerate(folder.results["margins"]):
        if margin["measure"] == "force":
            label = f"required, {style.short(margin['demand'])}"
            axes.axvline(
                margin["required"], color=style.VERMILION, linestyle=style.LINES[1 + k % 3], linewidth=1.3, label=label
            )
    _guaranteed(axes, _capacities(folder, part))
    axes.set_ylim(0, 100)
    style.legend(axes)
    return PanelDrawn(
        canvas,
        f"Share failed against load, {style.short(part, 40)}",
        "Rising curve with credible band and required loads.",
    )


def _capacities(folder: ResultsFolder, part: str) -> list[dict[str, Any]]:
    if part == "next part":
        return list((folder.results["next_part"] or {"capacity": []})["capacity"])
    return list(folder.results["pieces"].get(part, {"capacity": []})["capacity"])


def _guaranteed(axes: Any, capacities: list[dict[str, Any]]) -> None:
    for capacity in capacities:
        known = [g for g in capacity.get("guaranteed", []) if g["value"] is not None]
        if capacity["measure"] != "force" or capacity["service"] or not known:
            continue
        at, share = [g["value"] for g in known], [100 * (1 - g["reliability"]) for g in known]
        axes.plot(at, share, "v", color=style.INK, markersize=6, label="guaranteed", zorder=5, clip_on=False)

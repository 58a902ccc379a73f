"""Capacity: share of parts that fail below a load."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import Array, column, need, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "Capacity"
_CAPTION = (
    "Share of parts that have failed when the load is reached (for a pulled piece: the chance that it has), on a "
    "logarithmic scale. Full line and band: the share's median and 95 % credible band, what is not known; dotted: "
    "prediction for one part, scatter and ignorance together. Upright lines: loads required, named by "
    "their demand. Shares below the lower edge are not drawn: so many coupons cannot show them."
)
_TRIANGLES = (
    " Triangles: {} loads, each at the share that may fail; they lie just inside the band's upper edge, for their "
    "confidence is one-sided and the band is two-sided."
)
_LEAST = 0.5  # per cent, where the results do not say what the coupons can show


def draw(folder: ResultsFolder) -> list[Figure]:
    """One panel for the next part and one for each pulled piece."""
    need(folder, "capacity")
    parts = folder.entries("capacity", "part")
    panels = [_panel(folder, part) for part in parts]
    caption = _CAPTION + (_TRIANGLES.format(_kind(folder)) if _any_known(folder) else "")
    return [figure("capacity", TITLE, caption, panels, layout="wide" if len(panels) == 1 else "pair")]


def _kind(folder: ResultsFolder) -> str:
    """A withheld statement guarantees nothing."""
    return "guaranteed" if folder.results["verdict"]["state"] == "stated" else "computed, not guaranteed"


def _any_known(folder: ResultsFolder) -> bool:
    return any(_known(c) for part in folder.entries("capacity", "part") for c in _capacities(folder, part))


def _least(folder: ResultsFolder) -> float:
    """The smallest share, in per cent, that the coupons can speak of."""
    below = [(m["shortfall_probability"] or {}).get("below") for m in folder.results["margins"]]
    return 100.0 * max((b for b in below if b), default=_LEAST / 100.0)


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
            label = style.short(margin["demand"], 20)
            axes.axvline(
                margin["required"], color=style.VERMILION, linestyle=style.LINES[1 + k % 3], linewidth=1.3, label=label
            )
    _guaranteed(axes, _capacities(folder, part), _kind(folder))
    least = _least(folder)
    axes.set_yscale("log")
    axes.set_ylim(least, 100)
    ticks = [t for t in (0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100) if t >= least]
    axes.set_yticks(ticks, [f"{t:g}" for t in ticks])
    axes.set_yticks([], minor=True)
    begin = column(rows, "share failed upper") < least / 100.0
    required = [m["required"] for m in folder.results["margins"] if m["measure"] == "force"]
    axes.set_xlim(0.92 * min([load[begin].max() if begin.any() else load.min(), *required]), _end(load, share.lower))
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


def _end(load: Array, share: Array) -> float:
    """The load at which nearly all have failed, with a little room."""
    whole = load[share > 0.995]
    return float(1.04 * whole.min() if whole.size else load.max())


def _known(capacity: dict[str, Any]) -> list[dict[str, Any]]:
    if capacity["measure"] != "force" or capacity["service"]:
        return []
    return [g for g in capacity.get("guaranteed", []) if g["value"] is not None]


def _guaranteed(axes: Any, capacities: list[dict[str, Any]], kind: str) -> None:
    for capacity in capacities:
        known = _known(capacity)
        if known:
            at, share = [g["value"] for g in known], [100 * (1 - g["reliability"]) for g in known]
            label = kind.partition(",")[0]
            axes.plot(at, share, "v", color=style.INK, markersize=6, label=label, zorder=5, clip_on=False)

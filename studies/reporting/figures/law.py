"""The compound's law with its band, and what the coupons say of it."""

from __future__ import annotations

from typing import Any

import numpy as np
import pandas as pd

from pullback.studies.reporting import words
from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import NotDrawn, column, need, triple
from pullback.studies.reporting.load import ResultsFolder

TITLE = "The compound's law"
_CAPTION = (
    "Nominal stress against stretch with its 95 % band. Points: the coupons' pairs of stretch and stress at break; "
    "triangles: coupons that did not break; they scatter by their own reading errors, which the band does not hold. "
    "Hatched: stretches at which no force or stress was read; there only the "
    "law's form speaks, and the band does not hold what another form would say. The upright line is the median "
    "stretch at which a part fails."
)


def draw(folder: ResultsFolder) -> list[Figure]:
    """One panel over the full width."""
    rows = need(folder, "law")
    canvas, axes = style.panel("stretch λ (1)", "nominal stress P (MPa)", width=2 * style.WIDTH, height=3.0)
    at, fitted = column(rows, "stretch"), triple(rows, "nominal stress", "MPa")
    style.band(axes, at, fitted.lower, fitted.upper)
    axes.plot(at, fitted.median, color=style.BLUE, label=f"{words.law(folder.results['study']['law'])}, 95 %")
    axes.set_xlim(float(at.min()), float(at.max()))
    axes.set_ylim(0, None)
    _not_informed(axes, rows)
    _coupons(axes, folder)
    failing = folder.results["diagnostics"]["stretch_at_capacity"]
    if words.is_number(failing):
        axes.axvline(failing, color=style.INK, linestyle="--", linewidth=1.0, label="median stretch at failure")
    style.legend(axes)
    panel = PanelDrawn(
        canvas,
        "Nominal stress against stretch",
        "The law's curve with band, the coupons, and the range not calibrated.",
    )
    return [figure("law", TITLE, _CAPTION, [panel], layout="wide")]


def _not_informed(axes: Any, rows: pd.DataFrame) -> None:
    if "informed" not in rows.columns:
        return
    at, outside = column(rows, "stretch"), (rows["informed"] != "yes").to_numpy()
    if outside.any():
        look = {"facecolor": "none", "edgecolor": style.GREY, "hatch": "////", "linewidth": 0, "alpha": 0.5}
        whole = axes.get_xaxis_transform()
        axes.fill_between(at, 0, 1, where=outside, transform=whole, label="not calibrated", **look)


def _coupons(axes: Any, folder: ResultsFolder) -> None:
    """The pairs that can be placed on the curve; coupons with one column alone have no place on it."""
    table = folder.table("coupons")
    try:
        stress = column(table, "nominal stress read [MPa]")
        elongation = _elongation(folder, table)
    except NotDrawn:
        return
    broke = (table["broke"] == "yes").to_numpy()
    for which, marker, label in ((broke, "o", "coupons, broken"), (~broke, "^", "coupons, not broken")):
        which = which & np.isfinite(stress) & np.isfinite(elongation)
        if which.any():
            axes.plot(
                1 + elongation[which], stress[which], marker, color=style.VERMILION, mfc="white", mew=0.9, label=label
            )


def _elongation(folder: ResultsFolder, table: pd.DataFrame) -> Any:
    if "elongation read" in table.columns:
        return column(table, "elongation read")
    if folder.results["study"].get("criterion", "elongation") == "elongation":
        return column(table, "measure read")
    raise NotDrawn("the coupons' elongation is not in the results.")

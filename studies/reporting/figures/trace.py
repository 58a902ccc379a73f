"""Traces: every chain of every scalar unknown and of each margin."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import NotDrawn
from pullback.studies.reporting.load import ResultsFolder

Array = NDArray[np.float64]
TITLE = "Traces"
_CAPTION = (
    "Draws of {chains} chains against their number, one line a chain{thinned}. Lines that lie on each other and "
    "wander over the whole width from the start are what a converged run looks like; a line that stays apart, a "
    "drift or a flat stretch is not."
)
_POINTS, _MOST = 60, 16


def draw(folder: ResultsFolder) -> list[Figure]:
    """One low panel an unknown, two side by side; at most sixteen."""
    if folder.quick:
        raise NotDrawn("the quick approximation runs no chain.")
    series = _series(folder)
    if not series:
        raise NotDrawn("posterior.nc holds no chains.")
    chains, _ = next(iter(series.values())).shape
    draws = max(values.shape[1] for values in series.values())
    panels = [_panel(name, values, folder) for name, values in series.items()]
    thinned = "" if draws <= _POINTS else f", some {_POINTS} of up to {draws} draws shown"
    return [figure("trace", TITLE, _CAPTION.format(chains=chains, thinned=thinned), panels)]


def _series(folder: ResultsFolder) -> dict[str, Array]:
    """Margins first, then scalars, each (chain, draw)."""
    margin = folder.predictions.get("margin") or folder.posterior.get("margin")
    found: dict[str, Array] = {}
    if margin is not None and margin.values.ndim == 3:
        labels = margin.labels or tuple(str(k) for k in range(margin.values.shape[2]))
        found = {f"margin, {label}": margin.values[..., k] for k, label in enumerate(labels)}
    scalars = {name: drawn.values for name, drawn in folder.posterior.items() if drawn.values.ndim == 2}
    return dict(list((found | scalars).items())[:_MOST])


def _panel(name: str, values: Array, folder: ResultsFolder) -> PanelDrawn:
    thin = max(1, values.shape[1] // _POINTS)
    drawn = folder.posterior.get(name)
    factor, power = style.power_of_ten(values)
    unit = f"{power}{drawn.unit if drawn else ''}".strip() or "1"
    canvas, axes = style.panel("", "", height=0.95, bottom=0.2)
    at = np.arange(values.shape[1])[::thin]
    for k, chain in enumerate(values):
        axes.plot(at, chain[::thin] / factor, color=style.COLOURS[k % len(style.COLOURS)], linewidth=0.5, alpha=0.8)
    axes.locator_params(axis="y", nbins=4)
    axes.set_xlim(0, values.shape[1])
    axes.set_title(f"{style.short(style.spoken(name), 34)} ({unit})", fontsize=7.5, loc="left", pad=1)
    return PanelDrawn(
        canvas, f"Trace of {style.short(name, 34)}", f"{values.shape[0]} chains of {values.shape[1]} draws."
    )

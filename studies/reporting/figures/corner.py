"""The law's parameters, each and in pairs."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

from pullback.studies.reporting.figures import style
from pullback.studies.reporting.figures.base import Figure, PanelDrawn, figure
from pullback.studies.reporting.figures.columns import NotDrawn
from pullback.studies.reporting.load import ResultsFolder

Array = NDArray[np.float64]
TITLE = "The law's parameters, each and in pairs"
_CAPTION = (
    "On the diagonal each parameter's posterior (bars) and its prior (dashed, to the same scale{flat}). Below it "
    "each pair: the regions that hold 50 % (dark) and 95 % (light) of the draws. A narrow slanted region means that "
    "the data fix a combination of the two better than either; a posterior that fills its prior has learnt nothing."
)
_LEVELS = (0.95, 0.50)
_MOST, _SMALL, _BINS = 7, 3, 24


def draw(folder: ResultsFolder) -> list[Figure]:
    """One square figure, its caption beside it where it is small; at most seven parameters."""
    names = law_parameters(folder)
    if not names:
        raise NotDrawn("posterior.nc holds no draws of the law's parameters.")
    flat = "; a flat prior is not drawn" if any(name not in folder.prior for name in names) else ""
    told = f"Histograms of {', '.join(names)} and regions of each pair."
    panel = PanelDrawn(_grid(folder, names), "Posterior of the law's parameters", told)
    return [figure("corner", TITLE, _CAPTION.format(flat=flat), [panel], layout=_layout(names))]


def _layout(names: list[str]) -> str:
    return "broad" if len(names) <= _SMALL else "wide"


def law_parameters(folder: ResultsFolder) -> list[str]:
    """Names of the law's parameters: scalar draws that are no parameter of strength, section or gauge."""
    scalar = [name for name, drawn in folder.posterior.items() if drawn.values.ndim == 2]
    return [name for name in scalar if _of_law(name)][:_MOST]


def _of_law(name: str) -> bool:
    stems = ("c", "mu", "alpha", "jm", "n", "nkt")
    return name.rstrip("0123456789").lower() in stems


def _grid(folder: ResultsFolder, names: list[str]) -> Any:
    from matplotlib.figure import Figure as Canvas

    side = (1.4 if _layout(names) == "broad" else 2.0) * style.WIDTH
    canvas = Canvas(figsize=(side, side * (0.86 if len(names) > 2 else 0.6)))
    grid = canvas.subplots(len(names), len(names), squeeze=False)
    bottom = 0.5 / canvas.get_size_inches()[1]
    canvas.subplots_adjust(left=0.65 / side, right=0.985, bottom=bottom, top=0.985, wspace=0.09, hspace=0.09)
    factors = {name: style.power_of_ten(folder.posterior[name].values) for name in names}
    for row, below in enumerate(names):
        for place, across in enumerate(names):
            axes = grid[row, place]
            if place > row:
                axes.set_axis_off()
                continue
            if place == row:
                _diagonal(axes, folder, below, factors[below][0])
            else:
                _pair(axes, _flat(folder, across, factors), _flat(folder, below, factors))
            _named(axes, folder, row, place, names, factors)
    return canvas


def _flat(folder: ResultsFolder, name: str, factors: dict[str, tuple[float, str]]) -> Array:
    return folder.posterior[name].values.reshape(-1) / factors[name][0]


def _diagonal(axes: Any, folder: ResultsFolder, name: str, factor: float) -> None:
    draws = folder.posterior[name].values.reshape(-1) / factor
    low, high = _range(draws)
    axes.hist(
        draws, np.linspace(low, high, _BINS + 1), density=True, color=style.SKY, edgecolor=style.INK, linewidth=0.4
    )
    axes.set_xlim(low, high)
    if name in folder.prior:
        prior = folder.prior[name].values.reshape(-1) / factor
        prior = prior[np.isfinite(prior)]
        edges = np.linspace(low, high, 9)
        count, _ = np.histogram(prior, edges)
        height = count / max(prior.size, 1) / np.diff(edges)
        axes.stairs(height, edges, color=style.VERMILION, linestyle="--", linewidth=1.3)
    axes.set_yticks([])


def _range(draws: Array) -> tuple[float, float]:
    low, high = np.quantile(draws, [0.001, 0.999])
    room = 0.08 * (high - low) or 0.01 * max(abs(high), 1.0)
    return float(low - room), float(high + room)


def _pair(axes: Any, across: Array, below: Array) -> None:
    ranges = (_range(across), _range(below))
    count, x, y = np.histogram2d(across, below, bins=40, range=ranges)
    density = _smoothed(count)
    heights = [_height_holding(density, level) for level in _LEVELS]
    if heights[0] < heights[1] < density.max():
        middle_x, middle_y = 0.5 * (x[1:] + x[:-1]), 0.5 * (y[1:] + y[:-1])
        axes.contourf(middle_x, middle_y, density.T, [*heights, density.max()], colors=["#cfe3f1", "#5ba3d0"])
        axes.contour(middle_x, middle_y, density.T, heights, colors=style.INK, linewidths=0.7, linestyles=["--", "-"])
    axes.set_xlim(*ranges[0])
    axes.set_ylim(*ranges[1])


def _smoothed(count: Array) -> Array:
    """Counts smoothed by a Gaussian of 1.6 bins along both axes."""
    step = np.arange(-5, 6)
    kernel = np.exp(-0.5 * (step / 1.6) ** 2)
    kernel /= kernel.sum()
    for axis in (0, 1):
        count = np.apply_along_axis(np.convolve, axis, count, kernel, "same")
    return count


def _height_holding(density: Array, level: float) -> float:
    """The density above which lies the share `level` of the draws: bound of the highest-density region."""
    falling = np.sort(density.reshape(-1))[::-1]
    held = np.cumsum(falling) / falling.sum()
    return float(falling[np.searchsorted(held, level)])


def _named(
    axes: Any, folder: ResultsFolder, row: int, place: int, names: list[str], factors: dict[str, tuple[float, str]]
) -> None:
    axes.locator_params(axis="x", nbins=3)
    last = row == len(names) - 1
    axes.tick_params(labelbottom=last, labelleft=place == 0 and row > 0)
    if place < row:
        axes.locator_params(axis="y", nbins=4)
    if last:
        axes.set_xlabel(_label(folder, names[place], factors))
    if place == 0 and row > 0:
        axes.set_ylabel(_label(folder, names[row], factors))


def _label(folder: ResultsFolder, name: str, factors: dict[str, tuple[float, str]]) -> str:
    found = f"{factors[name][1]}{folder.posterior[name].unit}".strip()
    return f"{name} ({found})" if found else f"{name} (1)"

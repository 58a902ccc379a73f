"""The common look of all figures: sizes, lines that differ without colour, and SVG that can stand in one page."""

from __future__ import annotations

import io
import re
import warnings
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

import numpy as np
from markupsafe import Markup, escape
from numpy.typing import NDArray

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure as Canvas

Array = NDArray[np.float64]

WIDTH, HEIGHT = 3.4, 2.6  # inches; two panels side by side fill a page, one fills a telephone
# Eight colours that colour-blind readers tell apart (Okabe & Ito 2008), in an order that also alternates in lightness.
INK, BLUE, VERMILION, GREEN, PURPLE, SKY, ORANGE = (
    "#1b1b1b", "#0072b2", "#d55e00", "#009e73", "#cc79a7", "#56b4e9", "#e69f00",
)  # fmt: skip
GREY = "#6b6b6b"
COLOURS = (BLUE, VERMILION, GREEN, PURPLE, ORANGE, SKY, INK)
LINES: tuple[Any, ...] = ("-", (0, (5, 2)), (0, (1, 1.3)), (0, (6, 1.5, 1, 1.5)), (0, (3, 1, 1, 1, 1, 1)), (0, (9, 2)))
HATCHES = ("////", "\\\\\\\\", "....", "xxxx")
MARKERS = ("o", "s", "^", "D", "v", "P", "X")
_RC: Any = {
    "font.family": "sans-serif",
    "font.sans-serif": ["DejaVu Sans"],
    "font.size": 8.0,
    "axes.labelsize": 8.0,
    "xtick.labelsize": 7.5,
    "ytick.labelsize": 7.5,
    "legend.fontsize": 7.0,
    "legend.frameon": True,
    "legend.framealpha": 0.9,
    "legend.edgecolor": "none",
    "legend.borderpad": 0.2,
    "legend.handlelength": 2.0,
    "legend.handletextpad": 0.5,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.linewidth": 0.7,
    "axes.edgecolor": GREY,
    "xtick.color": INK,
    "ytick.color": INK,
    "axes.labelcolor": INK,
    "lines.linewidth": 1.2,
    "lines.markersize": 3.5,
    "hatch.linewidth": 0.5,
    "axes.formatter.use_mathtext": False,
    "axes.unicode_minus": True,
    "svg.fonttype": "none",
    "svg.hashsalt": "report",
    "text.parse_math": False,  # labels come from users: a dollar sign is a dollar sign
}


@contextmanager
def look() -> Iterator[None]:
    """The style, for the time of drawing; a label's glyph that the measuring font lacks is no fault of the report."""
    import matplotlib as mpl

    with mpl.rc_context(_RC), warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing from font")
        yield


def panel(x: str, y: str, width: float = WIDTH, height: float = HEIGHT, bottom: float = 0.42) -> tuple[Canvas, Axes]:
    """An empty panel with its axes named; margins in inches, the same in every panel of a row."""
    from matplotlib.figure import Figure as Canvas

    canvas = Canvas(figsize=(width, height))
    left, right, top = 0.56, 0.14, 0.22
    box = (left / width, bottom / height, 1 - (left + right) / width, 1 - (bottom + top) / height)
    axes = canvas.add_axes(box)
    axes.set_xlabel(x, labelpad=2)
    axes.set_ylabel(y, labelpad=3)
    axes.locator_params(nbins=6)
    return canvas, axes


def band(axes: Axes, x: Any, lower: Any, upper: Any, colour: str = BLUE, label: str | None = None, **more: Any) -> None:
    """A shaded band, bounded by hairlines so that it shows in black and white."""
    axes.fill_between(x, lower, upper, color=colour, alpha=0.2, linewidth=0, label=label, **more)
    for edge in (lower, upper):
        axes.plot(x, edge, color=colour, linewidth=0.5, alpha=0.8)


def step_style(index: int, count: int) -> dict[str, Any]:
    """Colour (light to dark over the steps) and line style (in turn) of one of `count` steps."""
    import matplotlib as mpl

    shade = mpl.colormaps["cividis"](0.72 * (1.0 - index / max(count - 1, 1)))
    return {"color": shade, "linestyle": LINES[index % len(LINES)]}


def label_ends(axes: Axes, x: float, heights: Sequence[float], texts: Sequence[str], prefix: str = "") -> None:
    """Each line's name at its right end, moved apart where two would overlap."""
    low, high = axes.get_ylim()
    gap = 0.06 * (high - low)
    order = np.argsort(heights, kind="stable")
    placed = np.array([heights[k] for k in order], float)
    for k in range(1, placed.size):
        placed[k] = max(placed[k], placed[k - 1] + gap)
    placed -= max(0.0, placed[-1] - max(high, max(heights))) if placed.size else 0.0
    for height, k in zip(placed, order, strict=True):
        name = short(prefix + texts[k], 8)
        axes.annotate(name, (x, height), (3, 0), textcoords="offset points", va="center", fontsize=6.5)


def spoken(name: str) -> str:
    """A variable's name as words: `strength_scale` becomes `strength scale`."""
    return name.replace("_", " ")


def short(text: str, most: int = 16) -> str:
    """A label cut to so many characters, on one line."""
    flat = " ".join(text.split())
    return flat if len(flat) <= most else flat[: most - 1] + "…"


_LETTER, _HANDLE, _ROW = 0.05, 0.37, 0.14  # inches at the legend's size: a letter, a handle with its gaps, a line


def legend(axes: Axes) -> None:
    """A legend above the axes, in as many lines as its entries need, so that it hides nothing and nothing of it."""
    handles, labels = axes.get_legend_handles_labels()
    if not labels:
        return
    box, size = axes.get_position(), axes.get_figure().get_size_inches()  # type: ignore[union-attr]
    room = size[0] * (1.0 - box.x0)
    columns = len(labels)
    while columns > 1 and _legend_width(labels, columns) > room:
        columns -= 1
    rows = -(-len(labels) // columns)
    axes.set_position((box.x0, box.y0, box.width, box.height - (rows - 1) * _ROW / size[1]))
    order = [k for c in range(columns) for k in range(c, len(labels), columns)]  # read along lines, not down columns
    axes.legend(
        [handles[k] for k in order], [labels[k] for k in order], ncols=columns, loc="lower left",
        bbox_to_anchor=(-0.02, 1.02), columnspacing=1.0, borderaxespad=0.0, labelspacing=0.25,
    )  # fmt: skip


def _legend_width(labels: Sequence[str], columns: int) -> float:
    """Width in inches of a legend filled line by line."""
    return sum(_HANDLE + _LETTER * max(len(label) for label in labels[c::columns]) for c in range(columns))


def power_of_ten(values: Array) -> tuple[float, str]:
    """A factor that brings values near 1, and how a unit's label names it: (1e-4, '10⁻⁴ ')."""
    finite = np.abs(values[np.isfinite(values)])
    largest = float(finite.max()) if finite.size else 0.0
    exponent = int(np.floor(np.log10(largest))) if largest > 0 else 0
    if -2 <= exponent <= 3:
        return 1.0, ""
    return 10.0**exponent, "10" + str(exponent).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")) + " "


def to_svg(canvas: Canvas, name: str, title: str, description: str) -> Markup:
    """The panel as inline SVG: scales with its box, names itself to a screen reader, has ids of its own."""
    text = io.StringIO()
    canvas.savefig(text, format="svg", metadata={"Date": None, "Creator": None, "Format": None, "Type": None})
    body = re.sub(r"<!--.*?-->|<metadata>.*?</metadata>|<style.*?</style>", "", text.getvalue(), flags=re.S)
    head = re.search(r"<svg[^>]*?viewBox=\"([^\"]*)\"[^>]*>", body, flags=re.S)
    if head is None:
        raise RuntimeError("matplotlib wrote an SVG without a viewBox")
    inner = _rounded(_own_ids(body[head.end() :], name).replace("xlink:href", "href"))
    opening = f'<svg viewBox="{head[1]}" role="img" aria-labelledby="{name}-title {name}-desc" class="panel">'
    told = f'<title id="{name}-title">{escape(title)}</title><desc id="{name}-desc">{escape(description)}</desc>'
    return Markup(opening + told + re.sub(r"\n\s*", "\n", inner))


def _own_ids(svg: str, name: str) -> str:
    svg = re.sub(r'\bid="', f'id="{name}-', svg)
    svg = re.sub(r'href="#', f'href="#{name}-', svg)
    return re.sub(r"url\(#", f"url(#{name}-", svg)


def _rounded(svg: str) -> str:
    """Path coordinates to a hundredth of a point: a fifth of the size, no visible change."""
    return re.sub(r' d="[^"]*"', lambda path: re.sub(r"(\.\d\d)\d+", r"\1", path[0]), svg, flags=re.S)

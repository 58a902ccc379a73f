"""What a figure is to the page: panels with a caption, or the reason why there are none."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import TYPE_CHECKING

from markupsafe import Markup

from pullback.studies.reporting.figures.style import to_svg
from pullback.studies.reporting.load import ResultsFolder

if TYPE_CHECKING:
    from matplotlib.figure import Figure as Canvas


@dataclass(frozen=True)
class Figure:
    """Panels side by side, a title, and a caption that says what to see.

    `layout`: "pair" two panels a row, "wide" one over the full width, "beside" and "broad" one with the
    caption at its side, over half and over most of the width.

    A figure without panels gives in `absent` the reason.
    """

    name: str
    title: str
    caption: str
    panels: tuple[Markup, ...] = ()
    absent: str = ""
    layout: str = "pair"


Draw = Callable[[ResultsFolder], list[Figure]]


@dataclass(frozen=True)
class PanelDrawn:
    """One drawn panel, with its own title and description for those who cannot see it."""

    canvas: Canvas
    title: str
    description: str


def figure(name: str, title: str, caption: str, panels: Iterable[PanelDrawn], layout: str = "pair") -> Figure:
    """A figure from drawn panels; `name` must be unique in the page and is the stem of every id."""
    svgs = [to_svg(p.canvas, f"{name}-{k}", p.title, p.description) for k, p in enumerate(panels)]
    return Figure(name, title, caption, tuple(svgs), layout=layout)


def not_drawn(name: str, title: str, reason: str) -> Figure:
    """A figure that could not be drawn, and why."""
    return Figure(name, title, "", absent=reason)

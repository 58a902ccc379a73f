"""The report's page order: which figures and tables follow the first page, and under which heading."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from types import ModuleType

from pullback.studies.reporting.figures import (
    capacity,
    corner,
    force_travel,
    law,
    margin,
    marks,
    section,
    stress,
    trace,
    where,
)
from pullback.studies.reporting.figures.base import Figure, not_drawn
from pullback.studies.reporting.figures.columns import NotDrawn
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables import demands
from pullback.studies.reporting.tables.base import Table
from pullback.studies.reporting.tables.capacities import capacities
from pullback.studies.reporting.tables.checks import checks, sensitivity
from pullback.studies.reporting.tables.diagnostics import diagnostics
from pullback.studies.reporting.tables.energy import energy
from pullback.studies.reporting.tables.parameters import parameters
from pullback.studies.reporting.tables.provenance import files, method
from pullback.studies.reporting.tables.rules import rules


@dataclass(frozen=True)
class Page:
    """One section of the report: its anchor, heading, figure modules and tables, in the order they are shown."""

    name: str
    heading: str
    figures: tuple[ModuleType, ...] = ()
    tables: tuple[Callable[[ResultsFolder], Table], ...] = ()


PAGES = (
    Page("marks", "Marks", (marks,)),
    Page("section", "Section", (section,)),
    Page("force", "Force and travel", (force_travel,)),
    Page("margin", "Margin", (margin,), (demands.expected,)),
    Page("capacity", "Capacity", (capacity,), (capacities,)),
    Page("where", "Where it fails", (where,), (energy,)),
    Page("law", "The compound's law", (law,)),
    Page("parameters", "Parameters", (corner,), (parameters,)),
    Page("stress", "Stress along the part", (stress,)),
    Page("sampling", "Sampling", (trace,), (diagnostics,)),
    Page("rules", "Rules and checks", (), (rules, checks, sensitivity)),
    Page("provenance", "Provenance", (), (method, files)),
)


@dataclass(frozen=True)
class Filled:
    """A page with its figures drawn and its tables worded."""

    page: Page
    figures: list[Figure]
    tables: list[Table]


def fill(folder: ResultsFolder) -> list[Filled]:
    """Every page of the report from a results folder."""
    return [
        Filled(page, [f for module in page.figures for f in _drawn(module, folder)], [t(folder) for t in page.tables])
        for page in PAGES
    ]


def _drawn(module: ModuleType, folder: ResultsFolder) -> list[Figure]:
    """A module's figures, or the reason why it has none."""
    try:
        return list(module.draw(folder))
    except NotDrawn as outcome:
        return [not_drawn(module.__name__.rpartition(".")[2], module.TITLE, str(outcome))]

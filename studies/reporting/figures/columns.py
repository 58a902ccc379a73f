"""Takes columns from the tables for drawing; what is absent becomes the reason why a figure is not drawn."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from pullback.studies.reporting.load import ResultsFolder

Array = NDArray[np.float64]


class NotDrawn(Exception):  # noqa: N818 - an outcome with a reason, not an error
    """A figure cannot be drawn from this folder; the message is the reason, in plain words."""


@dataclass(frozen=True)
class Band:
    """Median and 95 % interval of a quantity along a table's rows."""

    median: Array
    lower: Array
    upper: Array


def need(folder: ResultsFolder, name: str, **only: str) -> pd.DataFrame:
    """The table's rows; NotDrawn where there are none."""
    found = folder.table(name, **only)
    if found.empty:
        whose = " of ".join(["", *only.values()])
        raise NotDrawn(f"the results hold no rows{whose} in tables/{name}.csv.")
    return found


def column(table: pd.DataFrame, name: str) -> Array:
    """One column as numbers; NotDrawn where it is absent."""
    if name not in table.columns:
        raise NotDrawn(f"the results' tables have no column '{name}'.")
    return table[name].to_numpy(dtype=float)


def triple(table: pd.DataFrame, quantity: str, unit: str = "") -> Band:
    """The columns `<quantity> median`, `lower` and `upper`, with the unit in brackets where there is one."""
    tail = f" [{unit}]" if unit else ""
    return Band(*(column(table, f"{quantity} {which}{tail}") for which in ("median", "lower", "upper")))


def steps(table: pd.DataFrame) -> list[str]:
    """The steps' labels in order of appearance."""
    return list(dict.fromkeys(table["step"])) if "step" in table.columns else []

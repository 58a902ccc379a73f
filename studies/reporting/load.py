"""Reads a results folder into one object; nothing is computed anew."""

from __future__ import annotations

import json
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from pullback.studies.faults import BadInput, Fault
from pullback.studies.results.cells import original
from pullback.studies.results.schema import ResultsError, validate

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Drawn:
    """Draws of one quantity: `values` (chain, draw, ...) in `unit`, and the labels of what follows (chain, draw)."""

    values: Array
    unit: str
    labels: tuple[str, ...] = ()


@dataclass(frozen=True)
class ResultsFolder:
    """One run's results: results.json, the tables by name, and the groups of posterior.nc by variable name."""

    folder: Path
    results: dict[str, Any]
    tables: dict[str, pd.DataFrame]
    posterior: dict[str, Drawn] = field(default_factory=dict)
    prior: dict[str, Drawn] = field(default_factory=dict)
    sample_stats: dict[str, Drawn] = field(default_factory=dict)
    predictions: dict[str, Drawn] = field(default_factory=dict)

    @property
    def quick(self) -> bool:
        """Whether the posterior was approximated, not sampled."""
        return bool(self.results["study"]["method"] == "laplace")

    def table(self, name: str, **only: str) -> pd.DataFrame:
        """The table, or an empty one where there is none; rows whose column equals each of `only`."""
        found = self.tables.get(name, pd.DataFrame())
        for column, value in only.items():
            if column not in found.columns:
                return found.iloc[:0]
            found = found[found[column] == value]
        return found

    def entries(self, table: str, column: str) -> list[str]:
        """The distinct entries of a table's column, in order of appearance."""
        found = self.tables.get(table)
        return [] if found is None or column not in found.columns else list(dict.fromkeys(found[column]))


_GROUPS = ("posterior", "prior", "sample_stats", "predictions")


def load(folder: Path) -> ResultsFolder:
    """Read `folder`.

    Raises:
        BadInput: where results.json is absent, not JSON, or breaks its schema, or another file cannot be read.
    """
    results = _read_results(folder / "results.json")
    tables = {path.stem: _read_table(path) for path in sorted((folder / "tables").glob("*.csv"))}
    groups = [_read_group(folder / "posterior.nc", name) for name in _GROUPS]
    return ResultsFolder(folder, results, tables, *groups)


def _bad(path: Path, read: str, expected: str) -> BadInput:
    return BadInput(Fault(expected, read, "Run the study again, or name another folder.", file=str(path)))


def _read_results(path: Path) -> dict[str, Any]:
    try:
        found = json.loads(path.read_text(encoding="utf-8"))
        validate(found)
    except FileNotFoundError as fault:
        raise _bad(path, "nothing there", "the results of `pullback run`") from fault
    except (UnicodeDecodeError, json.JSONDecodeError) as fault:
        raise _bad(path, f"'{fault}'", "JSON in UTF-8") from fault
    except ResultsError as fault:
        raise _bad(path, f"'{fault}'", "results as the schema has them") from fault
    return dict(found)


_TEXT = (
    "piece",
    "step",
    "part",
    "demand",
    "coupon",
    "file",
    "parameter",
    "prior",
    "kind",
    "broke",
    "informed",
    "met",
    "reason",
    "meaning",
    "unit",
)


def _read_table(path: Path) -> pd.DataFrame:
    """A table; labels stay text, so that a step `1` or a piece `NA` is not taken for a number or a gap."""
    try:
        header = pd.read_csv(path, encoding="utf-8", nrows=0).columns
        gaps = {column: ["", "nan"] for column in header if column not in _TEXT}
        text = {column: str for column in header if column in _TEXT}
        found = pd.read_csv(path, encoding="utf-8", dtype=text, keep_default_na=False, na_values=gaps)
    except (UnicodeDecodeError, ValueError) as fault:
        raise _bad(path, f"'{fault}'", "a comma-separated table in UTF-8") from fault
    return found.assign(**{column: found[column].map(original) for column in text})


def _read_group(path: Path, group: str) -> dict[str, Drawn]:
    """One group's variables; an absent file or group is empty. xarray reads what ArviZ wrote, and starts sooner."""
    import xarray as xr

    if not path.exists():
        return {}
    try:
        with xr.open_dataset(path, group=group, engine="h5netcdf") as data:
            return {str(name): _drawn(variable) for name, variable in data.load().data_vars.items()}
    except (KeyError, OSError) as fault:
        if "group" in str(fault).lower():
            return {}
        raise _bad(path, f"'{fault}'", "draws in netCDF") from fault


def _drawn(variable: Any) -> Drawn:
    ordered = variable.transpose("chain", "draw", ...)
    extra = [ordered.coords[dim].values for dim in ordered.dims[2:] if dim in ordered.coords]
    labels = tuple(str(label) for label in extra[0]) if extra else ()
    return Drawn(np.asarray(ordered.values, float), str(variable.attrs.get("unit", "")), labels)

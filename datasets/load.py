"""Reference data by name, each folder a `data.csv` and a `source.toml` that says where it comes from."""

from __future__ import annotations

import csv
import hashlib
import tomllib
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

_HERE = Path(__file__).parent


@dataclass(frozen=True)
class Dataset:
    """One data set: `data` maps a column to its values (floats, or text where its unit is "text").

    `source` holds source.toml: title, source, obtained, uncertainty, left_out, units by column, and whatever else the
    data need to be understood.
    """

    name: str
    data: dict[str, NDArray[Any]]
    source: dict[str, Any]

    def __getitem__(self, column: str) -> NDArray[Any]:
        """The values of one column."""
        return self.data[column]


def names() -> list[str]:
    """The data sets there are, in alphabetical order."""
    return sorted(p.parent.name for p in _HERE.glob("*/source.toml"))


def load(name: str, folder: Path = _HERE) -> Dataset:
    """The data set `name`, below `folder`.

    Raises ValueError for a name there is none of (naming the nearest), for a data.csv that is not the one
    source.toml was written for, and for a column without a unit or a unit without a column.
    """
    path = folder / name
    if not (path / "source.toml").is_file():
        near = get_close_matches(name, names(), 1, cutoff=0.0)
        raise ValueError(f"no data set named {name!r}; the nearest is {near[0]!r}. Known: {', '.join(names())}")
    source = tomllib.loads((path / "source.toml").read_text(encoding="utf-8"))
    raw = (path / "data.csv").read_bytes()
    _check_sum(path, raw, source["sha256"])
    return Dataset(name, _columns(path, raw.decode("utf-8"), source["units"]), source)


def _check_sum(path: Path, raw: bytes, wanted: str) -> None:
    found = hashlib.sha256(raw).hexdigest()
    if found != wanted:
        raise ValueError(f"{path / 'data.csv'}: sha256 is {found}, source.toml was written for {wanted}")


def _columns(path: Path, text: str, units: dict[str, str]) -> dict[str, NDArray[Any]]:
    heading, *rows = csv.reader(text.splitlines())
    if set(heading) != set(units):
        raise ValueError(f"{path / 'data.csv'}: columns {heading}, but source.toml gives units for {list(units)}")
    by_column = dict(zip(heading, zip(*rows, strict=True), strict=True))
    return {k: np.array(v, str if units[k] == "text" else float) for k, v in by_column.items()}

"""The columns that give a section: width and thickness, or diameter, or area."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import BadInput
from pullback.studies.tables.table import Table

Array = NDArray[np.float64]
COLUMNS = ("width", "thickness", "diameter", "area")


@dataclass(frozen=True)
class AreaColumns:
    """Either `width` and `thickness` (mm), `diameter` (mm) or `area` (mm²); all (rows,), the others None."""

    width: Array | None = None
    thickness: Array | None = None
    diameter: Array | None = None
    area: Array | None = None


def read_areas(table: Table) -> AreaColumns:
    """The one of the three that the table has; raises BadInput for none or several, or cells that are not positive."""
    given = [c for c in COLUMNS if table.has(c)]
    if given in (["width"], ["thickness"]):
        table.require("width", "thickness")
    if given not in (["width", "thickness"], ["diameter"], ["area"]):
        read = f"the columns {', '.join(h.text for h in table.headings)}"
        raise BadInput(table.fault(None, "", read, "width and thickness, or diameter, or area"))
    dimension = {"area": "area"}
    return AreaColumns(**{c: table.numbers(c, dimension.get(c, "length"), low=0.0, zero=False) for c in given})

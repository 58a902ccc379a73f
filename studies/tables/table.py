"""A table as read, and its columns as labels or as numbers in the units inside."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import BadInput, Fault, Faults, listed, nearest, shown
from pullback.studies.study import Rows
from pullback.studies.tables.cells import is_missing, number
from pullback.studies.units import DIMENSIONS, conversion, is_usual

Array = NDArray[np.float64]
_MOST_FAULTS = 10


@dataclass(frozen=True)
class Heading:
    """A column's `name` in lower case, its `unit` if it has one, and the `text` as it stands."""

    name: str
    unit: str | None
    text: str


@dataclass(frozen=True)
class Table:
    """Cells as text, row by row, with each row's 1-based line in the file."""

    file: str
    header_line: int
    headings: tuple[Heading, ...]
    cells: list[list[str]]
    line: NDArray[np.int64]

    @property
    def rows(self) -> Rows:
        """Where the rows came from."""
        return Rows(self.file, self.line)

    def has(self, name: str) -> bool:
        """Whether there is a column of that name."""
        return any(h.name == name for h in self.headings)

    def require(self, *names: str) -> None:
        """Raise BadInput for each of the columns that is not there."""
        faults = Faults()
        for name in names:
            if not self.has(name):
                others = [h.name for h in self.headings]
                near = nearest(name, others)
                remedy = f'Is "{near}" meant?' if near else ""
                read = f"the columns {listed(h.text for h in self.headings)}"
                faults.append(self.fault(None, name, read, f"a column {shown(name)}", remedy))
        faults.settle()

    def unknown(self, known: Iterable[str]) -> list[str]:
        """A sentence where columns are not known, and so not read."""
        known = {*known, "piece"}
        names = [h.text for h in self.headings if h.name not in known]
        return [f"{self.file}: not known and not read: column {listed(names)}"] if names else []

    def of_piece(self, piece: str) -> Table:
        """The rows of one piece, or all where there is no column `piece`."""
        if not self.has("piece"):
            return self
        found = self.labels("piece")
        keep = [k for k, label in enumerate(found) if label == piece]
        if not keep:
            pieces = listed(dict.fromkeys(found))
            raise BadInput(self.fault(None, "piece", f"the pieces {pieces}", f'rows of the piece "{piece}"'))
        return self.where(np.isin(np.arange(len(found)), keep))

    def where(self, keep: NDArray[np.bool_]) -> Table:
        """The rows that `keep` (rows,) marks."""
        return replace(self, cells=[c for c, k in zip(self.cells, keep, strict=True) if k], line=self.line[keep])

    def labels(self, name: str) -> list[str]:
        """A column as text; raises BadInput for missing cells."""
        column = self._column(name)
        bad = [k for k, row in enumerate(self.cells) if is_missing(row[column])]
        self._raise(self.fault(k, name, "a missing cell", "a label") for k in bad)
        return [row[column] for row in self.cells]

    def numbers(
        self, name: str, dimension: str, missing: bool = False, low: float = -math.inf, zero: bool = True
    ) -> Array:
        """A column in the unit inside, NaN where a cell is missing and may be.

        Raises BadInput for each cell that is not a finite number, is missing and may not be, or lies below `low`
        (or on it, unless `zero`).
        """
        column = self._column(name)
        factor, offset = self._conversion(self.headings[column], dimension)
        values, faults = np.full(len(self.cells), np.nan), Faults()
        for k, row in enumerate(self.cells):
            cell = row[column]
            if is_missing(cell):
                if not missing:
                    faults.append(self.fault(k, name, f"a missing cell ({shown(cell)})", "a number"))
                continue
            try:
                values[k] = number(cell) * factor + offset
            except ValueError as error:
                faults.append(self.fault(k, name, shown(cell), str(error)))
                continue
            if not is_usual(values[k]):
                faults.append(self.fault(k, name, shown(cell), "a finite number of usual size"))
            elif values[k] < low or (values[k] == low and not zero):
                wanted = f"{'at least' if zero else 'more than'} {low:g}"
                faults.append(self.fault(k, name, shown(cell), wanted))
        self._raise(faults)
        return values

    def fault(self, row: int | None, column: str, read: str, expected: str, remedy: str = "") -> Fault:
        """A fault in a column of this table, at a row or (None) at the headings."""
        line = self.header_line if row is None else int(self.line[row])
        return Fault(expected, read, remedy, self.file, line, f"column {column}" if column else "")

    def faults_where(self, bad: NDArray[np.bool_], column: str, read: Callable[[int], str], expected: str) -> None:
        """Raise BadInput with a fault for each row that `bad` marks."""
        self._raise(self.fault(int(k), column, read(int(k)), expected) for k in np.flatnonzero(bad))

    def _column(self, name: str) -> int:
        self.require(name)
        return next(k for k, h in enumerate(self.headings) if h.name == name)

    def _conversion(self, heading: Heading, dimension: str) -> tuple[float, float]:
        example = DIMENSIONS[dimension][1] if dimension != "relative" else "%"
        if heading.unit is None:
            expected = f"a unit of {dimension} in the heading, as in {heading.text} [{example}]"
            raise BadInput(self.fault(None, heading.name, "no unit", expected))
        try:
            return conversion(heading.unit, dimension)
        except BadInput as bad:
            right = bad.faults[0].remedy
            remedy = f"Write [{right}]." if right else f"Read are {listed(DIMENSIONS[dimension][3])}."
            raise BadInput(self.fault(None, heading.name, heading.text, bad.faults[0].expected, remedy)) from None

    def _raise(self, faults: Iterable[Fault]) -> None:
        faults = list(faults)
        if len(faults) > _MOST_FAULTS:
            more = self.fault(None, "", f"{len(faults) - _MOST_FAULTS} more faults of the kind", "none")
            faults = [*faults[:_MOST_FAULTS], more]
        if faults:
            raise BadInput(faults)

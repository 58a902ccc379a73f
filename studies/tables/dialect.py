"""CSV as it is found: comma, semicolon or tab; comments, blank lines and a units row; cells still as text."""

from __future__ import annotations

import csv
import re
from dataclasses import dataclass

import numpy as np

from pullback.studies.faults import BadInput, Fault, Faults, shown
from pullback.studies.tables.cells import is_missing, is_number
from pullback.studies.tables.table import Heading, Table
from pullback.studies.units import is_unit

_WITH_UNIT = re.compile(r"(.*?)\s*[\[(]\s*([^\[\]()]*?)\s*[\])]")
_MOST_FAULTS = 10


@dataclass(frozen=True)
class _Line:
    number: int
    cells: list[str]


def read_table(text: str, file: str) -> Table:
    """The table in a text; raises BadInput with every line that does not fit the headings."""
    kept = [(n, bare) for n, line in enumerate(text.splitlines(), 1) if (bare := _without_comment(line)).strip()]
    if not kept:
        raise BadInput(Fault(file=file, read="no line but comments", expected="headings and rows"))
    delimiter = _delimiter(kept[0][1])
    lines = _split(kept, delimiter, file)
    headings = _headings(lines[0], file)
    rows = lines[1:]
    if rows and _is_units_row(headings, rows[0]):
        headings = _with_units(headings, rows[0], file)
        rows = rows[1:]
    if not rows:
        raise BadInput(Fault(file=file, read="headings without rows", expected="at least one row"))
    _check_widths(rows, len(headings), delimiter, file)
    columns = [k for k, h in enumerate(headings) if h.text or any(r.cells[k] for r in rows)]
    unnamed = [k for k in columns if not headings[k].text]
    if unnamed:
        column = f"column {unnamed[0] + 1}"
        raise BadInput(Fault(file=file, line=lines[0].number, key=column, read="no heading", expected="a heading"))
    cells = [[r.cells[k] for k in columns] for r in rows]
    numbers = np.array([r.number for r in rows], dtype=np.int64)
    table = Table(file, lines[0].number, tuple(headings[k] for k in columns), cells, numbers)
    _check_decimal_sign(table)
    return table


def _without_comment(line: str) -> str:
    if "#" not in line:
        return line
    if '"' not in line:
        return line.split("#", 1)[0]
    quoted = False
    for k, c in enumerate(line):
        quoted ^= c == '"'
        if c == "#" and not quoted:
            return line[:k]
    return line


def _delimiter(heading: str) -> str:
    """Tab or semicolon where the headings hold one, else comma; none where they hold neither (one column)."""
    return next((d for d in ("\t", ";", ",") if d in heading), "")


def _split(kept: list[tuple[int, str]], delimiter: str, file: str) -> list[_Line]:
    faults, lines = Faults(), []
    for number, line in kept:
        try:
            lines.append(_Line(number, _cells(line, delimiter)))
        except csv.Error:
            faults.append(Fault(file=file, line=number, read=shown(line.strip()), expected="quotation marks in pairs"))
    faults.settle()
    return lines


def _cells(line: str, delimiter: str) -> list[str]:
    if '"' not in line:
        return [c.strip() for c in (line.split(delimiter) if delimiter else [line])]
    return [c.strip() for c in next(csv.reader([line.strip()], delimiter=delimiter or "\t", strict=True))]


def _headings(line: _Line, file: str) -> list[Heading]:
    found = [_heading(text) for text in line.cells]
    names = [h.name for h in found if h.text]
    twice = sorted({n for n in names if names.count(n) > 1})
    if twice:
        expected = "each heading once"
        raise BadInput(
            [
                Fault(file=file, line=line.number, key=n, read=f"the heading {shown(n)} twice", expected=expected)
                for n in twice
            ]
        )
    if names and all(is_number(n) for n in names):
        raise BadInput(Fault(file=file, line=line.number, read="a row of numbers", expected="headings"))
    return found


def _heading(text: str) -> Heading:
    match = _WITH_UNIT.fullmatch(text)
    name, unit = (match[1], match[2]) if match else (text, None)
    return Heading(re.sub(r"[\s_]+", " ", name).strip().lower(), unit, text)


def _is_units_row(headings: list[Heading], row: _Line) -> bool:
    """A row of nothing but units, or, where no heading has a unit, one without any number."""
    given = [c for c in row.cells if not is_missing(c)]
    if not given or any(is_number(c) for c in given):
        return False
    units = [is_unit(_bare(c)) for c in given]
    return all(units) or (any(units) and not any(h.unit for h in headings))


def _bare(cell: str) -> str:
    return cell.strip("[]() ")


def _with_units(headings: list[Heading], row: _Line, file: str) -> list[Heading]:
    _check_widths([row], len(headings), "", file)
    units = [None if is_missing(c) else _bare(c) for c in row.cells]
    return [Heading(h.name, h.unit or u, h.text) for h, u in zip(headings, units, strict=True)]


def _check_widths(rows: list[_Line], width: int, delimiter: str, file: str) -> None:
    """Every row must have as many cells as there are headings; empty ones too many are cut off."""
    faults = Faults()
    for row in rows:
        while len(row.cells) > width and not row.cells[-1]:
            row.cells.pop()
        if len(row.cells) == width:
            continue
        few, comma = len(row.cells) < width, delimiter == "," and len(row.cells) > width
        remedy = "Is the file cut?" if few else "With decimal commas, put semicolons between columns." if comma else ""
        read = f"{len(row.cells)} cell{'s' * (len(row.cells) != 1)}"
        faults.append(
            Fault(file=file, line=row.number, read=read, expected=f"{width}, one for each heading", remedy=remedy)
        )
    if faults:
        raise BadInput(faults[:_MOST_FAULTS])


def _check_decimal_sign(table: Table) -> None:
    """Raise BadInput where some numbers have a decimal comma and others a decimal point."""
    labels = [k for k, h in enumerate(table.headings) if h.name in ("step", "piece")]
    seen: dict[str, int] = {}
    for k, row in enumerate(table.cells):
        for j, cell in enumerate(row):
            sign = "," if "," in cell else "." if "." in cell else ""
            if sign and sign not in seen and j not in labels and is_number(cell):
                seen[sign] = k
    if len(seen) == 2:
        read = f"a decimal comma in line {table.line[seen[',']]}, a decimal point in line {table.line[seen['.']]}"
        raise BadInput(table.fault(max(seen.values()), "", read, "one and the same throughout"))

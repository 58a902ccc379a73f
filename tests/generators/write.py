"""Tests a piece of an invented lot and writes the tables of its study."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from itertools import count
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from generators.measure import Pulled, Readings, measure, pull
from generators.piece import Lot, as_loading, draw_lot, draw_piece
from generators.statics import Bar
from generators.strength import capacity
from generators.world import World

PIECE = "P1"


@dataclass(frozen=True)
class Tested:
    """A lot, the piece drawn from it, its true pull and the readings."""

    lot: Lot
    bar: Bar
    pulled: Pulled
    readings: Readings


def tested_piece(world: World, rng: np.random.Generator) -> Tested:
    """Draw lots and pieces until one survives its own test, and read it."""
    for _ in count():
        lot = draw_lot(world, rng)
        bar = draw_piece(world, lot, rng)
        pulled = pull(world, bar)
        if capacity(as_loading(bar), world.strength, rng)[0] > pulled.force.max():
            return Tested(lot, bar, pulled, measure(world, bar, pulled, rng))
    raise AssertionError("unreachable")


def write_tables(folder: Path, world: World, r: Readings, note: str = "") -> None:
    """The study's tables as CSV; `note` becomes their first line, a comment."""
    test, steps = world.test, [str(k + 1) for k in range(world.test.steps)]
    o = world.outline
    outline = zip(o.station, o.width, o.thickness, strict=True)
    _csv(folder / "outline.csv", note, ["station [mm]", "width [mm]", "thickness [mm]"], outline)
    marks = ((k, s, f"{r.marks[i, j]:.2f}") for j, k in enumerate(steps) for i, s in enumerate(test.marks))
    _csv(folder / f"{PIECE}_marks.csv", note, ["step", "station [mm]", "position [mm]"], marks)
    machine = ((k, f"{t:.2f}", f"{f:.3f}") for k, t, f in zip(steps, r.travel, r.force, strict=True))
    _csv(folder / f"{PIECE}_readings.csv", note, ["step", "travel [mm]", "force [N]"], machine)
    names = {"area": ["area [mm^2]"], "width and thickness": ["width [mm]", "thickness [mm]"]}[test.section_columns]
    sections = ((s, *(f"{v:.3f}" for v in row)) for s, row in zip(test.sections, r.sections, strict=True))
    _csv(folder / f"{PIECE}_sections.csv", note, ["station [mm]", *names], sections)
    _csv(folder / "coupons.csv", note, *_coupons(test.coupon_columns, r.coupons, r.broke))


def _coupons(
    columns: str, pairs: NDArray[np.float64], broke: list[str]
) -> tuple[list[str], list[tuple[str, ...]]]:
    both = [("elongation at break [%]", [f"{100 * e:.1f}" for e in pairs[:, 0]])]
    both.append(("nominal stress at break [MPa]", [f"{s:.3f}" for s in pairs[:, 1]]))
    kept = [c for c in both if columns in ("both", c[0].split(" at ")[0])]
    return [c[0] for c in kept] + ["broke"], list(zip(*(c[1] for c in kept), broke, strict=True))


def _csv(path: Path, note: str, heading: list[str], rows: Iterable[Iterable[Any]]) -> None:
    lines = [f"# {note}"] if note else []
    lines += [",".join(heading), *(",".join(str(c) for c in row) for row in rows)]
    path.write_bytes(("\n".join(lines) + "\n").encode())

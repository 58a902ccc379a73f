"""Broken coupons, and those that held."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pullback.studies.faults import BadInput, shown
from pullback.studies.study import CouponsTable
from pullback.studies.tables.table import Table

Array = NDArray[np.float64]
ELONGATION, STRESS = "elongation at break", "nominal stress at break"
KNOWN = (ELONGATION, STRESS, "broke", "volume")
NOT_USED = ("speed", "temperature")
_BROKE = {"yes": True, "no": False, "clamp": False}


def read_coupons(table: Table, criterion: str, volume: float | None, weakest_link: bool) -> CouponsTable:
    """One row a coupon; the criterion's column is needed, the other one may be there.

    `volume` (mm³) holds for all where there is no such column; it is needed for the weakest link. Without a column
    `broke` all broke.
    """
    needed, other = (ELONGATION, STRESS) if criterion == "elongation" else (STRESS, ELONGATION)
    dimension = {ELONGATION: "relative", STRESS: "stress"}
    table.require(needed)
    values = {needed: table.numbers(needed, dimension[needed], low=0.0, zero=False)}
    absent = np.full(len(table.cells), np.nan)
    values[other] = table.numbers(other, dimension[other], True, 0.0, False) if table.has(other) else absent
    return CouponsTable(
        values[ELONGATION], values[STRESS], _broke(table), _volume(table, volume, weakest_link), table.rows
    )


def distinct_failures(coupons: CouponsTable, criterion: str) -> int:
    """How many different values of the criterion's measure broken coupons have."""
    measure = coupons.elongation if criterion == "elongation" else coupons.stress
    return int(np.unique(measure[coupons.broke]).size)


def _broke(table: Table) -> NDArray[np.bool_]:
    if not table.has("broke"):
        return np.ones(len(table.cells), dtype=bool)
    words = [w.lower() for w in table.labels("broke")]
    bad = np.array([w not in _BROKE for w in words])
    table.faults_where(bad, "broke", lambda k: shown(words[k]), "yes, no or clamp")
    return np.array([_BROKE[w] for w in words])


def _volume(table: Table, common: float | None, needed: bool) -> Array:
    if table.has("volume"):
        return table.numbers("volume", "volume", low=0.0, zero=False)
    if common is None and needed:
        expected = "a column volume, or coupon_volume in [strength], which weakest-link scatter scales with"
        raise BadInput(table.fault(None, "volume", "nothing", expected))
    return np.full(len(table.cells), np.nan if common is None else common)

"""A study of a tapered strap in which every gauge and every kind of reading has a part, made in memory from a known
strap; drive, axis, load cell, criterion and scatter as asked. Invented; small, so that it is solved in milliseconds.
"""

from __future__ import annotations

from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pullback.forward import BoundLaw, Force, Part, Travel, Weight, law, solve
from pullback.forward.loads import STANDARD_GRAVITY
from pullback.inverse.priors import HalfNormal, LogNormal, Normal
from pullback.studies.assemble import Model, assemble
from pullback.studies.study import (
    AreaVariation,
    CouponsTable,
    Demand,
    Gauge,
    Gauges,
    LawSpec,
    MarksTable,
    OutlineTable,
    PartSpec,
    Pull,
    ReadingsTable,
    Rows,
    SamplerSpec,
    SectionsTable,
    StatementSpec,
    Strength,
    Study,
)

Array = NDArray[np.float64]

LENGTH, DENSITY, ELEMENTS = 60.0, 2e-2, 20  # heavy, so that weight counts beside the gauges
STEPS = ("1", "2", "3", "4")
LAWS = {
    "yeoh": law("yeoh", c10=0.35, c20=-0.004, c30=2e-4),
    "neo-hookean": law("neo-hookean", mu=0.6),
    "ogden-2": law("ogden-2", mu1=0.6, alpha1=1.4, mu2=0.002, alpha2=5.0),
}
GAUGES = Gauges(
    mark_reading=Gauge(0.15),
    mark_placement=Gauge(0.1),
    grip_position=Gauge(0.3),
    position_scale=Gauge(0.002),
    travel_reading=Gauge(0.05),
    travel_zero=Gauge(0.2),
    force_reading=Gauge(0.05),
    force_zero=Gauge(0.02),
    force_scale=Gauge(0.005, True),
    mass_reading=Gauge(0.02),
    density=Gauge(0.005, True),
    coupon_elongation=Gauge(0.02, True),
    coupon_stress=Gauge(0.03, True),
    coupon_scale=Gauge(0.02),
)


def _rows(n: int) -> Rows:
    return Rows("table.csv", np.arange(n))


def _area(x: Array) -> Array:
    return np.interp(x, [0.0, 20.0, LENGTH], [20.0, 14.0, 16.0]) * 2.0


def _tables(rubber: BoundLaw, by_travel: bool, weight: float, at_held: bool) -> tuple[MarksTable, ReadingsTable]:
    """Readings of the known strap, with errors of the gauges' size."""
    rng = np.random.default_rng(5)
    x = np.linspace(0.0, LENGTH, 81)
    part = Part(x, _area(0.5 * (x[1:] + x[:-1])), DENSITY)
    travel = np.array([8.0, 25.0, 60.0, 100.0])
    loads = [Weight(weight)] if weight else []
    state = solve(part, rubber, Travel(travel), loads)
    if not by_travel:
        state = solve(part, rubber, Force(np.maximum(state.force, 0.5)), loads)
    force = state.held_force if at_held else state.force
    station = np.array([6.0, 17.0, 26.0, 39.0, 52.0])
    step, at, position = [], [], []
    for k, label in enumerate(STEPS):
        for j, s in enumerate(station):
            if (j + k) % 5:
                step.append(label)
                at.append(s)
                position.append(np.interp(s, x, state.position[:, k]) + 0.15 * rng.standard_normal())
    marks = MarksTable(tuple(step), np.array(at), np.array(position), _rows(len(step)))
    read = state.travel + 0.05 * rng.standard_normal(4)
    felt = force + 0.05 * rng.standard_normal(4)
    return marks, ReadingsTable(STEPS, read, felt, _rows(4))


def _coupons(rubber: BoundLaw) -> CouponsTable:
    elongation = np.array([3.6, 4.1, 4.4, 3.9, 4.3, 4.0])
    stress = rubber.law.stress(1.0 + elongation, rubber.theta[:, None]) * np.array([1.03, 0.97, 1.0, 0.98, 1.02, 1.01])
    broke = np.array([True, True, False, True, True, False])
    return CouponsTable(elongation, stress, broke, np.full(6, 396.0), _rows(6))


def study(
    rubber: str = "yeoh", driven_by: str = "travel", axis: str = "held end above", force_at: str = "pulled end",
    tared: str = "without piece", criterion: str = "elongation", scatter: str = "weibull",
) -> Study:  # fmt: skip
    """The study."""
    weight = {"held end above": 1.0, "held end below": -1.0, "horizontal": 0.0}[axis] * STANDARD_GRAVITY
    bound = LAWS[rubber]
    marks, readings = _tables(bound, driven_by == "travel", weight, force_at == "held end")
    priors = {
        p.name: Normal(v, 0.3 * abs(v)) if p.unit != "MPa" or v < 0.0 else LogNormal(v, 1.6)
        for p, v in zip(bound.law.parameters, bound.theta, strict=True)
    }
    corners = np.array([0.0, 20.0, LENGTH])
    outline = OutlineTable(corners, _area(corners) / 2.0, np.full(3, 2.0), None, _rows(3))
    at = np.array([10.0, 30.0, 45.0])
    sections = SectionsTable(at, _area(at) * np.array([1.01, 0.99, 1.005]), np.full(3, 0.01), _rows(3))
    x = np.linspace(0.0, LENGTH, 601)
    pull = Pull(
        "P1", driven_by, axis, force_at, tared, marks, readings, sections, float(DENSITY * np.trapezoid(_area(x), x)),
        0.0, None, None, None, "keep", {},
    )  # fmt: skip
    return Study(
        folder=Path(), title="every gauge", seed=3, record={},
        part=PartSpec(LENGTH, outline, DENSITY, None, None, None),
        area_variation=AreaVariation(0.02, 0.02, HalfNormal(0.05), LogNormal(15.0, 1.2)),
        law=LawSpec(rubber, HalfNormal(0.03), priors), pulls=(pull,), gauges=GAUGES,
        strength=Strength(criterion, scatter, _coupons(bound), None, None), demands=(Demand("hold", 10.0, 1.5),),
        statement=StatementSpec((0.9, 0.99), 0.95, "next part"), sampler=SamplerSpec(1000, 1.0), sha256="", files={},
    )  # fmt: skip


def model(**how: str) -> Model:
    """The study put together on a coarse mesh."""
    return assemble(study(**how), ELEMENTS)

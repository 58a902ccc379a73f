"""Draws real parts of a lot: the piece that is pulled, and many that might be the next."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq

from generators.field import gaussian_process
from generators.laws import stress
from generators.statics import GRAVITY, TOWARDS_PULLED_END, Bar
from generators.strength import Loading, hazard
from generators.world import World

Array = NDArray[np.float64]

FINE = 1201
"""Stations of the pulled piece."""

COARSE = 121
"""Stations of a next part."""


@dataclass(frozen=True)
class Lot:
    """What all parts of the lot share: departure of log section from the outline, and the true density."""

    offset: float
    density: float


def draw_lot(world: World, rng: np.random.Generator) -> Lot:
    """A lot; the density departs from the stated one by its gauge's error."""
    error = world.gauges.get("density", 0.0) * rng.standard_normal()
    return Lot(world.variation.lot * rng.standard_normal(), world.density * (1.0 + error))


def draw_piece(world: World, lot: Lot, rng: np.random.Generator) -> Bar:
    """One part, finely resolved."""
    x = np.linspace(0.0, world.length, FINE)
    log_area, stiffness = _departures(world, lot, x, 1, rng)
    area = world.outline.area(x) * np.exp(log_area[0])
    return Bar(x, area, world.law, world.theta, float(stiffness[0]), lot.density, world.test.axis)


def draw_parts(world: World, lot: Lot, count: int, rng: np.random.Generator) -> Loading:
    """`count` next parts of the lot."""
    x = np.linspace(0.0, world.length, COARSE)
    log_area, stiffness = _departures(world, lot, x, count, rng)
    return _loading(world, lot, x, world.outline.area(x) * np.exp(log_area), stiffness)


def _departures(
    world: World, lot: Lot, x: Array, count: int, rng: np.random.Generator
) -> tuple[Array, Array]:
    """Departures of log section from the outline (count, stations), and stiffness factors (count,)."""
    v = world.variation
    along = gaussian_process(x, v.spread, v.correlation_length, count, rng)
    whole = lot.offset + v.part_to_part * rng.standard_normal((count, 1))
    return whole + along, np.exp(v.stiffness * rng.standard_normal(count))


def _loading(world: World, lot: Lot, x: Array, area: Array, stiffness: Array) -> Loading:
    step = 0.5 * (area[:, 1:] + area[:, :-1]) * np.diff(x)
    beyond = np.concatenate((np.cumsum(step[:, ::-1], axis=1)[:, ::-1], np.zeros((len(area), 1))), axis=1)
    weight = TOWARDS_PULLED_END[world.test.axis] * GRAVITY * lot.density * beyond
    return Loading(x, area, weight, stiffness, world.law, world.theta)


def as_loading(bar: Bar) -> Loading:
    """A single part as the capacity needs it."""
    return Loading(bar.x, bar.area[None], bar.weight_beyond()[None], np.array([bar.stiffness]), bar.law, bar.theta)


def nominal_capacity(world: World) -> float:
    """Force (N) at which a part exactly to the outline breaks with probability one half."""
    x = np.linspace(0.0, world.length, COARSE)
    area = world.outline.area(x)[None]
    loading = _loading(world, Lot(0.0, world.density), x, area, np.ones(1))
    return _break_force(world, loading, np.log(2.0))


def _break_force(world: World, loading: Loading, exponent: float) -> float:
    """Force (N) at which a weakest-link part has integrated hazard `exponent`, or a log-normal one meets its median."""
    strength = world.strength
    if strength.scatter == "lognormal":
        stretch = strength.stretch(np.array([strength.scale]), world.law, world.theta)
        at_break = stress(world.law, world.theta, stretch)
        return float(np.min(at_break * loading.area[0] - loading.weight[0]))

    def excess(force: float) -> float:
        return float(np.log(hazard(loading, strength, np.array([force]))[0] + 1e-300) - np.log(exponent))

    low, high = 1e-3, 1.0
    while excess(high) < 0.0:
        low, high = high, 1.3 * high
    return float(brentq(excess, low, high, rtol=1e-10))

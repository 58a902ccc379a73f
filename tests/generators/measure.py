"""Pulls a piece as a test house would, and reads every gauge with its error."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from generators.laws import stress
from generators.piece import nominal_capacity
from generators.statics import Bar, cell_reading
from generators.world import World

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Pulled:
    """The true state of the piece in each step: end force (N), travel (mm), positions (stations, steps), stretches."""

    force: Array
    travel: Array
    position: Array
    stretch: Array


@dataclass(frozen=True)
class Readings:
    """What the test house writes down; `marks` (marks, steps), `sections` (stations, columns), `coupons` (n, 2)."""

    marks: Array
    travel: Array
    force: Array
    sections: Array
    mass: float
    coupons: Array
    broke: list[str]


def pull(world: World, bar: Bar) -> Pulled:
    """Draw the piece up in equal steps of travel, or of force, to the peak of the test."""
    peak = world.test.peak * nominal_capacity(world)
    shares = np.arange(1, world.test.steps + 1) / world.test.steps
    if world.test.driven_by == "force":
        force = peak * shares
    else:
        nominal = Bar(bar.x, world.outline.area(bar.x), bar.law, bar.theta, 1.0, world.density, bar.axis)
        last = nominal.position(peak)[-1] - world.length
        force = np.array([bar.end_force_at(float(np.round(last * share, 1))) for share in shares])
    position = np.array([bar.position(f) for f in force]).T
    stretch = np.array([bar.stretch(f) for f in force]).T
    return Pulled(force, position[-1] - world.length, position, stretch)


def measure(world: World, bar: Bar, pulled: Pulled, rng: np.random.Generator) -> Readings:
    """Every reading of the test, and of the lot's coupons."""
    marks, sections = _profiles(world, bar, pulled, rng)
    travel, force = _machine(world, bar, pulled, rng)
    mass = bar.mass + world.gauges.get("mass_reading", 0.0) * float(rng.standard_normal())
    coupons, broke = _coupons(world, rng)
    return Readings(marks, travel, force, sections, mass, coupons, broke)


def _profiles(world: World, bar: Bar, pulled: Pulled, rng: np.random.Generator) -> tuple[Array, Array]:
    """Mark positions, and sections; a section measured at a mark is measured where the mark really is."""
    g, test = world.gauges, world.test
    stations = np.union1d(test.marks, test.sections)
    error = g["mark_placement"] * rng.standard_normal(stations.size)
    error += g.get("grip_position", 0.0) * rng.standard_normal()
    real = dict(zip(stations, np.clip(stations + error, 0.0, world.length), strict=True))
    at = np.array([real[s] for s in test.marks])
    true = np.array([np.interp(at, bar.x, column) for column in pulled.position.T]).T
    scale = 1.0 + g.get("position_scale", 0.0) * rng.standard_normal()
    marks = scale * true + g["mark_reading"] * rng.standard_normal(true.shape)
    return marks, _sections(world, bar, np.array([real[s] for s in test.sections]), rng)


def _sections(world: World, bar: Bar, at: Array, rng: np.random.Generator) -> Array:
    """Areas, or widths and thicknesses that share the departure of the section equally between them."""
    area = np.interp(at, bar.x, bar.area)
    if world.test.section_columns == "area":
        return (area * (1.0 + world.gauges["section_reading"] * rng.standard_normal(at.size)))[:, None]
    width, thickness = world.outline.sides(at)
    share = np.sqrt(area / (width * thickness))
    width = width * share + world.gauges["width_reading"] * rng.standard_normal(at.size)
    thickness = thickness * share + world.gauges["thickness_reading"] * rng.standard_normal(at.size)
    return np.stack((width, thickness), axis=1)


def _machine(world: World, bar: Bar, pulled: Pulled, rng: np.random.Generator) -> tuple[Array, Array]:
    """Travel and force as the machine shows them."""
    g, n = world.gauges, pulled.force.size
    travel = pulled.travel + g.get("travel_zero", 0.0) * rng.standard_normal()
    travel = travel + g["travel_reading"] * rng.standard_normal(n)
    shown = np.array([cell_reading(bar, f, world.test.force_at, world.test.tared) for f in pulled.force])
    shown = shown * (1.0 + g.get("force_scale", 0.0) * rng.standard_normal())
    shown = shown + g.get("force_zero", 0.0) * rng.standard_normal()
    return travel, shown + g["force_reading"] * rng.standard_normal(n)


def _coupons(world: World, rng: np.random.Generator) -> tuple[Array, list[str]]:
    """Elongation (fraction) and nominal stress (MPa) at break, and how each coupon broke.

    A coupon that would slip or tear at its clamp first is read there; clamps know nothing of the coupon's strength.
    """
    strength, test = world.strength, world.test
    value = strength.draw(test.coupons, rng)
    clamp = np.full(test.coupons, np.inf)
    if test.clamp_scale is not None:
        clamp = test.clamp_scale * strength.scale * rng.exponential(size=test.coupons) ** 0.1
    stretch = strength.stretch(np.minimum(value, clamp), world.law, world.theta)
    pair = np.stack((stretch - 1.0, stress(world.law, world.theta, stretch)), axis=1)
    error = np.array([world.gauges.get("coupon_elongation", 0.0), world.gauges.get("coupon_stress", 0.0)])
    pair = pair * (1.0 + error * rng.standard_normal(pair.shape))
    return pair, ["clamp" if c < v else "yes" for v, c in zip(value, clamp, strict=True)]

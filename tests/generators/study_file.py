"""The text of study.toml for an invented study."""

from __future__ import annotations

from generators import priors
from generators.world import World
from generators.write import PIECE

UNITS = {
    "mark": "mm",
    "travel": "mm",
    "grip": "mm",
    "width": "mm",
    "thickness": "mm",
    "force_zero": "N",
    "force_reading": "N",
    "mass": "g",
}
"""Unit by the beginning of a gauge's name; the others are relative."""


def gauge_lines(gauges: dict[str, float], factor: float = 1.0) -> str:
    """The section `gauges` of study.toml, every standard uncertainty times `factor`."""
    return "\n".join(f'{name} = "{_gauge(name, factor * value)}"' for name, value in gauges.items())


def _gauge(name: str, value: float) -> str:
    unit = next((u for start, u in UNITS.items() if name.startswith(start)), "%")
    return f"{100 * value:.6g} %" if unit == "%" else f"{value:.6g} {unit}"


def study_toml(world: World, seed: int, mass: float, demand: float, factor: float = 1.0) -> str:
    """study.toml of a scenario, every gauge's error times `factor`."""
    v, t, s = world.variation, world.test, world.strength
    return f"""[study]
title = "Invented study {seed}"
seed = {seed}

[record]
origin = "invented data, seed {seed}; no real part, lot or maker"

[part]
length = "{world.length:g} mm"
outline = "outline.csv"
shape = "open"
density = "{1e6 * world.density:g} kg/m^3"

[part.area_variation]
lot = "{100 * v.lot:g} %"
part_to_part = "{100 * v.part_to_part:g} %"
spread = {{ halfnormal = ["5 %"] }}
correlation_length = {{ lognormal = ["20 mm", 1.6] }}

[law]
names = ["{world.law}"]
part_to_part = {{ halfnormal = ["3 %"] }}
{priors.toml(world.law)}

[[pull]]
piece = "{PIECE}"
driven_by = "{t.driven_by}"
axis = "{t.axis}"
force_at = "{t.force_at}"
tared = "{t.tared}"
marks = "{PIECE}_marks.csv"
readings = "{PIECE}_readings.csv"
sections = "{PIECE}_sections.csv"
mass = "{mass:.3f} g"
temperature = "23 degC"
near_grip = "keep"

[gauges]
{gauge_lines(world.gauges, factor)}

[strength]
criterion = "{s.criterion}"
scatter = "{s.scatter}"
coupons = "coupons.csv"
coupon_volume = "{s.coupon_volume:g} mm^3"

[[demand]]
name = "hold"
force = "{demand:.3g} N"

[statement]
reliability = [0.90]
confidence = 0.95

[sampler]
effective_samples = 400
max_minutes = 0.5
"""

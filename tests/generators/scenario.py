"""Studies of every sort, one per seed: law, sections, drive, axis, gauges, strength and coupons all differ."""

from __future__ import annotations

import numpy as np

from generators import priors
from generators.field import Outline
from generators.laws import Theta, stress
from generators.strength import Strength
from generators.world import Plan, Variation, World

LAWS = ("neo-hookean", "ogden-1", "yeoh", "yeoh", "ogden-2", "yeoh", "yeoh", "ogden-3", "yeoh", "yeoh")
"""Law of a seed by its last digit."""

Rng = np.random.Generator


def scenario(seed: int, law: str | None, rng: Rng) -> World:
    """An invented lot and its test; the law by the seed's last digit where none is given."""
    law = law or LAWS[seed % len(LAWS)]
    theta = priors.draw(law, rng)
    strength = _strength(law, theta, rng)
    length, outline = _geometry(rng)
    variation = Variation(
        lot=float(rng.choice([0.01, 0.02, 0.03])),
        part_to_part=float(rng.choice([0.01, 0.02, 0.03])),
        spread=_round(rng.uniform(0.01, 0.08)),
        correlation_length=_round(rng.uniform(8.0, 40.0)),
        stiffness=_round(abs(0.03 * rng.standard_normal())),
    )
    density = float(rng.choice([9.3e-4, 1.05e-3, 1.12e-3, 1.24e-3]))
    plan = _plan(seed, length, strength.criterion, rng)
    return World(law, theta, length, outline, density, variation, strength, plan, _gauges(rng))


def _round(value: float) -> float:
    return float(f"{value:.4g}")


def _geometry(rng: Rng) -> tuple[float, Outline]:
    length = float(rng.choice([80.0, 100.0, 120.0, 150.0]))
    width, thickness = float(rng.uniform(8.0, 20.0).__round__(1)), float(rng.choice([1.5, 2.0, 2.5, 3.0]))
    if rng.uniform() < 0.35:
        return length, Outline((0.0, length), (width, width), (thickness, thickness))
    if rng.uniform() < 0.5:
        end = float(round(width * rng.uniform(0.65, 0.95), 1))
        return length, Outline((0.0, length), (width, end), (thickness, thickness))
    waist = float(round(width * rng.uniform(0.7, 0.9), 1))
    stations = (0.0, 0.3 * length, 0.7 * length, length)
    return length, Outline(stations, (width, waist, waist, width), (thickness,) * 4)


def _strength(law: str, theta: Theta, rng: Rng) -> Strength:
    criterion = str(rng.choice(["elongation", "nominal stress"], p=[0.65, 0.35]))
    scatter = str(rng.choice(["weibull", "lognormal"], p=[0.65, 0.35]))
    elongation = rng.uniform(2.6, 4.2)
    steepness = 1.0 if criterion == "elongation" else 0.7
    shape = rng.uniform(8.0, 20.0) * steepness if scatter == "weibull" else rng.uniform(0.05, 0.13) / steepness
    scale = elongation if criterion == "elongation" else float(stress(law, theta, np.array(1.0 + elongation)))
    return Strength(criterion, scatter, _round(scale), _round(shape), 396.0)


def _plan(seed: int, length: float, criterion: str, rng: Rng) -> Plan:
    axis = ("held end above", "held end below", "horizontal")[seed % 3]
    count = int(rng.integers(13, 26))
    marks = tuple(float(m) for m in np.round(np.linspace(0.04 * length, 0.96 * length, count), 1))
    sections = tuple(marks[round(q * (count - 1))] for q in (0.25, 0.5, 0.75))
    return Plan(
        driven_by=("travel", "force")[(seed // 2) % 2],
        axis=axis,
        force_at=str(rng.choice(["pulled end", "held end"])),
        tared=str(rng.choice(["without piece", "with piece"])),
        steps=int(rng.integers(5, 10)),
        peak=_round(rng.uniform(0.60, 0.75)),
        marks=marks,
        sections=sections,
        coupons=int(rng.integers(8, 31)),
        coupon_columns="both" if rng.uniform() < 0.85 else criterion,
        clamp_scale=1.15 if rng.uniform() < 0.3 else None,
    )


def _gauges(rng: Rng) -> dict[str, float]:
    ranges = {
        "mark_reading": (0.08, 0.25),
        "mark_placement": (0.05, 0.20),
        "travel_reading": (0.05, 0.20),
        "force_reading": (0.02, 0.20),
        "force_scale": (0.003, 0.010),
        "section_reading": (0.007, 0.020),
        "mass_reading": (0.01, 0.05),
        "density": (0.003, 0.010),
        "coupon_elongation": (0.010, 0.030),
        "coupon_stress": (0.015, 0.040),
    }
    return {name: float(f"{rng.uniform(*ends):.2g}") for name, ends in ranges.items()}

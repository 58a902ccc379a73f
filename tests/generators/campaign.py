"""Writes the study of a seed, whatever the seed asks for, with its truth beside it."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import numpy as np

from generators.laws import stable_up_to
from generators.piece import nominal_capacity
from generators.scenario import scenario
from generators.study_file import study_toml
from generators.truth import truth
from generators.world import World
from generators.write import Tested, tested_piece, write_tables


def write_study(folder: Path, seed: int, law: str | None = None, factor: float = 1.0) -> dict[str, Any]:
    """Write the study of `seed` to `folder`, the gauges' stated errors times `factor`; returns the truth.

    The data are the same for every factor. Worlds whose law turns over below 1.2 times the largest stretch read, to
    which a study cuts its prior, are drawn again.
    """
    rng = np.random.default_rng(seed)
    while (drawn := _attempt(seed, law, rng)) is None:
        pass
    world, tested = drawn
    folder.mkdir(parents=True, exist_ok=True)
    write_tables(folder, world, tested.readings, "invented data")
    demand = 0.5 * nominal_capacity(world)
    text = study_toml(world, seed, tested.readings.mass, demand, factor)
    (folder / "study.toml").write_text(text, encoding="utf-8")
    true = truth(world, tested.lot, tested.bar, tested.pulled, rng)
    (folder / "truth.json").write_text(json.dumps(true, indent=1) + "\n", encoding="utf-8")
    return true


def _attempt(seed: int, law: str | None, rng: np.random.Generator) -> tuple[World, Tested] | None:
    world = scenario(seed, law, rng)
    if not stable_up_to(world.law, world.theta, 1.5 * _stretch_of_coupons(world)):
        return None
    tested = tested_piece(world, rng)
    largest = 1.0 + max(float(tested.readings.coupons[:, 0].max()), float(tested.pulled.stretch.max()) - 1.0)
    return (world, tested) if stable_up_to(world.law, world.theta, 1.2 * largest) else None


def _stretch_of_coupons(world: World) -> float:
    s = world.strength
    if s.criterion == "elongation":
        return 1.0 + s.scale
    return float(s.stretch(np.array([s.scale]), world.law, world.theta)[0])

"""The worked study that ships with the package: `python tests/generators/worked.py` writes it again."""

from __future__ import annotations

import json
import sys
from pathlib import Path
from typing import Any

import numpy as np

if __name__ == "__main__":
    sys.path[0] = str(Path(__file__).parents[1])

from generators.field import Outline
from generators.strength import Strength
from generators.study_file import gauge_lines
from generators.truth import truth
from generators.world import Plan, Variation, World
from generators.write import tested_piece, write_tables

SEED = 31
NAME = "battery-strap"
NOTE = "invented data"
HOME = Path(__file__).parents[2] / "studies" / "worked"

WORLD = World(
    law="yeoh",
    theta={"c10": 0.31, "c20": -0.0035, "c30": 2.2e-4},
    length=110.0,
    outline=Outline((0.0, 20.0, 90.0, 110.0), (16.0, 13.0, 13.0, 16.0), (2.2, 2.2, 2.2, 2.2)),
    density=1.12e-3,
    variation=Variation(lot=0.02, part_to_part=0.02, spread=0.04, correlation_length=14.0, stiffness=0.02),
    strength=Strength("elongation", "weibull", scale=4.05, shape=16.0, coupon_volume=396.0),
    test=Plan(
        driven_by="travel",
        axis="held end above",
        force_at="pulled end",
        tared="without piece",
        steps=8,
        peak=0.52,
        marks=tuple(float(s) for s in range(5, 110, 5)),
        sections=(20.0, 40.0, 55.0, 70.0, 90.0),
        section_columns="width and thickness",
        coupons=16,
        clamp_scale=1.25,
    ),
    gauges={
        "mark_reading": 0.15,
        "mark_placement": 0.10,
        "travel_reading": 0.05,
        "force_reading": 0.05,
        "force_scale": 0.005,
        "width_reading": 0.05,
        "thickness_reading": 0.02,
        "mass_reading": 0.02,
        "density": 0.005,
        "coupon_elongation": 0.02,
        "coupon_stress": 0.03,
    },
)


def write_worked(folder: Path) -> dict[str, Any]:
    """Write study.toml and its tables to `folder`; returns the truth."""
    folder.mkdir(parents=True, exist_ok=True)
    rng = np.random.default_rng(SEED)
    tested = tested_piece(WORLD, rng)
    write_tables(folder, WORLD, tested.readings, NOTE)
    text = Path(__file__).with_name("battery_strap.toml").read_text(encoding="utf-8")
    text = text.replace("{mass}", f"{tested.readings.mass:.2f} g").replace("{gauges}", gauge_lines(WORLD.gauges))
    (folder / "study.toml").write_bytes(text.encode())
    return {"seed": SEED} | truth(WORLD, tested.lot, tested.bar, tested.pulled, rng)


def main() -> None:
    """Write the worked study where it belongs, keeping what `expected.json` pins of its results."""
    folder = HOME / NAME
    true = write_worked(folder)
    path = folder / "expected.json"
    kept = json.loads(path.read_text(encoding="utf-8")) if path.exists() else {}
    path.write_bytes((json.dumps(kept | {"truth": true}, indent=1) + "\n").encode())


if __name__ == "__main__":
    main()

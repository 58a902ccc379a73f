"""What is true of a written study, for comparison with what is inferred from it."""

from __future__ import annotations

from typing import Any

import numpy as np

from generators.measure import Pulled
from generators.piece import Lot, draw_parts
from generators.statics import Bar
from generators.strength import capacity
from generators.world import World

PARTS = 20_000
"""Next parts drawn for the true quantiles of capacity."""


def truth(
    world: World, lot: Lot, bar: Bar, pulled: Pulled, rng: np.random.Generator, parts: int = PARTS
) -> dict[str, Any]:
    """Law, section at a quarter, half and three quarters of the length, quantiles of the next part's capacity (N)."""
    stations = world.length * np.array([0.25, 0.5, 0.75])
    load = np.concatenate(
        [capacity(draw_parts(world, lot, 1000, rng), world.strength, rng) for _ in range(parts // 1000)]
    )
    shares = (0.01, 0.05, 0.10, 0.50)
    return {
        "law": world.law,
        "parameters": world.theta,
        "section": {"station": stations.tolist(), "area": _short(np.interp(stations, bar.x, bar.area))},
        "capacity": {"share": list(shares), "force": _short(np.quantile(load, shares)), "parts": parts},
        "strength": {"scale": world.strength.scale, "shape": world.strength.shape},
        "variation": vars(world.variation),
        "lot": _short(np.array([lot.offset]))[0],
        "stiffness": _short(np.array([bar.stiffness]))[0],
        "largest_stretch": _short(np.array([pulled.stretch.max()]))[0],
    }


def _short(values: np.ndarray) -> list[float]:
    return [float(f"{v:.6g}") for v in values]

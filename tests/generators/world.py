"""What is true of one invented lot and one test of it, before anything is measured."""

from __future__ import annotations

from dataclasses import dataclass, field

from generators.field import Outline
from generators.laws import Theta
from generators.strength import Strength


@dataclass(frozen=True)
class Variation:
    """Standard deviations of the logarithm of sections (lot, part to part, `spread` along a part with its correlation
    length in mm) and of stiffness between parts."""

    lot: float
    part_to_part: float
    spread: float
    correlation_length: float
    stiffness: float


@dataclass(frozen=True)
class Plan:
    """How one piece is pulled and measured: `peak` is the last step's share of the outline's median capacity."""

    driven_by: str
    axis: str
    force_at: str
    tared: str
    steps: int
    peak: float
    marks: tuple[float, ...]
    sections: tuple[float, ...]
    section_columns: str = "area"
    weighed: bool = True
    coupons: int = 14
    coupon_columns: str = "both"
    clamp_scale: float | None = None


@dataclass(frozen=True)
class World:
    """One lot, its test, and the standard uncertainty of every gauge (mm, N, g, or a fraction where relative)."""

    law: str
    theta: Theta
    length: float
    outline: Outline
    density: float
    variation: Variation
    strength: Strength
    test: Plan
    gauges: dict[str, float] = field(default_factory=dict)

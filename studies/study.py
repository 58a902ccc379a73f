"""A study as read: every quantity in N, mm, MPa, g, s, K; tables as arrays; defaults filled in and listed."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.priors import Proper, Quantity, Varies

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Gauge:
    """Standard uncertainty of a reading: `value` in the reading's unit, or a fraction of it where `relative`."""

    value: float
    relative: bool = False

    def sigma(self, reading: Array) -> Array:
        """Standard uncertainty of each reading, in the reading's unit."""
        return self.value * np.abs(reading) if self.relative else np.full_like(reading, self.value)


@dataclass(frozen=True)
class Rows:
    """Where a table's kept rows came from: `file` relative to the study's folder, and 1-based `line` numbers."""

    file: str
    line: NDArray[np.int64]


@dataclass(frozen=True)
class OutlineTable:
    """Nominal section along the part; `width` (mm) and `thickness` (mm) linear between stations, else `area` (mm²).

    With a diameter column `width` is the diameter and `thickness` is None; area = pi/4 width². Exactly one of
    `area` and `width` is given.
    """

    station: Array
    width: Array | None
    thickness: Array | None
    area: Array | None
    rows: Rows


@dataclass(frozen=True)
class MarksTable:
    """Mark positions in long form, one row a reading: `step` labels, `station` and `position` in mm."""

    step: tuple[str, ...]
    station: Array
    position: Array
    rows: Rows


@dataclass(frozen=True)
class ReadingsTable:
    """Travel (mm) of the pulled end and force (N), one row a step; NaN where a cell is missing."""

    step: tuple[str, ...]
    travel: Array
    force: Array
    rows: Rows


@dataclass(frozen=True)
class SectionsTable:
    """Measured unstretched sections: `area` (mm²) and its relative standard uncertainty at each `station` (mm)."""

    station: Array
    area: Array
    relative_error: Array
    rows: Rows


@dataclass(frozen=True)
class CouponsTable:
    """Coupons: elongation at break (fraction) and nominal stress at break (MPa), NaN where absent; `broke` or held."""

    elongation: Array
    stress: Array
    broke: NDArray[np.bool_]
    volume: Array
    rows: Rows


@dataclass(frozen=True)
class PartSpec:
    """The part's nominal geometry and material."""

    length: float
    outline: OutlineTable
    density: float | None
    hardness: float | None
    hardness_scale: str | None
    rubber: str | None


@dataclass(frozen=True)
class AreaVariation:
    """Relative departure of real sections from the outline."""

    lot: float
    part_to_part: float
    spread: Quantity
    correlation_length: Quantity


@dataclass(frozen=True)
class LawSpec:
    """The compound's law, its scatter of stiffness between parts, and the priors the study gives."""

    name: str
    part_to_part: Quantity
    priors: dict[str, Proper]


@dataclass(frozen=True)
class Pull:
    """One pull of one piece; `mass` (g) as weighed, `mass_outside` what of that lies outside of the length."""

    piece: str
    driven_by: str
    axis: str
    force_at: str
    tared: str
    marks: MarksTable | None
    readings: ReadingsTable
    sections: SectionsTable | None
    mass: float | None
    mass_outside: float
    temperature: float | None
    hold: float | None
    conditioned: str | None
    near_grip: str
    record: dict[str, str]


@dataclass(frozen=True)
class Gauges:
    """Every gauge's standard uncertainty; None where the study gives none."""

    mark_reading: Gauge | None = None
    mark_placement: Gauge | None = None
    grip_position: Gauge | None = None
    position_scale: Gauge | None = None
    travel_reading: Gauge | None = None
    travel_zero: Gauge | None = None
    force_reading: Gauge | None = None
    force_zero: Gauge | None = None
    force_scale: Gauge | None = None
    section_reading: Gauge | None = None
    width_reading: Gauge | None = None
    thickness_reading: Gauge | None = None
    mass_reading: Gauge | None = None
    density: Gauge | None = None
    coupon_elongation: Gauge | None = None
    coupon_stress: Gauge | None = None
    coupon_scale: Gauge | None = None


@dataclass(frozen=True)
class Strength:
    """How parts break: the criterion, the family of the scatter, the coupons, and priors where given."""

    criterion: str
    scatter: str
    coupons: CouponsTable
    modulus_prior: Proper | None
    scale_prior: Proper | None


@dataclass(frozen=True)
class Demand:
    """What the part must carry: `force` in N, exact, not known, or varying; required = factor times force."""

    name: str
    force: Quantity | Varies
    factor: float


@dataclass(frozen=True)
class StatementSpec:
    """Which guarantee is stated, of which parts."""

    reliability: tuple[float, ...]
    confidence: float
    applies_to: str


@dataclass(frozen=True)
class SamplerSpec:
    """How far sampling goes."""

    effective_samples: int
    max_minutes: float


@dataclass(frozen=True)
class Study:
    """A whole study, ready to be calibrated."""

    folder: Path
    title: str
    seed: int
    record: dict[str, str]
    part: PartSpec
    area_variation: AreaVariation
    law: LawSpec
    pulls: tuple[Pull, ...]
    gauges: Gauges
    strength: Strength | None
    demands: tuple[Demand, ...]
    statement: StatementSpec
    sampler: SamplerSpec
    sha256: str
    files: dict[str, str]
    assumed: list[str] = field(default_factory=list)
    excluded: list[str] = field(default_factory=list)
    warnings: list[str] = field(default_factory=list)
    not_recorded: list[str] = field(default_factory=list)

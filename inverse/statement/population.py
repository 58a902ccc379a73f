"""Capacity of parts under dead loads: distribution over parts for each posterior draw.

For dead loads the axial force at a station is the end force plus what hangs below, so that each section's nominal
stress is N/(stiffness A) and its measure follows from the law alone. The hazard H of a whole part against the load F
is tabulated at a few loads (log H is nearly straight in log F) and inverted; strength scatter then needs no sampling:
a part of known sections carries F with probability exp(−H(F)), and a share of a population is the mean of that over
sections.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline

from pullback.forward.criteria import Criterion
from pullback.forward.laws.base import Law
from pullback.forward.loads import FORCE_UNIT, Weight
from pullback.inverse.layout import Values
from pullback.inverse.piece import Piece
from pullback.inverse.scatter import Scatter
from pullback.inverse.statement.lawtable import LawTable

Array = NDArray[np.float64]
Progress = Callable[[float], None]

PARTS = 16
"""Next parts drawn for each posterior draw, in antithetic pairs."""
_LOADS = 12
_LEVELS = 240
_COARSE = 24
_LOW, _HIGH = np.log(1e-5), np.log(12.0)
_TABLE_END = 14.0
# A spline's values are linear in those it goes through: one matrix serves every curve.
_SPLINE = CubicSpline(np.arange(_LOADS), np.eye(_LOADS))(np.linspace(0.0, _LOADS - 1.0, _LEVELS)).T


@dataclass(frozen=True)
class Sections:
    """Sections of K parts: `log_area` (n, K), `stiffness` (K,), for one draw."""

    log_area: Array
    stiffness: Array


@dataclass(frozen=True)
class HazardCurve:
    """log H against log F of K parts at common loads; `log_load` (J,), `log_hazard` (K, J)."""

    log_load: Array
    log_hazard: Array

    def refined(self) -> HazardCurve:
        """The same at many loads, by a cubic spline through the evenly spaced ones."""
        fine = np.linspace(self.log_load[0], self.log_load[-1], _LEVELS)
        return HazardCurve(fine, np.maximum.accumulate(self.log_hazard @ _SPLINE, axis=1))

    def survival(self, at: Array) -> Array:
        """Share of parts that hold at each load (J',): the mean over parts of exp(−H)."""
        held = np.exp(-np.exp(self.log_hazard)).mean(axis=0)
        return np.interp(np.log(np.maximum(at, 1e-300)), self.log_load, held, left=1.0, right=0.0)

    def quantile(self, share: Array) -> Array:
        """Load at which each share of the parts has failed."""
        failed = 1.0 - np.exp(-np.exp(self.log_hazard)).mean(axis=0)
        # Of loads at which as many have failed the last one: a piece that stood has none failed up to there.
        keep = np.concatenate((np.diff(failed) > 0.0, [True]))
        return np.exp(np.interp(share, failed[keep], self.log_load[keep]))

    def load_at(self, hazard: Array) -> Array:
        """Load of each part (K,) at which its own hazard reaches `hazard` (K,)."""
        rows = zip(np.log(hazard), self.log_hazard, strict=True)
        return np.exp([np.interp(h, np.maximum.accumulate(row), self.log_load) for h, row in rows])


@dataclass(frozen=True)
class Capacity:
    """Capacity of one kind of part over draws, leading axis draws.

    `load`: one part's capacity a draw (scatter and ignorance together), N; `quantiles` (draws, shares) N;
    `failed` (draws, loads) share failed at `loads`; `where` (n,) probability of failing in each element; `stretch` at
    capacity; `energy_load`: see `energy_of`; `unstable`: draws whose law reaches a maximum of stress before failing.
    """

    load: Array
    shares: Array
    quantiles: Array
    loads: Array
    failed: Array
    where: Array
    stretch: Array
    unstable: NDArray[np.bool_]
    energy_at_capacity: Array
    energy_at: Array


@dataclass(frozen=True)
class PartModel:
    """What does not change from draw to draw."""

    piece: Piece
    law: Law
    criterion: Criterion
    scatter: Scatter

    def theta(self, values: Values, i: int) -> Array:
        """Law parameters of draw i."""
        return np.array([values[p.name][i] for p in self.law.parameters])

    def strength(self, values: Values, i: int) -> tuple[float, float]:
        """Strength parameters of draw i."""
        first, second = self.scatter.parameter_names
        return float(values[first][i]), float(values[second][i])

    def table(self, values: Values, i: int) -> LawTable:
        """The law of draw i as a table, to where the hazard is overwhelming."""
        s0 = self.strength(values, i)[0]
        largest = 1.0 + 3.0 * s0 if self.criterion.name == "elongation" else _TABLE_END
        return LawTable.of(self.law, self.theta(values, i), self.criterion, max(largest, 2.0))

    def hanging(self, log_area: Array, density: float) -> Array:
        """Weight that each element carries beside the end force (n, K), N."""
        g = sum(load.g for load in self.piece.loads if isinstance(load, Weight))
        each = FORCE_UNIT * g * density * np.exp(log_area) * np.diff(self.piece.nodes)[:, None]
        below = np.cumsum(each[::-1], axis=0)[::-1]
        return below - 0.5 * each

    def volume(self, log_area: Array) -> Array:
        """Unstretched volume of each element (n, K), mm³."""
        return np.exp(log_area) * np.diff(self.piece.nodes)[:, None]


def next_parts(model: PartModel, values: Values, i: int, part_to_part: float, rng: np.random.Generator) -> Sections:
    """Sections of the next parts from the lot of draw i: the lot's offset kept, all else drawn anew."""
    half = PARTS // 2
    piece = model.piece

    def pairs(*shape: int) -> Array:
        z = rng.standard_normal((*shape, half))
        return np.concatenate((z, -z), axis=-1)

    log_area = piece.log_outline[:, None] + values["lot"][i] + part_to_part * pairs()
    if piece.basis is not None and piece.phi is not None:
        log_w = piece.basis.log_weight(values["spread"][i : i + 1], values["correlation_length"][i : i + 1])
        log_area = log_area + piece.phi @ (np.exp(log_w) * pairs(piece.basis.omega.size))
    # Stiffness pairs run against the sections' pairs: independent scatter, not one that cancels.
    stiffness = np.exp(values["stiffness_scatter"][i] * pairs()[rng.permutation(2 * half)])
    return Sections(log_area, stiffness)


def pulled_piece(model: PartModel, values: Values, i: int) -> Sections:
    """The pulled piece of draw i itself."""
    piece = model.piece
    one = {k: v[..., i : i + 1] for k, v in values.items()}
    stiffness = np.exp(one["stiffness_scatter"] * one[piece.names.stiffness])
    return Sections(piece.log_area(one), stiffness)


def hazard_curve(
    model: PartModel, table: LawTable, parts: Sections, hanging: Array, strength: tuple[float, float]
) -> HazardCurve:
    """H of the parts at loads that span nearly none to nearly all failed."""
    volume = model.volume(parts.log_area)
    bracket = _bracket(model, table, parts, hanging, strength, volume)
    log_load = np.linspace(*bracket, _LOADS)
    log_s = _log_measure(model, table, parts, _log_stress(parts, hanging, log_load))
    log_h = np.minimum(model.scatter.log_hazard(log_s, volume[:, :, None], *strength), 50.0)
    return HazardCurve(log_load, np.maximum(log_h, -60.0))


def _log_stress(parts: Sections, hanging: Array, log_load: Array) -> Array:
    """log of the nominal stress of the law (stiffness taken out) of each element (n, K, J); −inf without tension."""
    per = (parts.log_area + np.log(parts.stiffness))[:, :, None]
    if not np.any(hanging):
        return log_load - per
    with np.errstate(divide="ignore"):
        return np.log(np.maximum(np.exp(log_load) + hanging[:, :, None], 0.0)) - per


def _log_measure(model: PartModel, table: LawTable, parts: Sections, log_stress: Array) -> Array:
    """log of the criterion's measure; one that is a stress is what the section bears, the part's stiffness included."""
    log_s = table.log_measure_at(log_stress)
    return log_s + np.log(parts.stiffness)[:, None] if model.criterion.by_stress else log_s


def _bracket(
    model: PartModel, table: LawTable, parts: Sections, hanging: Array, strength: tuple[float, float], volume: Array
) -> tuple[float, float]:
    """log loads at which the weakest of two extreme parts begins to fail and the strongest has failed."""
    log_area = np.log(np.exp(parts.log_area).min(axis=0))
    ends = np.array([np.argmin(log_area), np.argmax(log_area)])
    pair = Sections(parts.log_area[:, ends], parts.stiffness[ends])
    middle = float(log_area.mean())
    low, high = middle + table.start, middle + table.end + 0.4
    # The second pass narrows what the first, over all that the law carries, can only find in great steps.
    for _ in range(2):
        log_load = np.linspace(low, high, _COARSE)
        log_s = _log_measure(model, table, pair, _log_stress(pair, hanging[:, ends], log_load))
        log_h = model.scatter.log_hazard(log_s, volume[:, ends, None], *strength)
        begun, done = np.any(log_h > _LOW, axis=0), np.all(log_h > _HIGH, axis=0)
        low = log_load[max(int(np.argmax(begun)) - 1, 0)]
        high = log_load[min(int(np.argmax(done)) + 1 if np.any(done) else _COARSE - 1, _COARSE - 1)]
    return float(low), float(max(high, low + 0.02))


def capacity(
    model: PartModel, values: Values, shares: Array, loads: Array, seed: int, part_to_part: float | None,
    survived: Array | None = None, energy_load: float = 0.0, progress: Progress = lambda share: None,
) -> Capacity:  # fmt: skip
    """Capacity over all draws: of next parts where `part_to_part` is given, else of the pulled piece itself.

    `values`: named draws, draws last; `shares` of parts whose load is wanted; `loads` (N) at which the share failed is
    wanted; `survived` (draws,): hazard that the pulled piece has stood already; `energy_load` N.
    """
    draws = next(iter(values.values())).shape[-1]
    out: list[tuple[Array, ...]] = []
    where = np.zeros(model.piece.log_outline.size)
    for i in range(draws):
        rng = np.random.Generator(np.random.Philox(key=[seed, 2**33 + 3], counter=[0, 0, int(part_to_part is None), i]))
        table, strength = model.table(values, i), model.strength(values, i)
        pulled = part_to_part is None
        parts = pulled_piece(model, values, i) if pulled else next_parts(model, values, i, part_to_part or 0.0, rng)
        density = model.piece.density * (1.0 + float(values["density_error"][i]))
        hanging = model.hanging(parts.log_area, density)
        curve = hazard_curve(model, table, parts, hanging, strength).refined()
        stood = 0.0 if survived is None else float(survived[i])
        one = _one_draw(model, table, parts, hanging, curve, strength, stood, shares, loads, energy_load, rng)
        where += one[-1]
        out.append(one[:-1])
        if i % 50 == 0:
            progress(i / draws)
    columns = [np.array(c) for c in zip(*out, strict=True)]
    load, quantiles, failed, stretch, unstable, at_capacity, at_load = columns
    return Capacity(
        load, shares, quantiles, loads, failed, where / draws, stretch, unstable.astype(bool), at_capacity, at_load
    )


def _one_draw(
    model: PartModel, table: LawTable, parts: Sections, hanging: Array, curve: HazardCurve,
    strength: tuple[float, float], stood: float, shares: Array, loads: Array, energy_load: float,
    rng: np.random.Generator,
) -> tuple[Array, ...]:  # fmt: skip
    if stood > 0.0:
        # Having stood `stood`, the piece holds F with probability exp(−(H(F) − stood)).
        left = np.exp(curve.log_hazard) - stood
        curve = HazardCurve(curve.log_load, np.log(np.maximum(left, 1e-26)))
    k = int(rng.integers(parts.log_area.shape[1]))
    one = HazardCurve(curve.log_load, curve.log_hazard[k : k + 1])
    load = float(one.load_at(rng.exponential(size=1))[0])
    part = Sections(parts.log_area[:, k : k + 1], parts.stiffness[k : k + 1])
    both = np.log(np.maximum(np.array([load, energy_load]), 1e-300))
    stress = _log_stress(part, hanging[:, k : k + 1], both)[:, 0]
    log_s, volume = _log_measure(model, table, part, stress[:, :1]), model.volume(part.log_area)
    # Just below a law's limit the measure is still finite there.
    log_s = np.minimum(log_s, table.log_measure[-1] + 1.0)
    where = model.scatter.shares(log_s, volume, *strength)[:, 0]
    stretch = table.stretch_at(stress[:, 0])
    energy = (table.energy_at(stress) * volume).sum(axis=0) * float(part.stiffness[0])
    unstable = bool(np.isfinite(table.limit) and np.max(stress[:, 0]) >= np.log(0.999 * table.limit))
    # N mm to J.
    return (
        np.float64(load), curve.quantile(shares), 1.0 - curve.survival(loads), np.float64(stretch.max()),
        np.bool_(unstable), np.float64(1e-3 * energy[0]), np.float64(1e-3 * energy[1]), where,
    )  # type: ignore[return-value]  # fmt: skip

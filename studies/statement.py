"""From draws to margins: capacities, guaranteed loads, checks and verdict of a study."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import special

from pullback.inverse.layout import Values
from pullback.inverse.posterior import Posterior
from pullback.inverse.predictive import Check, checks
from pullback.inverse.priors import Varies
from pullback.inverse.readings.strengths import Survival
from pullback.inverse.sampling.diagnose import Diagnosis, diagnose
from pullback.inverse.statement import verdict
from pullback.inverse.statement.guarantee import FEW_FAILURES, Margin, margin
from pullback.inverse.statement.population import Capacity, PartModel, capacity
from pullback.inverse.statement.priors_carry import PriorMove, prior_moves
from pullback.studies.assemble import ELEMENTS, assemble
from pullback.studies.calibration import Calibration, Progress, Sample, _silent
from pullback.studies.strength_terms import coupon_pairs
from pullback.studies.study import Demand, Study

Array = NDArray[np.float64]

MOST_DRAWS = 3000
BAND_DRAWS = 800
_PILOT = 60
_GRID = 160
_NODES = 16


@dataclass(frozen=True)
class Bands:
    """States of the pulled piece over thinned draws: positions (n+1, steps, draws) mm, stretches (n, steps, draws),
    end forces (steps, draws) N, with the values they belong to."""

    values: Values
    position: Array
    stretch: Array
    stress: Array
    end_force: Array
    log_area: Array
    q: Array


@dataclass(frozen=True)
class Statement:
    """Everything that the results say beyond the draws themselves."""

    calibration: Calibration
    sample: Sample
    values: Values
    chains: int
    next_part: Capacity | None
    pulled: Capacity | None
    margins: list[Margin]
    margin_diagnosis: Diagnosis | None
    checks: list[Check]
    prior_moves: list[PriorMove]
    rules: list[verdict.Rule]
    bands: Bands
    largest_stretch_informed: float
    stretch_at_capacity: float | None
    discretisation: float

    @property
    def study(self) -> Study:
        """The study."""
        return self.calibration.model.study

    @property
    def stated(self) -> bool:
        """Whether the evidence carries a statement."""
        return all(r.passed for r in self.rules)

    @property
    def met(self) -> str:
        """met, not met, or not shown, over all demands and reliabilities."""
        found = [g.met for m in self.margins for g in m.guaranteed]
        if not self.stated or not found or "not shown" in found:
            return "not met" if self.stated and "not met" in found else "not shown"
        return "met" if all(f == "met" for f in found) else "not met"

    def __repr__(self) -> str:
        state = "stated" if self.stated else "withheld: " + ", ".join(r.rule for r in self.rules if not r.passed)
        return f"Statement of {self.study.title!r}: {state}, {self.met}"


def margins(calibration: Calibration, sample: Sample, progress: Progress = _silent) -> Statement:
    """Capacities, margins, checks and verdict from the draws of a calibrated study."""
    model, study = calibration.model, calibration.model.study
    q, chains = _thinned(sample.q, MOST_DRAWS)
    posterior = model.posterior
    values = posterior.layout.unpack(q)
    bands, survived = _states(posterior, q)
    found: list[Margin] = []
    next_part = pulled = diagnosis = None
    moves: list[PriorMove] = []
    if model.scatter is not None and model.criterion is not None:
        part = PartModel(model.piece, model.law, model.criterion, model.scatter)
        shares = np.array([0.5, *(1.0 - np.array(study.statement.reliability))])
        wanted = max((_middle(d) * d.factor for d in study.demands), default=0.0)
        next_part, pulled = _capacities(part, study, values, shares, survived, wanted, progress)
        applies = next_part if study.statement.applies_to == "next part" else pulled
        found = [_margin(study, d, applies, k) for k, d in enumerate(study.demands)]
        if sample.chains is not None:
            diagnosis = _diagnose_margins(found, study, chains)
        reliability = study.statement.reliability
        loads = applies.quantiles[:, 1:]
        moves = prior_moves(posterior.layout, values, loads, reliability, study.statement.confidence, max(chains, 4))
    fitted = checks(posterior, bands.q, study.seed)
    informed = largest_stretch_informed(calibration, bands)
    applies_to = next_part if study.statement.applies_to == "next part" else pulled
    at_capacity = float(np.median(applies_to.stretch)) if applies_to else None
    rules = [verdict.asked(study.strength is not None, len(found)), verdict.sampled(sample.diagnosis, diagnosis)]
    rules.append(verdict.fits(fitted))
    if applies_to is not None and at_capacity is not None:
        rules += [verdict.stable(float(np.mean(applies_to.unstable))), verdict.informed(at_capacity, informed)]
        rules.append(verdict.not_carried(moves))
    rough = _discretisation(calibration, bands)
    return Statement(
        calibration, sample, values, chains, next_part, pulled, found, diagnosis, fitted, moves, rules, bands, informed,
        at_capacity, rough,
    )  # fmt: skip


def _thinned(q: Array, most: int) -> tuple[Array, int]:
    """Draws (n, dim), chain after chain, every so many, and the number of chains."""
    stride = int(np.ceil(q.shape[0] * q.shape[1] / most))
    kept = q[:, ::stride]
    return kept.reshape(-1, q.shape[2]), q.shape[0]


def _states(posterior: Posterior, q: Array) -> tuple[Bands, Array]:
    """States over thinned draws, and the hazard that the piece stood at its last step in every draw."""
    survival = next((t for t in posterior.terms if isinstance(t, Survival)), None)
    stood, kept = [], []
    stride = max(1, q.shape[0] // BAND_DRAWS)
    piece = posterior.pieces[0]
    for at in np.array_split(np.arange(q.shape[0]), max(1, q.shape[0] // 64)):
        values, predictions = posterior.predict(q[at])
        p = predictions[piece.name]
        stood.append(survival.hazard(values, p)[0] if survival else np.zeros(at.size))
        here = at % stride == 0
        s = p.state
        kept.append((s.position[..., here], s.element.stretch[..., here], s.element.stress[..., here],
                     s.end_force[..., here], p.log_area[..., here]))  # fmt: skip
    thin = q[::stride]
    position, stretch, stress, end, log_area = (np.concatenate(c, axis=-1) for c in zip(*kept, strict=True))
    bands = Bands(posterior.layout.unpack(thin), position, stretch, stress, end, log_area, thin)
    return bands, np.concatenate(stood)


def _capacities(
    part: PartModel, study: Study, values: Values, shares: Array, survived: Array, wanted: float, progress: Progress
) -> tuple[Capacity, Capacity]:
    """Capacity of next parts and of the pulled piece, on loads that span both."""
    draws = next(iter(values.values())).shape[-1]
    some = {k: v[..., :: max(1, draws // _PILOT)] for k, v in values.items()}
    p2p = study.area_variation.part_to_part
    pilot = capacity(part, some, np.array([1e-4, 0.9999]), np.ones(1), study.seed, p2p)
    low, high = pilot.quantiles[:, 0].min(), pilot.quantiles[:, 1].max()
    loads = np.geomspace(0.7 * low, 1.3 * high, _GRID)
    new = capacity(
        part, values, shares, loads, study.seed, p2p, None, wanted, lambda s: progress("next part", s)
    )
    old = capacity(
        part, values, shares, loads, study.seed, None, survived, wanted, lambda s: progress("pulled piece", s)
    )
    return new, old


def _middle(demand: Demand) -> float:
    """The demand's median."""
    value = demand.force.prior if isinstance(demand.force, Varies) else demand.force
    return value if isinstance(value, float | int) else float(value.value(np.zeros(1))[0])


def _margin(study: Study, demand: Demand, of: Capacity, index: int) -> Margin:
    """Margin of one demand: exact, not known (a draw each), or varying from use to use (nodes of equal probability)."""
    draws, rng = of.load.size, np.random.Generator(np.random.Philox(key=[study.seed, 5], counter=[0, 0, 0, index]))
    reliability, confidence = study.statement.reliability, study.statement.confidence
    failures = distinct_failures(study)
    if isinstance(demand.force, Varies):
        nodes = demand.factor * demand.force.prior.value(special.ndtri((np.arange(_NODES) + 0.5) / _NODES))
        required = rng.choice(nodes, draws)
        short = np.mean([_at_load(of, np.full(draws, r)) for r in nodes], axis=0)
        ratio = _ratio_quantiles(of, nodes, 1.0 - np.array(reliability))
    else:
        value, z = demand.force, rng.standard_normal(draws)
        required = demand.factor * (np.full(draws, float(value)) if isinstance(value, float | int) else value.value(z))
        ratio = of.quantiles[:, 1:] / required[:, None]
        short = _at_load(of, required)
    middle = _middle(demand) * demand.factor
    return margin(
        demand.name, middle, required, of.load, ratio, short, reliability, confidence, failures, of.quantiles[:, 1:]
    )


def _at_load(of: Capacity, load: Array) -> Array:
    """Share failed at one load a draw, by interpolation in the logarithm of the load."""
    log = np.log(of.loads)
    x = np.clip((np.log(np.maximum(load, 1e-300)) - log[0]) / (log[1] - log[0]), 0.0, log.size - 1.001)
    k = x.astype(int)
    rows = np.arange(load.size)
    low, high = of.failed[rows, k], of.failed[rows, k + 1]
    return low + (x - k) * (high - low)


def _ratio_quantiles(of: Capacity, nodes: Array, shares: Array) -> Array:
    """Quantiles of capacity over a demand that varies: share short at ratio x is the mean of failed(x r) over uses."""
    ratios = of.loads / np.median(nodes)
    short = np.mean([[np.interp(ratios * r, of.loads, row) for row in of.failed] for r in nodes], axis=0)
    out = np.empty((of.load.size, shares.size))
    for i, row in enumerate(short):
        keep = np.concatenate((np.diff(row) > 0.0, [True]))
        out[i] = np.exp(np.interp(shares, row[keep], np.log(ratios[keep])))
    return out


def distinct_failures(study: Study) -> int:
    """Number of different values at which coupons broke."""
    if study.strength is None:
        return 0
    c = study.strength.coupons
    measure = c.elongation if study.strength.criterion == "elongation" else c.stress
    return int(np.unique(measure[c.broke]).size)


def smallest_share(study: Study) -> float:
    """The smallest shortfall that the coupons can speak of: a tenth of one in their number."""
    n = 0 if study.strength is None else study.strength.coupons.broke.size
    return 1.0 / (10.0 * max(n, FEW_FAILURES))


def _diagnose_margins(found: list[Margin], study: Study, chains: int) -> Diagnosis | None:
    if not found:
        return None
    columns, names = [], []
    for m in found:
        for k, r in enumerate(study.statement.reliability):
            columns.append(m.quantile_margins[:, k].reshape(chains, -1))
            names.append(f"margin of {m.demand} at {100 * r:g} %")
    return diagnose(np.stack(columns, axis=2), names)


def largest_stretch_informed(calibration: Calibration, bands: Bands) -> float:
    """The largest stretch at which a force or stress was read: in the piece at a step with a force, or by a coupon."""
    model, study = calibration.model, calibration.model.study
    r = study.pulls[0].readings
    steps = [model.piece.steps.index(s) for s, f in zip(r.step, r.force, strict=True) if np.isfinite(f)]
    found = [float(np.median(bands.stretch[:, steps].max(axis=(0, 1))))] if steps else [1.0]
    both = coupon_pairs(study)
    if both is not None and study.strength is not None:
        found += [1.0 + float(e) for e in study.strength.coupons.elongation[both]]
    return max(found)


def _discretisation(calibration: Calibration, bands: Bands) -> float:
    """Largest change of a predicted position or force, over its gauge's error, on a mesh twice as fine."""
    study, posterior = calibration.model.study, calibration.model.posterior
    fine = assemble(study, 2 * ELEMENTS).posterior
    q = bands.q[:1]
    values, coarse = posterior.predict(q)
    piece = fine.pieces[0]
    finer = piece.predict(values)
    state, other = coarse[piece.name].state, finer.state
    at = np.interp
    nodes = calibration.model.piece.nodes
    moved = max(
        float(np.max(np.abs(at(nodes, piece.nodes, other.position[:, s, 0]) - state.position[:, s, 0])))
        for s in range(state.position.shape[1])
    )
    g = study.gauges
    worst = [moved / g.mark_reading.value] if g.mark_reading else []
    if g.force_reading:
        scale = g.force_reading.sigma(np.abs(state.end_force[:, 0]) + 1e-12)
        worst.append(float(np.max(np.abs(other.end_force[:, 0] - state.end_force[:, 0]) / np.maximum(scale, 1e-12))))
    return max(worst, default=0.0)

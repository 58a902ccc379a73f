"""results.json from a statement."""

from __future__ import annotations

import datetime as dt
import platform
from collections.abc import Sequence
from importlib.metadata import version
from typing import Any

import numpy as np
from numpy.typing import NDArray

import pullback
from pullback.inverse.priors import Varies
from pullback.inverse.statement.guarantee import Guaranteed, Margin, lower_bound, withheld
from pullback.inverse.statement.population import Capacity
from pullback.studies.reporting.words import law as law_name
from pullback.studies.results.bands import LEVEL, band, interval
from pullback.studies.results.parameters import parameters
from pullback.studies.results.sentence import sentence
from pullback.studies.results.tables import shown
from pullback.studies.statement import Statement, distinct_failures, smallest_share

Array = NDArray[np.float64]
Json = dict[str, Any]

CAUTIONS = [
    "Stretched parts store energy and recoil when they break: shield them, wear eye protection, keep out of the line "
    "of pull.",
    "The statement holds for the tested compound, rate, temperature and age; creep, fatigue, ozone, heat and fluids "
    "can lower strength.",
    "Results inform and do not replace the codes in force or the judgement of a licensed engineer.",
]


def results(s: Statement, warnings: Sequence[str], seconds: float) -> Json:
    """The whole document; every number in N, mm, MPa, J."""
    study, model = s.study, s.calibration.model
    pulled = study.pulls[0].piece
    given = study.strength
    strength = {} if given is None else {"criterion": given.criterion, "scatter": given.scatter}
    following = [_capacity(s, s.next_part)] if s.next_part else []
    return {
        "pullback": pullback.__version__,
        "study": {
            "title": study.title, "sha256": study.sha256, "files": study.files, "seed": study.seed,
            "method": "sampled" if s.sample.chains else "laplace", "law": model.law.name,
            "created": dt.datetime.now(dt.UTC).isoformat(timespec="seconds"),
            "applies_to": study.statement.applies_to, "reliability": list(study.statement.reliability),
            "confidence": study.statement.confidence,
        } | strength,
        "versions": versions(),
        "record": study.record,
        "verdict": _verdict(s),
        "warnings": [*study.warnings, *warnings],
        "assumed": [*study.assumed, *model.assumed, *_assumed(s)],
        "excluded": study.excluded,
        "not_recorded": study.not_recorded,
        "rests_on": rests_on(s),
        "left_out": _left_out(s),
        "cautions": CAUTIONS,
        "parameters": parameters(s),
        "pieces": {pulled: _piece(s)},
        "next_part": {"capacity": following},
        "margins": [_margin(s, m, k) for k, m in enumerate(s.margins)],
        "energy": _energy(s),
        "diagnostics": _diagnostics(s, seconds),
        "checks": [vars(c) for c in s.checks],
        "prior_sensitivity": [
            {"prior": m.prior, "factor": m.factor, "reliability": m.reliability, "change": m.change, "error": m.error}
            | ({"reason": f"Pareto shape {m.tail:.2f}: not to be trusted"} if m.tail > 0.7 else {})
            for m in s.prior_moves
        ],
        "not_yet": ["margins[].shares"],
    }  # fmt: skip


def versions() -> dict[str, str]:
    """Versions of what the numbers come from."""
    found = {name: version(name) for name in ("numpy", "scipy", "emcee", "arviz")}
    return {"pullback": pullback.__version__, "python": platform.python_version()} | found


def rests_on(s: Statement) -> dict[str, int]:
    """How many readings of each kind were used."""
    study, pull = s.study, s.study.pulls[0]
    found = {
        "pieces": len(study.pulls),
        "steps": len(s.calibration.model.piece.steps),
        "mark_readings": 0 if pull.marks is None else int(pull.marks.position.size),
        "travel_readings": int(np.isfinite(pull.readings.travel).sum()),
        "force_readings": int(np.isfinite(pull.readings.force).sum()),
        "sections": 0 if pull.sections is None else int(pull.sections.area.size),
        "masses": int(pull.mass is not None),
    }
    if study.strength is None:
        return found
    broke = study.strength.coupons.broke
    return found | {"coupons": int(broke.size), "coupons_broken": int(broke.sum())}


def _verdict(s: Statement) -> Json:
    rules = [
        {"rule": r.rule, "passed": bool(r.passed), "text": r.text, "number": _number(r.number), "limit": r.limit}
        for r in s.rules
    ]
    reasons = [
        {"rule": r.rule, "text": r.text, "number": _number(r.number), "limit": r.limit, "remedy": r.remedy}
        for r in s.rules if not r.passed
    ]  # fmt: skip
    return {
        "state": "stated" if s.stated else "withheld", "sentence": sentence(s), "reasons": reasons, "rules": rules
    }


def _assumed(s: Statement) -> list[str]:
    study = s.study
    found = [
        "the compound is incompressible: J = 1, not measured",
        "law.part_to_part: with one pulled piece the prior carries the scatter of stiffness between parts",
        "area_variation.lot, part_to_part: with one pulled piece the study's own figures carry how far whole sections "
        "differ from the outline and between parts",
    ]
    if study.strength is not None:
        found.append(f"a piece pulled to its last step unbroken held at least that: {study.pulls[0].piece}")
        if study.strength.modulus_prior is None and study.strength.scale_prior is None:
            found.append("strength parameters: flat in the log of the location and in the log of the scale")
    if study.gauges.coupon_scale is not None:
        found.append("coupon_scale is taken as an error of the coupons' stress, common to all of them")
    return found


def _left_out(s: Statement) -> list[str]:
    return [
        f"other laws: only one was tried, {law_name(s.study.law.name)}",
        "service: test conditions only; no other temperature, duration, relaxation or knock-down",
        "creep, fatigue, ageing, ozone, fluids, damage in handling, the clamping in service",
        "scatter between lots: one lot was tested, by one piece",
    ]


def _piece(s: Statement) -> Json:
    piece, b, pull = s.calibration.model.piece, s.bands, s.study.pulls[0]
    lower, median, upper = band(np.exp(b.log_area))
    area = {"unit": "mm^2", "median": median.tolist(), "lower": lower.tolist(), "upper": upper.tolist(), "level": LEVEL}
    lower, median, upper = (x.T.tolist() for x in band(b.stretch))
    stretch = {"station": piece.middle.tolist(), "step": list(piece.steps), "median": median, "lower": lower}
    found = [_capacity(s, s.pulled)] if s.pulled else []
    return {
        "station": piece.middle.tolist(), "area": area, "stretch": stretch | {"upper": upper, "level": LEVEL},
        "capacity": found, "record": pull.record,
    }  # fmt: skip


def _capacity(s: Statement, of: Capacity) -> Json:
    stated = s.study.statement
    shares = [0.5, *(1.0 - np.array(stated.reliability))]
    quantiles = [{"share": float(p)} | interval(of.quantiles[:, k]) for k, p in enumerate(shares)]
    out: Json = {"measure": "force", "unit": "N", "service": None} | interval(of.load) | {"quantiles": quantiles}
    out["guaranteed"] = [_load(s, of, k) for k in range(len(stated.reliability))]
    x = s.calibration.model.piece.middle
    return out | {"where": {"station": x.tolist(), "probability": of.where.tolist()}}


def _load(s: Statement, of: Capacity, k: int) -> Json:
    """The load that a share of parts carries with confidence, or why it is not given."""
    reliability, confidence = s.study.statement.reliability[k], s.study.statement.confidence
    out: Json = {"reliability": reliability, "confidence": confidence}
    reason = withheld(reliability, distinct_failures(s.study))
    if reason is not None:
        return out | {"value": None, "reason": reason}
    return out | {"value": lower_bound(of.quantiles[:, 1 + k], confidence)}


def _margin(s: Statement, m: Margin, index: int) -> Json:
    demand = s.study.demands[index].force
    kind = "varies" if isinstance(demand, Varies) else "exact" if isinstance(demand, float | int) else "not known"
    found: Json = {"demand": m.demand, "service": None, "measure": "force", "unit": "N", "required": m.required}
    ends = None if kind == "exact" else interval(m.required_draws)["interval"]
    found |= {"required_kind": kind, "required_interval": ends} | interval(m.draws)
    found["guaranteed"] = [_guaranteed(s, g) for g in m.guaranteed]
    return found | {"shortfall_probability": _shortfall(s, m.shortfall), "shares": None}


def _guaranteed(s: Statement, g: Guaranteed) -> Json:
    out = {"reliability": g.reliability, "confidence": g.confidence, "value": g.value, "margin": g.margin}
    return out | {"met": shown(s, g.met)} | _why_not(s, g)


def _why_not(s: Statement, g: Guaranteed) -> dict[str, str]:
    """Why a value is absent, or is a computed one that nothing guarantees."""
    if g.reason:
        return {"reason": g.reason}
    return {} if s.stated else {"reason": "the statement is withheld: computed, not guaranteed"}


def _shortfall(s: Statement, draws: Array) -> Json:
    """Median and upper bound; what is below a tenth of one in the number of coupons is not given as a number."""
    least, confidence = smallest_share(s.study), s.study.statement.confidence
    ends = {"median": float(np.median(draws)), "upper": float(np.quantile(draws, confidence))}
    found = {k: (v if v >= least else None) for k, v in ends.items()}
    below = {"below": least, "reason": "fewer coupons than such a share would need"} if None in found.values() else {}
    return found | {"confidence": confidence} | below


def _energy(s: Statement) -> list[Json]:
    of = s.next_part if s.study.statement.applies_to == "next part" else s.pulled
    if of is None or not s.margins:
        return []
    worst = max(s.margins, key=lambda m: m.required)
    at_demand, at_capacity = interval(of.energy_at), interval(of.energy_at_capacity)
    return [
        {
            "demand": worst.demand, "at_demand": at_demand["median"], "at_demand_interval": at_demand["interval"],
            "at_capacity": at_capacity["median"], "at_capacity_interval": at_capacity["interval"], "level": LEVEL,
            "unit": "J",
        }
    ]  # fmt: skip


def _diagnostics(s: Statement, seconds: float) -> Json:
    chains = s.sample.chains
    chi2 = [(c.chi2_per_reading * c.readings, c.readings) for c in s.checks]
    fits = sum(c for c, _ in chi2) / max(sum(n for _, n in chi2), 1)
    out: Json = {
        "seconds": seconds, "chi2_per_reading": fits, "largest_stretch_informed": s.largest_stretch_informed,
        "stretch_at_capacity": s.stretch_at_capacity,
    }  # fmt: skip
    names = ("rhat_max", "ess_bulk_min", "ess_tail_min", "ess_sd_min", "evaluations", "acceptance")
    if chains is None:
        reason = "not sampled: Laplace approximation at the best fit"
        return out | dict.fromkeys(names) | {"sampling": None, "reason": reason}
    each = [d for d in (chains.diagnosis, s.margin_diagnosis) if d is not None]
    failures = s.calibration.laplace.posterior.failures
    worst = (
        max(d.rhat_max for d in each), *(min(float(getattr(d, k).min()) for d in each) for k in ("bulk", "tail", "sd")),
        chains.evaluations, float(chains.acceptance.mean()),
    )  # fmt: skip
    return out | dict(zip(names, worst, strict=True)) | {
        "sampling": {
            "walkers": chains.q.shape[0], "draws": chains.q.shape[1], "warm_up": chains.warm_up,
            "step_size": chains.step, "leapfrog_steps": chains.leaps, "failures": failures.unsolved,
            "outside_stable_laws": failures.unstable, "divergences": int(chains.diverging.sum()),
            "stopped": chains.stopped, "sampling_seconds": chains.seconds,
            "elements": int(s.calibration.model.piece.log_outline.size),
            "largest_discretisation_error_over_gauge_error": s.discretisation,
        }
    }  # fmt: skip


def _number(value: float | None) -> float | None:
    return None if value is None or not np.isfinite(value) else float(value)

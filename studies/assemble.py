"""From a study to its posterior: unknowns with their priors, one likelihood term per kind of reading."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from pullback.forward.criteria import Criterion, criteria
from pullback.forward.laws import Law, registry
from pullback.forward.loads import STANDARD_GRAVITY, Load, Weight
from pullback.forward.outline import Outline
from pullback.inverse.area_field import Basis
from pullback.inverse.layout import Block, Drive, Field, Layout, Modulus, Scalar
from pullback.inverse.piece import Names, Piece
from pullback.inverse.posterior import Posterior
from pullback.inverse.priors import LogNormal, Normal, Prior, Quantity
from pullback.inverse.readings.base import Term
from pullback.inverse.readings.curve import CouponStress
from pullback.inverse.readings.forces import Forces
from pullback.inverse.readings.marks import Marks
from pullback.inverse.readings.mass import Mass
from pullback.inverse.readings.sections import Sections
from pullback.inverse.readings.travel import TravelReadings
from pullback.inverse.scatter import Scatter, scatter
from pullback.studies.hardness import modulus_prior
from pullback.studies.outline_geometry import outline_of
from pullback.studies.strength_terms import (
    coupon_pairs,
    coupon_stress_term,
    expected_elongation,
    reference_volume,
    strength_terms,
    strength_unknowns,
)
from pullback.studies.study import Gauge, Pull, Study

Array = NDArray[np.float64]

ELEMENTS = 80
"""Elements of a part: the positions' error is then far below any gauge's, which `discretisation` measures."""

_STABLE_BEYOND = 1.2
_QUANTILE = 2.326  # the correlation lengths between the prior's 1 % and 99 % quantiles set the basis


@dataclass(frozen=True)
class Model:
    """A study's posterior and what the statement needs of how it was put together."""

    study: Study
    posterior: Posterior
    law: Law
    outline: Outline
    piece: Piece
    criterion: Criterion | None
    scatter: Scatter | None
    largest_stretch_read: float
    assumed: list[str] = field(default_factory=list)


def assemble(study: Study, elements: int = ELEMENTS) -> Model:
    """The model of a study of one pulled piece."""
    pull, law = study.pulls[0], registry[study.law.name]
    outline = outline_of(study.part.outline)
    assumed: list[str] = []
    steps = step_labels(pull)
    basis = _basis(study)
    piece = _piece(study, pull, law, outline, basis, steps, elements)
    blocks, constants = _unknowns(study, pull, law, piece, assumed)
    strength = None if study.strength is None else scatter(study.strength.scatter, reference_volume(study))
    criterion = None if study.strength is None else criteria[study.strength.criterion]
    terms = _terms(study, pull, piece, outline)
    if strength is not None and criterion is not None:
        blocks += strength_unknowns(study, strength)
        terms += strength_terms(study, pull, piece, criterion, strength)
    read = largest_stretch_read(study)
    grid = np.linspace(1.0, _STABLE_BEYOND * read, 48)
    posterior = Posterior(Layout(blocks, constants), law, [piece], terms, grid)
    return Model(study, posterior, law, outline, piece, criterion, strength, read, assumed)


def step_labels(pull: Pull) -> tuple[str, ...]:
    """Steps in the order of the readings, then of marks without a reading."""
    marks = pull.marks.step if pull.marks is not None else ()
    return tuple(dict.fromkeys((*pull.readings.step, *marks)))


def loads_of(axis: str) -> tuple[Load, ...]:
    """Weight along the part, towards the pulled end where the held end is above."""
    sign = {"held end above": 1.0, "held end below": -1.0, "horizontal": 0.0}[axis]
    return (Weight(sign * STANDARD_GRAVITY),) if sign else ()


def largest_stretch_read(study: Study) -> float:
    """The largest stretch that marks, travel or coupons report."""
    pull = study.pulls[0]
    with np.errstate(invalid="ignore"):
        found = [1.0 + float(np.nanmax(np.append(pull.readings.travel, 0.0))) / study.part.length]
    if pull.marks is not None:
        found += _mark_stretches(pull, 0.08 * study.part.length)
    if study.strength is not None:
        coupons = study.strength.coupons
        if np.any(np.isfinite(coupons.elongation)):
            found.append(1.0 + float(np.nanmax(coupons.elongation)))
    return max(found)


def _mark_stretches(pull: Pull, base: float) -> list[float]:
    """Mean stretch between marks at least `base` apart, so that reading errors do not pass for stretch."""
    assert pull.marks is not None
    out = []
    steps = np.array(pull.marks.step)
    for label in dict.fromkeys(pull.marks.step):
        at = steps == label
        order = np.argsort(pull.marks.station[at])
        x, y = pull.marks.station[at][order], pull.marks.position[at][order]
        for i in range(x.size):
            j = int(np.searchsorted(x, x[i] + base))
            if j < x.size:
                out.append(float((y[j] - y[i]) / (x[j] - x[i])))
    return out


def _basis(study: Study) -> Basis | None:
    variation = study.area_variation
    if variation.spread == 0.0:
        return None
    ell, length = variation.correlation_length, study.part.length
    ends = np.array([-_QUANTILE, _QUANTILE])
    low, high = (ell, ell) if isinstance(ell, float) else tuple(ell.value(ends))
    # A length far beyond the part's only adds a constant, which the part's own offset holds; far below an element's
    # it cannot be seen.
    return Basis.spanning(length, max(float(low), length / 40.0), min(float(high), 2.0 * length))


def _piece(
    study: Study, pull: Pull, law: Law, outline: Outline, basis: Basis | None, steps: tuple[str, ...], elements: int
) -> Piece:
    nodes = outline.mesh(study.part.length, elements)
    middle = 0.5 * (nodes[1:] + nodes[:-1])
    return Piece(
        pull.piece, nodes, np.log(outline.area(middle)), basis, None if basis is None else basis.at(middle), law,
        loads_of(pull.axis), study.part.density or 0.0, pull.driven_by == "travel", steps,
    )  # fmt: skip


def _unknowns(
    study: Study, pull: Pull, law: Law, piece: Piece, assumed: list[str]
) -> tuple[list[Block], dict[str, float]]:
    g, variation, names = study.gauges, study.area_variation, piece.names
    blocks: list[Block] = []
    constants: dict[str, float] = {}

    def add(name: str, unit: str, quantity: Quantity) -> None:
        if isinstance(quantity, float | int):
            constants[name] = float(quantity)
        else:
            blocks.append(Scalar(name, unit, quantity))

    def error(name: str, unit: str, gauge: Gauge | None, used: bool = True) -> None:
        add(name, unit, Normal(0.0, gauge.value) if gauge is not None and gauge.value > 0.0 and used else 0.0)

    add("stiffness_scatter", "", study.law.part_to_part)
    add(names.stiffness, "sd", 0.0 if study.law.part_to_part == 0.0 else Normal(0.0, 1.0))
    priors = law_priors(study, law, assumed)
    for p in law.parameters:
        prior = priors[p.name]
        modulus = p.unit == "MPa"
        blocks.append(
            Modulus(p.name, p.unit, prior, stiffness=names.stiffness) if modulus else Scalar(p.name, p.unit, prior)
        )
    add("lot", "", Normal(0.0, variation.lot) if variation.lot > 0.0 else 0.0)
    add(names.section, "", Normal(0.0, variation.part_to_part) if variation.part_to_part > 0.0 else 0.0)
    error("density_error", "", g.density, pull.mass is not None)
    error("position_scale", "", g.position_scale, pull.marks is not None)
    error("grip_position", "mm", g.grip_position, pull.marks is not None or pull.sections is not None)
    error("force_scale", "", g.force_scale)
    error("force_zero", "N", g.force_zero)
    error("travel_zero", "mm", g.travel_zero)
    error("coupon_scale", "", g.coupon_scale, coupon_pairs(study) is not None)
    if piece.basis is not None:
        add("spread", "", variation.spread)
        add("correlation_length", "mm", variation.correlation_length)
        blocks.append(Field(names.field, "", piece.basis))
    blocks.append(_drive(pull, piece, study))
    return blocks, constants


def law_priors(study: Study, law: Law, assumed: list[str]) -> dict[str, Prior]:
    """The study's prior of each parameter, else one from the hardness, else the law's own."""
    out: dict[str, Prior] = {}
    from_hardness = modulus_prior(study.part.hardness, study.part.hardness_scale)
    for k, p in enumerate(law.parameters):
        if p.name in study.law.priors:
            out[p.name] = study.law.priors[p.name]
            continue
        if k == 0 and from_hardness is not None and p.name in ("mu", "c10"):
            out[p.name] = replace(from_hardness, median=from_hardness.median * (0.5 if p.name == "c10" else 1.0))
            why = f"from the hardness of {study.part.hardness:g} {study.part.hardness_scale}"
        else:
            kind, a, b = p.default
            out[p.name] = LogNormal(a, b) if kind == "lognormal" else Normal(a, b)
            why = "the law's own default"
        assumed.append(f"prior of {p.name}: {out[p.name]}{' ' + p.unit if p.unit else ''} ({why})")
    return out


def _drive(pull: Pull, piece: Piece, study: Study) -> Drive:
    """The true travel or force of each step, started at its reading, or by proportion where that is missing."""
    r, g = pull.readings, study.gauges
    read = r.travel if piece.by_travel else r.force
    at = {label: v for label, v in zip(r.step, read, strict=True) if np.isfinite(v)}
    start = np.array([at.get(label, np.nan) for label in piece.steps])
    missing = ~np.isfinite(start)
    if np.any(missing):
        start[missing] = _from_marks(pull, piece, start, missing, study.part.length)
    gauge = g.travel_reading if piece.by_travel else g.force_reading
    known = gauge.sigma(np.where(missing, np.nanmax(np.abs(start)), start)) if gauge else np.full(start.size, 0.1)
    scale = np.maximum(known, 1e-3 * max(1.0, float(np.max(np.abs(start)))) * 1e-2)
    return Drive(Names.of(pull.piece, piece.by_travel).drive, "mm" if piece.by_travel else "N", start, scale)


def _from_marks(pull: Pull, piece: Piece, start: Array, missing: NDArray[np.bool_], length: float) -> Array:
    """Travel by proportion of the outermost mark; force by interpolation on that travel between the other steps."""
    assert pull.marks is not None
    steps = np.array(pull.marks.step)
    growth = np.full(len(piece.steps), np.nan)
    for k, label in enumerate(piece.steps):
        at = np.flatnonzero(steps == label)
        if at.size:
            last = at[np.argmax(pull.marks.station[at])]
            growth[k] = length * (pull.marks.position[last] / pull.marks.station[last] - 1.0)
    if piece.by_travel:
        return growth[missing]
    known = ~missing & np.isfinite(growth)
    order = np.argsort(growth[known])
    return np.interp(growth[missing], growth[known][order], start[known][order])


def _terms(study: Study, pull: Pull, piece: Piece, outline: Outline) -> list[Term]:
    g, terms = study.gauges, list[Term]()
    placement = g.mark_placement.value if g.mark_placement else 0.0
    if pull.marks is not None:
        assert g.mark_reading is not None
        terms.append(marks_term(pull, piece, g.mark_reading.value, placement))
    index = {label: k for k, label in enumerate(piece.steps)}
    at = np.array([index[label] for label in pull.readings.step])
    force, travel = pull.readings.force, pull.readings.travel
    some = np.isfinite(force)
    if np.any(some):
        assert g.force_reading is not None
        tare = 1.0 if pull.tared == "with piece" and _cell_is_above(pull) else 0.0
        sigma = g.force_reading.sigma(force[some])
        terms.append(Forces(pull.piece, at[some], force[some], sigma, pull.force_at == "held end", tare))
    some = np.isfinite(travel)
    if np.any(some) and g.travel_reading is not None:
        sigma = g.travel_reading.sigma(travel[some])
        terms.append(TravelReadings(pull.piece, at[some], travel[some], sigma))
    if pull.sections is not None:
        s = pull.sections
        log, slope = np.log(outline.area(s.station)), outline.log_slope(s.station)
        terms.append(Sections(piece, s.station, s.area, s.relative_error, placement, log, slope))
    if pull.mass is not None:
        assert g.mass_reading is not None
        error = float(g.mass_reading.sigma(np.array([pull.mass]))[0])
        terms.append(Mass(pull.piece, pull.mass - pull.mass_outside, error))
    return terms


def marks_term(pull: Pull, piece: Piece, sigma: float, placement: float) -> Marks:
    """Marks as a table of stations by steps, NaN where one was not read."""
    assert pull.marks is not None
    station = np.unique(pull.marks.station)
    position = np.full((station.size, len(piece.steps)), np.nan)
    rows = np.searchsorted(station, pull.marks.station)
    columns = [piece.steps.index(label) for label in pull.marks.step]
    position[rows, columns] = pull.marks.position
    return Marks(pull.piece, piece.nodes, station, position, sigma, placement)


def _cell_is_above(pull: Pull) -> bool:
    """Only a cell at the upper end carries the piece when it is zeroed with the piece hanging on it."""
    upper = {"held end above": "held end", "held end below": "pulled end"}.get(pull.axis)
    return upper == pull.force_at


def with_coupon_slope(model: Model, q: Array) -> Model:
    """The same model with the coupons' elongation error carried through the law's slope at the fit q (dim,)."""
    both, study = coupon_pairs(model.study), model.study
    if both is None or study.gauges.coupon_elongation is None:
        return model
    assert study.strength is not None
    values = model.posterior.layout.unpack(q[None])
    theta = np.array([values[p.name][0] for p in model.law.parameters])
    stretch = 1.0 + expected_elongation(study.strength.coupons.elongation[both], study.gauges.coupon_elongation)[0]
    stress, slope = model.law.stress_and_slope(stretch, theta)
    term = coupon_stress_term(study, model.law, both, slope * stretch / stress)
    terms = [term if isinstance(t, CouponStress) else t for t in model.posterior.terms]
    return replace(model, posterior=replace(model.posterior, terms=terms, guesses={}))

"""Every number that the report shows, as tables with units in their headings."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from pullback.forward.solve import equilibrium
from pullback.inverse.readings.base import GaussianTerm
from pullback.inverse.readings.marks import Marks
from pullback.inverse.statement.population import Capacity
from pullback.studies.results.bands import LEVEL, band, columns
from pullback.studies.results.cells import defused
from pullback.studies.results.parameters import parameters
from pullback.studies.statement import Statement
from pullback.studies.strength_terms import coupon_measure

Array = NDArray[np.float64]

_CURVE_POINTS = 60
_CURVE_DRAWS = 64
_BARS = 36


def tables(s: Statement) -> Iterator[tuple[str, pd.DataFrame]]:
    """Name and content of each table, those that have no content left out; no text in them works as a formula."""
    made = {
        "parameters": parameters_table, "marks": marks, "readings": readings, "sections": sections, "area": area,
        "profile": profile, "force_travel": force_travel, "law": law, "coupons": coupons, "capacity": capacity,
        "where": where, "margins": margins_table, "guaranteed": guaranteed, "margin_distribution": margin_distribution,
        "checks": checks, "prior_sensitivity": prior_sensitivity,
    }  # fmt: skip
    for name, make in made.items():
        table = make(s)
        if len(table):
            yield name, defused(table)


def parameters_table(s: Statement) -> pd.DataFrame:
    """One row a parameter."""
    rows = []
    for name, p in parameters(s).items():
        ends = {"lower": p["interval"][0], "upper": p["interval"][1]}
        rows.append({"parameter": name} | {k: p[k] for k in ("unit", "median", "sd")} | ends | {"level": LEVEL})
        rows[-1] |= {"informed": p["informed"], "meaning": p["meaning"], "prior": p["prior"]}
    return pd.DataFrame(rows)


def marks(s: Statement) -> pd.DataFrame:
    """One row a mark and step: read, predicted with band, standardised residual, where it was read."""
    pull, term = s.study.pulls[0], _term(s, Marks)
    if pull.marks is None or not isinstance(term, Marks):
        return pd.DataFrame()
    piece, b = s.calibration.model.piece, s.bands
    rows = np.searchsorted(term.station, pull.marks.station)
    steps = np.array([piece.steps.index(label) for label in pull.marks.step])
    values, predictions = s.calibration.model.posterior.predict(b.q)
    prediction = predictions[piece.name]
    expected = term.expected(values, prediction)[rows, steps]
    residual = np.median(term.standardised(values, prediction), axis=-1)[rows, steps]
    frame = {"piece": pull.piece, "step": list(pull.marks.step), "station [mm]": pull.marks.station}
    frame |= {"position read [mm]": pull.marks.position} | columns(expected, "position", "mm")
    frame |= {"residual": residual, "file": pull.marks.rows.file, "line": pull.marks.rows.line}
    return pd.DataFrame(frame)


def readings(s: Statement) -> pd.DataFrame:
    """One row a step: travel and force, read with the gauge's standard error, and what it should read with band."""
    pull, piece, b = s.study.pulls[0], s.calibration.model.piece, s.bands
    at = np.array([piece.steps.index(label) for label in pull.readings.step])
    travel, travel_error = _expected(s, "travel", pull.readings.travel, b.position[-1, at] - piece.nodes[-1])
    force, force_error = _expected(s, "force", pull.readings.force, b.end_force[at])
    frame = {"piece": pull.piece, "step": list(pull.readings.step), "travel read [mm]": pull.readings.travel}
    frame |= {"travel standard error [mm]": travel_error} | columns(travel, "travel", "mm")
    frame |= {"force read [N]": pull.readings.force, "force standard error [N]": force_error}
    frame |= columns(force, "force", "N") | {"file": pull.readings.rows.file, "line": pull.readings.rows.line}
    return pd.DataFrame(frame)


def _expected(s: Statement, kind: str, read: Array, true: Array) -> tuple[Array, Array]:
    """What the gauge should have read (rows, draws), with its own zero, scale, end and tare, and its standard error.

    `true` (rows, draws) stands where nothing was read.
    """
    posterior, error = s.calibration.model.posterior, np.full(read.size, np.nan)
    term = next((t for t in posterior.terms if t.kind == kind), None)
    if not isinstance(term, GaussianTerm):
        return true, error
    some, expected = np.flatnonzero(np.isfinite(read)), true.copy()
    values, predictions = posterior.predict(s.bands.q)
    expected[some] = term.expected(values, predictions[s.calibration.model.piece.name])
    error[some] = term.sigma
    return expected, error


def sections(s: Statement) -> pd.DataFrame:
    """One row a measured section, beside the inferred one."""
    pull, model = s.study.pulls[0], s.calibration.model
    if pull.sections is None:
        return pd.DataFrame()
    x, b = pull.sections.station, s.bands
    log = np.log(model.outline.area(x))[:, None] + model.piece.offset(b.values)
    if model.piece.basis is not None:
        log = log + model.piece.basis.at(x) @ b.values[model.piece.names.field]
    frame = {"piece": pull.piece, "station [mm]": x, "area read [mm^2]": pull.sections.area}
    frame |= {"standard error [mm^2]": pull.sections.area * pull.sections.relative_error}
    return pd.DataFrame(frame | columns(np.exp(log), "area", "mm^2"))


def area(s: Statement) -> pd.DataFrame:
    """Section along the piece with band, beside the outline."""
    piece = s.calibration.model.piece
    frame = {"piece": piece.name, "station [mm]": piece.middle, "outline [mm^2]": np.exp(piece.log_outline)}
    return pd.DataFrame(frame | columns(np.exp(s.bands.log_area), "area", "mm^2"))


def profile(s: Statement) -> pd.DataFrame:
    """Per step and station: position, stretch, nominal and true stress, current section, and J."""
    piece, b = s.calibration.model.piece, s.bands
    middle = 0.5 * (b.position[1:] + b.position[:-1])
    frames = []
    for k, step in enumerate(piece.steps):
        stretch, stress = b.stretch[:, k], b.stress[:, k]
        frame = {"piece": piece.name, "step": step, "station [mm]": piece.middle}
        frame |= columns(middle[:, k], "position", "mm") | columns(stretch, "stretch")
        frame |= columns(stress, "nominal stress", "MPa") | columns(stress * stretch, "true stress", "MPa")
        # An incompressible compound keeps its volume: J is one by assumption, not by measurement.
        frame |= columns(np.exp(b.log_area) / stretch, "current section", "mm^2")
        frames.append(pd.DataFrame(frame).assign(J=1.0))
    return pd.concat(frames)


def force_travel(s: Statement) -> pd.DataFrame:
    """Force at the pulled end against travel, from rest to a tenth beyond the last step."""
    piece, b = s.calibration.model.piece, s.bands
    thin = slice(None, None, max(1, b.q.shape[0] // _CURVE_DRAWS))
    values = {k: v[..., thin] for k, v in b.values.items()}
    top = 1.1 * float(np.median(b.position[-1].max(axis=0)) - piece.nodes[-1])
    travel = np.linspace(0.0, top, _CURVE_POINTS)
    log_area = piece.log_area(values)
    drive = np.repeat(travel[:, None], log_area.shape[1], axis=1)
    state = equilibrium(piece.bar(values, log_area), drive, True)
    good = state.converged
    force = state.end_force[:, good] if np.any(good) else state.end_force
    return pd.DataFrame({"piece": piece.name, "travel [mm]": travel} | columns(force, "force", "N"))


def law(s: Statement) -> pd.DataFrame:
    """The compound's stress against stretch with band, and where it is calibrated."""
    model, values = s.calibration.model, s.bands.values
    top = 1.1 * max(s.largest_stretch_informed, s.stretch_at_capacity or 1.0)
    stretch = np.linspace(1.0, top, 120)
    theta = np.stack([values[p.name] for p in model.law.parameters])[:, None, :]
    stress = model.law.stress(stretch[:, None], theta)
    informed = np.where(stretch <= s.largest_stretch_informed, "yes", "no")
    return pd.DataFrame({"stretch": stretch} | columns(stress, "nominal stress", "MPa") | {"informed": informed})


def coupons(s: Statement) -> pd.DataFrame:
    """One row a coupon: its measure, and the law's stress at its elongation beside the stress read."""
    if s.study.strength is None:
        return pd.DataFrame()
    c, model = s.study.strength.coupons, s.calibration.model
    stretch = np.where(np.isfinite(c.elongation), 1.0 + c.elongation, np.nan)
    theta = np.stack([s.bands.values[p.name] for p in model.law.parameters])[:, None, :]
    with np.errstate(invalid="ignore"):
        stress = model.law.stress(stretch[:, None], theta)
    frame = {"coupon": np.arange(1, stretch.size + 1), "measure read": coupon_measure(s.study)}
    frame |= {"elongation read": c.elongation, "stretch read": stretch, "nominal stress read [MPa]": c.stress}
    frame |= columns(stress, "nominal stress", "MPa")
    return pd.DataFrame(frame | {"broke": np.where(c.broke, "yes", "no"), "file": c.rows.file, "line": c.rows.line})


def _capacities(s: Statement) -> dict[str, Capacity]:
    found = {"next part": s.next_part, s.study.pulls[0].piece: s.pulled}
    return {k: v for k, v in found.items() if v is not None}


def capacity(s: Statement) -> pd.DataFrame:
    """Share failed against load with band, and the predictive share."""
    frames = []
    for part, of in _capacities(s).items():
        # Seldom more than a hundred points are needed to draw a curve.
        frame = {"part": part, "load [N]": of.loads} | columns(of.failed.T, "share failed")
        frames.append(pd.DataFrame(frame | {"predictive": of.failed.mean(axis=0)}))
    return pd.concat(frames) if frames else pd.DataFrame()


def where(s: Statement) -> pd.DataFrame:
    """Probability of failing in each element."""
    x = s.calibration.model.piece.middle
    frames = [
        pd.DataFrame({"part": part, "station [mm]": x, "probability": of.where}) for part, of in _capacities(s).items()
    ]
    return pd.concat(frames) if frames else pd.DataFrame()


def margins_table(s: Statement) -> pd.DataFrame:
    """One row a demand: required load, predictive margin with band."""
    rows = []
    for m in s.margins:
        lower, median, upper = band(m.draws)
        row = {"demand": m.demand, "required [N]": m.required}
        rows.append(row | {"margin median": median, "margin lower": lower, "margin upper": upper})
    return pd.DataFrame(rows)


def guaranteed(s: Statement) -> pd.DataFrame:
    """One row a demand and reliability."""
    return pd.DataFrame(
        [
            {
                "demand": m.demand, "reliability": g.reliability, "confidence": g.confidence,
                "guaranteed load [N]": g.value, "margin": g.margin, "met": shown(s, g.met),
            }
            for m in s.margins for g in m.guaranteed
        ]
    )  # fmt: skip


def shown(s: Statement, met: str) -> str:
    """Met or not only where the evidence carries it."""
    return met if s.stated else "not shown"


def margin_distribution(s: Statement) -> pd.DataFrame:
    """Histogram of each predictive margin: zero is an edge, and the last bar holds what lies beyond it too."""
    frames = []
    for m in s.margins:
        low, high = float(m.draws.min()), float(np.quantile(m.draws, 0.999))
        width = max(high - low, 1e-6) / _BARS
        edges = width * np.arange(np.floor(low / width), np.ceil(high / width) + 1.0)
        count, _ = np.histogram(np.clip(m.draws, edges[0], edges[-1]), bins=edges)
        frame = {"demand": m.demand, "margin from": edges[:-1], "margin to": edges[1:]}
        frames.append(pd.DataFrame(frame | {"probability": count / m.draws.size}))
    return pd.concat(frames) if frames else pd.DataFrame()


def checks(s: Statement) -> pd.DataFrame:
    """Posterior predictive checks."""
    return pd.DataFrame([vars(c) for c in s.checks])


def prior_sensitivity(s: Statement) -> pd.DataFrame:
    """What halving and doubling each prior's scale does to the guaranteed loads."""
    return pd.DataFrame([vars(m) for m in s.prior_moves])


def _term(s: Statement, kind: type) -> object:
    return next((t for t in s.calibration.model.posterior.terms if isinstance(t, kind)), None)



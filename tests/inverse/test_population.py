"""Capacity of parts over sections and strength: closed form where there is one, plain simulation elsewhere."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from brute_force import failure_loads, lognormal_fails, weibull_fails, yeoh
from scipy import stats

from pullback.forward import Force, Part, law, solve
from pullback.forward.criteria import criteria
from pullback.forward.laws import registry
from pullback.forward.loads import Weight
from pullback.inverse.area_field import Basis
from pullback.inverse.piece import Piece
from pullback.inverse.scatter import scatter
from pullback.inverse.statement.population import PartModel, capacity

LAW = (0.3, -0.004, 2e-4)
LENGTH, AREA, VOLUME, DENSITY = 100.0, 30.0, 400.0, 2e-2
"""Part's length (mm), greatest section (mm²), coupons' volume (mm³); heavy (g/mm³), so that weight counts."""
SHARES = np.array([0.5, 0.1, 0.01])
STRENGTH = {
    ("elongation", "weibull"): (4.2, 12.0),
    ("elongation", "lognormal"): (4.2, 0.08),
    ("nominal stress", "weibull"): (10.0, 12.0),
    ("nominal stress", "lognormal"): (10.0, 0.08),
}


def part(kind, tapered=False, weight=False, spread=0.0, ell=15.0, elements=40):
    """The model of a part; tapered from 30 to 18 mm² over 60 mm where asked."""
    criterion, family = kind
    x = np.linspace(0.0, LENGTH, elements + 1)
    middle = 0.5 * (x[1:] + x[:-1])
    area = np.interp(middle, [0.0, 60.0], [AREA, 18.0]) if tapered else np.full(elements, AREA)
    basis = Basis.spanning(LENGTH, ell, ell) if spread else None
    piece = Piece(
        "P1", x, np.log(area), basis, None if basis is None else basis.at(middle), registry["yeoh"],
        (Weight(),) if weight else (), DENSITY, True, ("1",),
    )  # fmt: skip
    return PartModel(piece, registry["yeoh"], criteria[criterion], scatter(family, VOLUME))


def exactly(model, strength, draws, **others):
    """Named values, the same in every draw."""
    values = dict(zip(("c10", "c20", "c30"), LAW, strict=True))
    values |= {"lot": 0.0, "stiffness_scatter": 0.0, "density_error": 0.0, "P1 section": 0.0, "P1 stiffness": 0.0}
    values |= dict(zip(model.scatter.parameter_names, strength, strict=True)) | others
    return {k: np.full(draws, float(v)) for k, v in values.items()}


def load_of(measure, criterion):
    return AREA * (measure if criterion == "nominal stress" else yeoh(1.0 + measure, *LAW))


@pytest.mark.parametrize("criterion", ["elongation", "nominal stress"])
@pytest.mark.parametrize("modulus", [5.0, 12.0, 40.0])
def test_weakest_link_of_a_uniform_weightless_part(criterion, modulus):
    """S(F) = exp(−(s(F)/s0)^m V/V0). Weibull, J. Appl. Mech. 18 (1951) 293."""
    kind = (criterion, "weibull")
    model, s0 = part(kind), STRENGTH[kind][0]
    values = exactly(model, (s0, modulus), 3)
    size = AREA * LENGTH / VOLUME
    quantiles = load_of(s0 * (-np.log1p(-SHARES) / size) ** (1.0 / modulus), criterion)
    measure = s0 * np.array([0.85, 0.95]) * size ** (-1.0 / modulus)
    found = capacity(model, values, SHARES, load_of(measure, criterion), 1, 0.0)
    assert found.quantiles[0] == pytest.approx(quantiles, rel=1.5e-3)
    assert found.failed[0] == pytest.approx(-np.expm1(-((measure / s0) ** modulus) * size), rel=0.02)
    assert found.where.sum() == pytest.approx(1.0) and np.ptp(found.where) < 1e-9


@pytest.mark.parametrize("log_sd", [0.01, 0.03, 0.1, 0.3])
def test_most_stressed_section_of_a_uniform_part(log_sd):
    """The load is section times strength: log-normal, whatever its scatter, however narrow."""
    kind = ("nominal stress", "lognormal")
    model = part(kind)
    found = capacity(model, exactly(model, (10.0, log_sd), 2), SHARES, np.ones(1), 1, 0.0)
    assert found.quantiles[0] == pytest.approx(stats.lognorm(log_sd, scale=10.0 * AREA).ppf(SHARES), rel=1e-3)


@pytest.mark.parametrize(
    "kind, shape",
    [
        (("elongation", "weibull"), {"tapered": True, "weight": True, "spread": 0.04}),
        (("elongation", "lognormal"), {"tapered": True, "weight": True, "spread": 0.0}),
        (("nominal stress", "weibull"), {"tapered": True, "weight": True, "spread": 0.0}),
        (("nominal stress", "lognormal"), {"tapered": False, "weight": False, "spread": 0.04}),
    ],
    ids=str,
)
def test_against_simulation(kind, shape):
    """Sections 6 % and stiffness 5 % from part to part; 10 000 parts simulated.

    Within five standard errors of the simulation, and 0.3 % for tables and for 16 parts a draw. The share failed is
    asked at the load by which a tenth of the simulated have.
    """
    parts, p2p, scatter_of_stiffness = 10_000, 0.06, 0.05
    model = part(kind, **shape)
    simulated = simulate(model, kind, shape, parts, p2p, scatter_of_stiffness)
    wanted = np.quantile(simulated, SHARES)
    values = exactly(
        model, STRENGTH[kind], 200, stiffness_scatter=scatter_of_stiffness, spread=shape["spread"],
        correlation_length=15.0,
    )  # fmt: skip
    found = capacity(model, values, SHARES, wanted[1:2], 1, p2p)
    error = standard_errors(simulated)
    assert np.all(np.abs(found.quantiles.mean(axis=0) / wanted - 1.0) < 5.0 * error + 0.003)
    assert abs(found.failed.mean() - 0.1) < 5.0 * np.sqrt(0.09 / parts) + 0.003
    # One part a draw: 200 of them, both sources of scatter together.
    assert abs(np.median(found.load) / wanted[0] - 1.0) < 5.0 * error[0] * np.sqrt(parts / 200)


def standard_errors(sample):
    """Relative standard error of the sample's quantiles at SHARES, sqrt(p (1 − p)/n) over the density there."""
    d = np.minimum(0.01, 0.5 * SHARES)
    width = np.quantile(sample, SHARES + d) - np.quantile(sample, SHARES - d)
    return np.sqrt(SHARES * (1.0 - SHARES) / sample.size) * width / (2.0 * d) / np.quantile(sample, SHARES)


def simulate(model, kind, shape, parts, p2p, scatter_of_stiffness):
    rng = np.random.default_rng(12)
    piece, middle = model.piece, model.piece.middle
    log_area = piece.log_outline[:, None] + p2p * rng.standard_normal(parts)
    if shape["spread"]:
        cov = shape["spread"] ** 2 * np.exp(-0.5 * ((middle[:, None] - middle) / 15.0) ** 2)
        root = np.linalg.cholesky(cov + 1e-10 * np.eye(middle.size))
        log_area = log_area + root @ rng.standard_normal(log_area.shape)
    stiffness = np.exp(scatter_of_stiffness * rng.standard_normal(parts))
    first, second = STRENGTH[kind]
    weakest = kind[1] == "weibull"
    fails = weibull_fails(first, second, VOLUME, rng, parts) if weakest else lognormal_fails(first, second, rng, parts)
    density = DENSITY if shape["weight"] else 0.0
    by_stress = kind[0] == "nominal stress"
    return failure_loads(
        np.exp(log_area), stiffness, np.diff(piece.nodes), density, LAW, by_stress, fails, (5.0, 2000.0)
    )


@pytest.mark.parametrize("stood", [0.0005, 0.2, 3.0])
def test_pulled_piece_that_stood_is_conditioned_on_it(stood):
    """Having held F0, the load it holds with probability 1 − p has H = H(F0) − log(1 − p); to the loads' step."""
    kind = ("nominal stress", "weibull")
    model, (s0, m) = part(kind), STRENGTH[kind]
    size = AREA * LENGTH / VOLUME
    values = exactly(model, (s0, m), 2)
    found = capacity(model, values, SHARES, np.ones(1), 1, None, np.full(2, stood))
    wanted = AREA * s0 * ((stood - np.log1p(-SHARES)) / size) ** (1.0 / m)
    assert found.quantiles[0] == pytest.approx(wanted, rel=4e-3)


@pytest.mark.parametrize("g", [9806.65, -9806.65])
def test_what_hangs_below_is_what_the_solver_finds(g):
    """Force in each element under an end force = that force and the weight beyond the element's middle."""
    model = part(("elongation", "weibull"), tapered=True)
    model = replace(model, piece=replace(model.piece, loads=(Weight(g),)))
    area = np.exp(model.piece.log_outline)
    rubber = law("yeoh", c10=LAW[0], c20=LAW[1], c30=LAW[2])
    state = solve(Part(model.piece.nodes, area, DENSITY), rubber, Force([7.0]), [Weight(g)])
    hanging = model.hanging(model.piece.log_outline[:, None], DENSITY)
    assert 7.0 + hanging[:, 0] == pytest.approx(state.equilibrium.element.force[:, 0, 0], rel=1e-9)
    assert abs(hanging[0, 0]) > 0.3

"""The invented bar obeys statics and the closed forms of neo-Hookean straps."""

import numpy as np
import pytest

from generators.field import gaussian_process
from generators.laws import PARAMETERS, stress, stretch_at
from generators.priors import LAWS, draw
from generators.statics import GRAVITY, Bar, cell_reading
from pullback.datasets import load

CASES = load("neo_hookean_straps").data


def value(case: str, quantity: str) -> float:
    return float(CASES["value"][(CASES["case"] == case) & (CASES["quantity"] == quantity)][0])


def bar(axis="horizontal", n=2001, spread=0.05, density=1.12e-3, law="yeoh", seed=3):
    rng = np.random.default_rng(seed)
    x = np.linspace(0.0, 120.0, n)
    area = 30.0 * np.exp(gaussian_process(x, spread, 15.0, 1, rng)[0])
    return Bar(x, area, law, draw(law, rng), 1.03, density, axis)


@pytest.mark.parametrize("law", PARAMETERS)
def test_inverse_of_each_law(law):
    theta = draw(law, np.random.default_rng(1))
    stretch = np.linspace(0.75, 4.0, 60)
    assert stretch_at(law, theta, stress(law, theta, stretch)) == pytest.approx(stretch, rel=1e-12)


def test_priors_cover_every_parameter():
    assert {law: tuple(priors) for law, priors in LAWS.items()} == PARAMETERS


@pytest.mark.parametrize("axis, sign", [("held end above", 1.0), ("held end below", -1.0), ("horizontal", 0.0)])
def test_balance_between_any_two_sections(axis, sign):
    """Force on the lower of two sections, less that on the upper, is the weight between them."""
    b = bar(axis, density=0.2)
    force = b.area * b.stiffness * stress(b.law, b.theta, b.stretch(20.0))
    for i, j in ((0, 500), (333, 1200), (1500, 2000)):
        between = np.trapezoid(b.area[i : j + 1], b.x[i : j + 1])
        assert force[i] - force[j] == pytest.approx(sign * GRAVITY * 0.2 * between, abs=1e-9)
    assert force[-1] == pytest.approx(20.0, rel=1e-12)


@pytest.mark.parametrize("case, length, end_stress", [("H1", 20e3, 0.0), ("H2", 50e3, 0.0), ("H3", 20e3, 0.2)])
def test_hanging_straps(case, length, end_stress):
    x = np.linspace(0.0, length, 4001)
    b = Bar(x, np.full(x.size, 20.0), "neo-hookean", {"mu": 0.4}, 1.0, 950e-6, "held end above")
    assert b.position(20.0 * end_stress)[-1] == pytest.approx(1e3 * value(case, "length"), rel=1e-8)
    assert b.stretch(20.0 * end_stress)[0] == pytest.approx(value(case, "stretch at 0"), rel=1e-12)


@pytest.mark.parametrize("case, force", [("T1", 2.0), ("T2", 6.0)])
def test_tapered_straps(case, force):
    x = np.linspace(0.0, 100.0, 4001)
    b = Bar(x, 20.0 * (1.0 - 0.4 * x / 100.0), "neo-hookean", {"mu": 0.4}, 1.0, 0.0, "horizontal")
    assert b.position(force)[-1] == pytest.approx(1e3 * value(case, "length"), rel=1e-8)
    assert b.stretch(force)[[0, 2000, 4000]] == pytest.approx(
        [value(case, f"stretch at {s}") for s in ("0", "L/2", "L")], rel=1e-12
    )


@pytest.mark.parametrize("axis", ["held end above", "held end below", "horizontal"])
def test_end_force_of_a_travel(axis):
    b = bar(axis, density=0.05, n=401)
    for travel in (3.0, 60.0, 200.0):
        assert b.position(b.end_force_at(travel))[-1] - 120.0 == pytest.approx(travel, abs=1e-7)


@pytest.mark.parametrize(
    "axis, force_at, tared, weights",
    [
        ("held end above", "pulled end", "without piece", 0),
        ("held end above", "pulled end", "with piece", 0),
        ("held end above", "held end", "without piece", 1),
        ("held end above", "held end", "with piece", 0),
        ("held end below", "pulled end", "without piece", 0),
        ("held end below", "pulled end", "with piece", -1),
        ("held end below", "held end", "without piece", -1),
        ("held end below", "held end", "with piece", -1),
        ("horizontal", "pulled end", "with piece", 0),
        ("horizontal", "held end", "without piece", 0),
        ("horizontal", "held end", "with piece", 0),
    ],
)
def test_load_cell_place_and_tare(axis, force_at, tared, weights):
    """Free bodies of the piece and, where it hung on the cell while that was zeroed, of the piece alone."""
    b = bar(axis, density=0.05)
    weight = GRAVITY * 0.05 * np.trapezoid(b.area, b.x)
    assert cell_reading(b, 25.0, force_at, tared) == pytest.approx(25.0 + weights * weight, rel=1e-12)

"""Identities that hold whatever the law, checked for every registered one.

Hanging strap: integrate X(P) by parts, dX = −dP/(rho g). Force-driven strap: stretch depends on F/A alone, and on
moduli and sections only through their product. All follow from dN/dX + b = 0 and P = dW/dstretch.
"""

import numpy as np
import pytest
from scipy.optimize import brentq

from exact.any_law import NAMES, is_modulus, typical
from exact.richardson import EVEN, extrapolate, order
from pullback.forward import Force, Part, Travel, Weight, solve

SIZES = (32, 64, 128, 256)
DENSITY, G = 950e-6, 9.80665e-3


def hanging_length(rubber, length, end_stress, n):
    part = Part(np.linspace(0.0, length, n + 1), np.full(n, 20.0), DENSITY)
    return float(solve(part, rubber, Force([20.0 * end_stress]), loads=[Weight()]).position[-1, 0])


@pytest.mark.parametrize("name", NAMES)
def test_hanging_strap_of_any_law(name):
    """length = L/(P0 − Pe) [stretch P − W] between the ends, and d length / dL = stretch at the grip."""
    rubber = typical(name)
    held, end = 2.0, 1.2
    p0, pe = (float(rubber.stress(np.array(s))) for s in (held, end))
    length = (p0 - pe) / (DENSITY * G)
    work = [s * p - float(rubber.energy(np.array(s))) for s, p in ((held, p0), (end, pe))]
    exact = length / (p0 - pe) * (work[0] - work[1])
    values = [hanging_length(rubber, length, pe, n) for n in SIZES]
    assert order(values[1], values[2], exact) == pytest.approx(2.0, abs=0.05)
    assert extrapolate(values, EVEN) == pytest.approx(exact, rel=1e-8)
    longer, shorter = (
        extrapolate([hanging_length(rubber, f * length, pe, n) for n in SIZES], EVEN) for f in (1.001, 0.999)
    )
    assert (longer - shorter) / (0.002 * length) == pytest.approx(held, rel=1e-5)


def strap(n=60, scale=1.0):
    x = np.linspace(0.0, 100.0, n + 1)
    area = 20.0 * (1.0 + 0.2 * np.sin(0.11 * x[:-1]) - 0.002 * x[:-1])
    return Part(x, scale * area)


@pytest.mark.parametrize("name", NAMES)
def test_moduli_and_sections_enter_by_their_product(name):
    """(moduli, A) to (c moduli, A/c) leaves every stretch as it is, under force and under travel."""
    forces, travels = Force([5.0, 15.0]), Travel([20.0, 80.0])
    one, other = (solve(strap(), typical(name), end) for end in (forces, travels))
    scaled, also = (solve(strap(scale=1.0 / 1.7), typical(name, 1.7), end) for end in (forces, travels))
    assert scaled.stretch == pytest.approx(one.stretch, rel=1e-11)
    assert also.stretch == pytest.approx(other.stretch, rel=1e-11)
    assert also.force == pytest.approx(other.force, rel=1e-10)


@pytest.mark.parametrize("name", NAMES)
def test_the_product_is_a_null_direction(name):
    """Sum of modulus d/dmodulus minus sum of A d/dA of all positions is zero: without a section the Fisher matrix
    has this null direction."""
    rubber, part = typical(name), strap()
    s = solve(part, rubber, Force([5.0, 15.0])).sensitivity()
    by_moduli = s.position[:, :, s.theta] @ (rubber.theta * is_modulus(name))
    by_sections = s.position[:, :, s.area] @ part.area
    assert np.abs(by_moduli).max() > 1.0
    assert np.abs(by_moduli - by_sections).max() < 1e-9 * np.abs(by_moduli).max()


@pytest.mark.parametrize("name", NAMES)
def test_sensitivity_to_a_section(name):
    """d length = integral of g dA dX with g = −F/(A² dP/dstretch)."""
    rubber, part, force = typical(name), strap(), 12.0
    state = solve(part, rubber, Force([force]))
    end = np.zeros_like(state.position)
    end[-1] = 1.0
    gradient = state.gradient(position=end)
    stretch = np.array(
        [brentq(lambda s, a=a: float(rubber.stress(np.array(s))) - force / a, 0.9, 9.0, xtol=1e-13) for a in part.area]
    )
    slope = rubber.law.stress_and_slope(stretch, rubber.theta[:, None])[1]
    g = -force / (part.area**2 * slope)
    assert gradient.area == pytest.approx(g * np.diff(part.nodes), rel=1e-9)
    by_force = float(gradient.drive[0])
    by_moduli = float(gradient.theta @ (rubber.theta * is_modulus(name)))
    assert gradient.area @ part.area == pytest.approx(-force * by_force, rel=1e-9)
    assert gradient.area @ part.area == pytest.approx(by_moduli, rel=1e-9)

"""Every registered law against itself: stress is the slope of energy, and each derivative the limit of a quotient."""

import numpy as np
import pytest

from exact.any_law import NAMES, typical
from pullback.datasets import load
from pullback.forward import Force, Part, law, solve
from pullback.forward.laws.base import modulus_at_rest

STRETCH = np.array([0.7, 0.95, 1.0, 1.05, 1.5, 2.5, 4.0, 6.0])
STEP = 2e-3


def slope(f, x, step):
    """Central differences of steps h and h/2, extrapolated: error h⁴."""
    wide, narrow = ((f(x + h) - f(x - h)) / (2.0 * h) for h in (step, 0.5 * step))
    return (4.0 * narrow - wide) / 3.0


@pytest.mark.parametrize("name", NAMES)
def test_stress_is_the_slope_of_energy(name):
    rubber = typical(name)
    scale = np.abs(rubber.stress(STRETCH)) + 0.1
    assert np.all(np.abs(slope(rubber.energy, STRETCH, STEP) - rubber.stress(STRETCH)) < 1e-8 * scale)
    assert rubber.energy(np.ones(1)) == pytest.approx([0.0], abs=1e-15)
    assert rubber.stress(np.ones(1)) == pytest.approx([0.0], abs=1e-15)


@pytest.mark.parametrize("name", NAMES)
def test_stress_and_its_slope(name):
    rubber = typical(name)
    stress, by_stretch = rubber.law.stress_and_slope(STRETCH, rubber.theta[:, None])
    assert stress == pytest.approx(rubber.stress(STRETCH), rel=1e-13, abs=1e-15)
    assert by_stretch == pytest.approx(slope(rubber.stress, STRETCH, STEP), rel=2e-8)
    assert modulus_at_rest(rubber.law, rubber.theta[:, None])[0] == pytest.approx(
        slope(rubber.stress, np.ones(1), STEP)[0] / 3.0, rel=1e-8
    )


@pytest.mark.parametrize("name", NAMES)
def test_derivatives_by_parameters(name):
    kind, theta = typical(name).law, typical(name).theta
    for of, by in ((kind.stress, kind.stress_by_parameter), (kind.energy, kind.energy_by_parameter)):
        exact = by(STRETCH, theta[:, None])
        for k, value in enumerate(theta):
            step = 1e-3 * max(abs(value), 1e-3)

            def along(x, k=k, of=of):
                changed = theta.copy()
                changed[k] = x
                return of(STRETCH, changed[:, None])

            scale = np.abs(exact[k]).max()
            assert np.all(np.abs(exact[k] - slope(along, value, step)) < 1e-9 * scale), f"parameter {k}"


def test_neo_hookean_values():
    """Data set neo_hookean_bar: exact arithmetic."""
    bar, rubber = load("neo_hookean_bar").data, law("neo-hookean", mu=1.0)
    stress, by_stretch = rubber.law.stress_and_slope(bar["stretch"], rubber.theta[:, None])
    assert stress == pytest.approx(bar["stress"], rel=1e-14)
    assert by_stretch == pytest.approx(bar["slope"], rel=1e-14)
    assert rubber.energy(bar["stretch"]) == pytest.approx(bar["energy"], rel=1e-14)


def test_neo_hookean_stretch_of_a_uniform_bar():
    """Data set neo_hookean_inverse: roots of a cubic. A single stress at every section of a weightless bar."""
    table = load("neo_hookean_inverse").data
    part = Part(np.linspace(0.0, 50.0, 6), np.full(5, 10.0))
    state = solve(part, law("neo-hookean", mu=0.4), Force(4.0 * table["stress"]))
    assert state.stretch == pytest.approx(np.tile(table["stretch"], (5, 1)), rel=1e-12)

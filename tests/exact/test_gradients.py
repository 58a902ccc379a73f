"""Adjoint against tangent-linear, and both against central differences, for every law, end and load.

Differences are central with steps h and h/2, extrapolated to h⁴, h = 1e-3 of the parameter (of 10 mm or 10 N for a
drive): truncation about 1e-12, rounding about 1e-13 / 1e-3.
"""

from dataclasses import replace

import numpy as np
import pytest

from exact.any_law import NAMES, typical
from pullback.forward import Force, Part, Travel, Weight, solve

ENDS = {"travel": Travel([15.0, 60.0, 140.0]), "force": Force([6.0, 14.0, 22.0])}
STEP = 1e-3
ELEMENTS = 12


def problem(name, end, weight):
    """Law parameters, sections, drive and density in one vector, and the state as a function of it."""
    rubber = typical(name)
    x = np.linspace(0.0, 100.0, ELEMENTS + 1) ** 1.02
    area = 20.0 * (1.0 + 0.2 * np.sin(0.11 * x[:-1]) - 0.002 * x[:-1])
    start = np.concatenate((rubber.theta, area, ENDS[end].values, [5e-2]))
    k = rubber.theta.size

    def state(p):
        part = Part(x, p[k : k + ELEMENTS], p[-1])
        drive = type(ENDS[end])(p[k + ELEMENTS : -1])
        return solve(part, replace(rubber, theta=p[:k]), drive, loads=[Weight()] if weight else [])

    return start, state


def scalar_weights(state):
    rng = np.random.default_rng(8)
    shape = state.position.shape
    return rng.standard_normal(shape), rng.standard_normal(shape[1]), rng.standard_normal(shape[1])


def scalar(state, weights):
    gx, gf, gh = weights
    return float((gx * state.position).sum() + gf @ state.force + gh @ state.held_force)


def differences(start, state, weights):
    out = np.empty_like(start)
    for i, value in enumerate(start):
        h = STEP * max(abs(value), 1e-3 if abs(value) < 1.0 else 0.0)
        quotients = []
        for step in (h, 0.5 * h):
            up, down = start.copy(), start.copy()
            up[i] += step
            down[i] -= step
            quotients.append((scalar(state(up), weights) - scalar(state(down), weights)) / (2.0 * step))
        out[i] = (4.0 * quotients[1] - quotients[0]) / 3.0
    return out


@pytest.mark.parametrize("weight", [False, True], ids=["weightless", "weight"])
@pytest.mark.parametrize("end", ENDS)
@pytest.mark.parametrize("name", NAMES)
def test_gradient_against_differences(name, end, weight):
    start, state = problem(name, end, weight)
    at = state(start)
    gx, gf, gh = weights = scalar_weights(at)
    g = at.gradient(position=gx, force=gf, held_force=gh)
    found = np.concatenate((g.theta, g.area, g.drive, [g.density]))
    wanted = differences(start, state, weights)
    assert np.all(np.abs(found - wanted) <= 1e-8 * np.maximum(np.abs(wanted), 1e-3))


@pytest.mark.parametrize("weight", [False, True], ids=["weightless", "weight"])
@pytest.mark.parametrize("end", ENDS)
@pytest.mark.parametrize("name", NAMES)
def test_gradient_against_jacobian(name, end, weight):
    start, state = problem(name, end, weight)
    at = state(start)
    gx, gf, _ = scalar_weights(at)
    g, s = at.gradient(position=gx, force=gf), at.sensitivity()
    along = np.einsum("ns,nsp->p", gx, s.position) + gf @ s.force
    found = np.concatenate((g.theta, g.area, g.drive))
    wanted = np.concatenate((along[s.theta], along[s.area], along[s.drive]))
    assert np.abs(found - wanted) == pytest.approx(np.zeros(found.size), abs=1e-10 * np.abs(wanted).max())

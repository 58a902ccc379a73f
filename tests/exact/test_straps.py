"""Hanging and tapered neo-Hookean straps: closed forms and their derivatives, at the order the elements promise.

Values: data set neo_hookean_straps, each computed by closed form and by quadrature to the digits given there; those
that have a closed form are computed again here with mpmath.
"""

import mpmath
import numpy as np
import pytest

from exact.richardson import EVEN, extrapolate, order
from exact.straps import AREA, BETA, CASES, DENSITY, MU, QUANTITIES, G, state
from pullback.forward import Force, Outcome, Part, Weight, law, solve

SIZES = (32, 64, 128, 256)


@pytest.fixture(scope="module")
def states():
    return {case: [state(case, n) for n in SIZES] for case in ("H1", "H2", "H3", "T1", "T2")}


def test_all_converge(states):
    assert all(s.outcome == [Outcome.CONVERGED] for of_case in states.values() for s in of_case)


@pytest.mark.parametrize("q", QUANTITIES, ids=str)
def test_error_falls_with_the_square_of_the_element(q, states):
    values = [q.of(s) for s in states[q.case]]
    assert order(values[1], values[2], q.exact) == pytest.approx(2.0, abs=0.05)
    assert order(values[2], values[3], q.exact) == pytest.approx(2.0, abs=0.03)


@pytest.mark.parametrize("q", QUANTITIES, ids=str)
def test_limit_agrees_to_eight_digits(q, states):
    limit = extrapolate([q.of(s) for s in states[q.case]], q.powers)
    assert limit == pytest.approx(q.exact, rel=1e-8, abs=0.0)


def test_length_by_length_is_the_stretch_at_the_grip():
    """d length / d L = stretch at 0, the end force being the same; by central differences of step 1e-3 L."""

    def length(factor: float) -> float:
        values = []
        for n in SIZES:
            part = Part(np.linspace(0.0, 20e3 * factor, n + 1), np.full(n, AREA), DENSITY)
            values.append(solve(part, law("neo-hookean", mu=MU), Force([0.0]), loads=[Weight()]).position[-1, 0])
        return extrapolate(values, EVEN)

    value = CASES["value"][CASES["quantity"] == "d length / d L"]
    assert (length(1.001) - length(0.999)) / 40.0 == pytest.approx(float(value[0]), rel=1e-6)


def exact(case: str, name: str) -> float:
    return float(CASES["value"][(CASES["case"] == case) & (CASES["quantity"] == name)][0])


def stretch_of(stress):
    """Root of s³ − (P/mu) s² − 1 = 0."""
    return mpmath.findroot(lambda s: s**3 - stress / mpmath.mpf("0.4") * s**2 - 1, 1 + stress)


@pytest.mark.parametrize("case, length, end", [("H1", 20, "0"), ("H2", 50, "0"), ("H3", 20, "0.2")])
def test_hanging_closed_form(case, length, end):
    """length = L/(P0 − Pe) [stretch P − W] between the stretches at the two ends; MPa and m."""
    with mpmath.workdps(30):
        low = mpmath.mpf(end)
        high = low + mpmath.mpf(950) * mpmath.mpf(str(G)) * length / 10**6
        s0, se = stretch_of(high), stretch_of(low)
        work = [s * p - mpmath.mpf("0.2") * (s**2 + 2 / s - 3) for s, p in ((s0, high), (se, low))]
        assert float(length / (high - low) * (work[0] - work[1])) == pytest.approx(exact(case, "length"), rel=1e-14)
        assert float(s0) == pytest.approx(exact(case, "stretch at 0"), rel=1e-14)


@pytest.mark.parametrize("case, force", [("T1", 2), ("T2", 6)])
def test_taper_closed_form(case, force):
    """length = L F/(beta A0 mu) / 3 [ln(s³ − 1) − 3/(s³ − 1)] between the stretches at the two ends."""
    with mpmath.workdps(30):
        area = mpmath.mpf(str(AREA))
        s0, s1 = (stretch_of(force / a) for a in (area, area * (1 - mpmath.mpf(str(BETA)))))
        term = [mpmath.log(s**3 - 1) - 3 / (s**3 - 1) for s in (s0, s1)]
        length = mpmath.mpf("0.1") * force / (mpmath.mpf(str(BETA)) * area * mpmath.mpf(str(MU))) / 3
        assert float(length * (term[1] - term[0])) == pytest.approx(exact(case, "length"), rel=1e-14)
        assert float(s1) == pytest.approx(exact(case, "stretch at L"), rel=1e-14)

"""The posterior's gradient and whitened Jacobian, for every drive, axis, place of the load cell and way of zeroing it.

Differences are central with five points (Abramowitz & Stegun 25.3.6) at the step 0.02 s, s the conditional standard
deviation of each coordinate, or 0.2 prior standard deviations where the data leave more: truncation 0.02⁴/30 = 5e-9
times the fifth derivative in units of s, which is far below one. The equilibrium is solved to 1e-13, so that rounding
stays about 1e-12. Errors are relative to the derivative, or to 1/s where that is larger.
"""

from __future__ import annotations

import itertools
from dataclasses import replace

import numpy as np
import pytest
from every_gauge import model

from pullback.forward.solve import equilibrium
from pullback.inverse.layout import Layout, Modulus
from pullback.inverse.posterior import Posterior
from pullback.inverse.readings.curve import Curve
from pullback.inverse.readings.marks import Marks

STEP, WITHIN = 0.02, 1e-8
SETUPS = list(
    itertools.product(
        ("travel", "force"),
        ("held end above", "held end below", "horizontal"),
        ("pulled end", "held end"),
        ("without piece", "with piece"),
    )
)
STRENGTHS = list(itertools.product(("elongation", "nominal stress"), ("weibull", "lognormal")))


def sheared(posterior: Posterior, q: np.ndarray) -> Posterior:
    """Moduli in coordinates sheared along the piece's own stiffness."""
    values = posterior.layout.unpack(q[None])
    blocks = list(posterior.layout.blocks)
    for k, b in enumerate(blocks):
        if isinstance(b, Modulus):
            blocks[k] = b.sheared(values)
    return replace(posterior, layout=Layout(blocks, posterior.layout.constants), guesses={})


def scales(posterior: Posterior, q: np.ndarray) -> np.ndarray:
    """Conditional standard deviation of each coordinate, from the whitened Jacobian and a unit prior."""
    return 1.0 / np.sqrt(1.0 + np.sum(posterior.jacobian(q) ** 2, axis=0))


def near_the_fit(posterior: Posterior) -> tuple[np.ndarray, np.ndarray]:
    """A point half a conditional standard deviation off the truth, and those deviations, at most 0.2."""
    q = np.zeros(posterior.layout.dim)
    s = scales(posterior, q)
    q = 0.5 * s * np.random.default_rng(4).standard_normal(q.size)
    posterior.set_guess(q)
    return q, np.minimum(s, 0.2)


@pytest.fixture(autouse=True)
def solved_tightly(monkeypatch):
    def tight(*args, tolerance):
        return equilibrium(*args, tolerance=1e-13)

    monkeypatch.setattr("pullback.inverse.piece.equilibrium", tight)


def differences(f, q: np.ndarray, s: np.ndarray) -> np.ndarray:
    """df/dq (dim, ...) of f (points, dim) -> (points, ...)."""
    h = STEP * s
    k = np.array([1.0, -1.0, 2.0, -2.0])
    points = q + k[:, None, None] * np.diag(h)
    values = f(points.reshape(-1, q.size))
    up, down, up2, down2 = values.reshape(4, q.size, *values.shape[1:])
    return ((8.0 * (up - down) - (up2 - down2)).T / (12.0 * h)).T


def setup(driven_by, axis, force_at, tared, strength, rubber="yeoh", shear=False):
    criterion, scatter = strength
    posterior = model(
        rubber=rubber, driven_by=driven_by, axis=axis, force_at=force_at, tared=tared, criterion=criterion,
        scatter=scatter,
    ).posterior  # fmt: skip
    if shear:
        posterior = sheared(posterior, np.full(posterior.layout.dim, 0.3))
    return posterior


def assert_gradient(posterior: Posterior) -> None:
    q, s = near_the_fit(posterior)
    value, gradient = posterior.value_and_gradient(q)
    assert np.isfinite(value[0]) and np.abs(value[0]) < 1e3
    found = differences(posterior.log_density, q, s)
    error = np.abs(found - gradient[0]) / np.maximum(np.abs(gradient[0]), 1.0 / s)
    assert error.max() < WITHIN, posterior.layout.names()[int(error.argmax())]
    assert posterior.failures.unsolved == posterior.failures.unstable == 0


def assert_jacobian(posterior: Posterior) -> None:
    q, s = near_the_fit(posterior)
    r, jacobian = posterior.residuals(q), posterior.jacobian(q)

    def residuals(points: np.ndarray) -> np.ndarray:
        return np.array([posterior.residuals(p) for p in points])

    found = differences(residuals, q, s)
    error = np.abs(found.T - jacobian) / np.maximum(np.abs(jacobian), 1.0 / s)
    row = 0
    for term in posterior.gaussian:
        of_term = slice(row, row + term.count)
        row += term.count
        if not isinstance(term, Marks):  # whose Jacobian is exact in the gradient alone
            assert error[of_term].max() < WITHIN, term.kind
    assert row == r.size
    by_q = differences(lambda p: 0.5 * np.sum(residuals(p) ** 2, axis=1), q, s)
    assert np.abs((jacobian.T @ r - by_q) * s).max() < WITHIN * max(1.0, np.abs(by_q * s).max())


@pytest.mark.parametrize("shear", [False, True], ids=["plain", "sheared"])
@pytest.mark.parametrize("k", range(len(SETUPS)), ids=[", ".join(s) for s in SETUPS])
def test_gradient(k, shear):
    assert_gradient(setup(*SETUPS[k], STRENGTHS[(k // 2 + k + shear) % 4], shear=shear))


@pytest.mark.parametrize("rubber", ["neo-hookean", "ogden-2"])
@pytest.mark.parametrize("strength", STRENGTHS, ids=[", ".join(s) for s in STRENGTHS])
def test_gradient_of_other_laws(rubber, strength):
    assert_gradient(setup(*SETUPS[3], strength, rubber, shear=True))


@pytest.mark.parametrize("k", range(len(SETUPS)), ids=[", ".join(s) for s in SETUPS])
def test_jacobian(k):
    assert_jacobian(setup(*SETUPS[k], STRENGTHS[0], shear=bool(k % 2)))


@pytest.mark.parametrize("rubber", ["neo-hookean", "ogden-2"])
def test_jacobian_of_other_laws(rubber):
    assert_jacobian(setup(*SETUPS[3], STRENGTHS[0], rubber, shear=True))


@pytest.mark.parametrize("k", range(0, len(SETUPS), 5), ids=[", ".join(s) for s in SETUPS[::5]])
def test_adjoint_against_tangent_linear(k):
    """With exactly placed marks and no strength all is Gaussian: gradient = prior's − Jᵀr, by two different solves."""
    posterior = setup(*SETUPS[k], STRENGTHS[0], shear=True)
    terms = list(posterior.gaussian)
    marks = next(i for i, t in enumerate(terms) if isinstance(t, Marks))
    m = terms[marks]
    terms[marks] = Marks("P1", posterior.pieces[0].nodes, m.station, m.position, m.sigma, 0.0)
    posterior = replace(posterior, terms=terms)
    q, s = near_the_fit(posterior)
    prior = replace(posterior, pieces=[], terms=[]).value_and_gradient(q)[1][0]
    by_tangent = prior - posterior.jacobian(q).T @ posterior.residuals(q)
    by_adjoint = posterior.value_and_gradient(q)[1][0]
    assert by_adjoint == pytest.approx(by_tangent, rel=1e-9, abs=1e-10 / s.min())


def test_every_unknown_is_seen():
    """The set-up misses nothing: each coordinate but the strength's, which residuals do not hold, moves a residual.
    (The shortest waves of the section, whose weights are nil, do so by less than can be told.)"""
    posterior = setup(*SETUPS[3], STRENGTHS[0])
    moved = np.sum(posterior.jacobian(near_the_fit(posterior)[0]) ** 2, axis=0) > 1e-12
    unseen = [n for n, m in zip(posterior.layout.names(), moved, strict=True) if not m]
    assert [n for n in unseen if not n.startswith("P1 field")] == ["strength_scale", "strength_modulus"]
    assert "P1 field[10]" not in unseen and len(posterior.layout.blocks) == 20
    assert {t.kind for t in posterior.terms} == {
        "marks", "force", "travel", "sections", "mass", "coupon strength", "coupons", "survival",
    }  # fmt: skip


def test_curve_with_unknown_noise():
    """Gradient by the law and the noise, and a Jacobian that counts in the noise, not in its first guess."""
    from exact_yeoh import posterior

    p = posterior(guess=0.3)
    q = np.array([0.3, -0.2, 0.1, 0.4])
    s = np.full(4, 0.1)
    gradient = p.value_and_gradient(q)[1][0]
    assert gradient == pytest.approx(differences(p.log_density, q, s), rel=1e-8, abs=1e-7)
    assert isinstance(p.terms[0], Curve)
    by_q = differences(lambda points: np.array([p.residuals(x) for x in points]), q, s)
    assert p.jacobian(q)[:, :3] == pytest.approx(by_q[:3].T, rel=1e-7, abs=1e-8)
    assert np.all(p.jacobian(q)[:, 3] == 0.0)

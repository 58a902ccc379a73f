"""The closed form for marks with a common placement error, against the dense multivariate normal it stands for."""

from __future__ import annotations

from types import SimpleNamespace

import numpy as np
import pytest
from scipy import stats

from pullback.inverse.piece import Cotangent
from pullback.inverse.readings.marks import Marks

NODES = np.linspace(0.0, 50.0, 11)
STATION = np.array([4.0, 17.5, 33.0, 50.0])
SIGMA, PLACEMENT, LANES = 0.15, 0.4, 3
VALUES = {"position_scale": np.array([0.01, -0.02, 0.0]), "grip_position": np.array([0.3, -0.5, 0.0])}


def prediction():
    """Positions that stretch more with each of five steps, another way in each lane."""
    rng = np.random.default_rng(6)
    stretch = 1.0 + np.linspace(0.2, 2.0, 5)[:, None] * rng.uniform(0.7, 1.3, (10, 5, LANES))
    position = np.zeros((11, 5, LANES))
    position[1:] = np.cumsum(5.0 * stretch, axis=0)
    return SimpleNamespace(state=SimpleNamespace(position=position))


def term(placement=PLACEMENT):
    rng = np.random.default_rng(7)
    read = prediction().state.position[[1, 4, 7, 10], :, 0] + rng.normal(0.0, 0.5, (4, 5))
    read[0, 1] = read[2, 0] = read[2, 3] = np.nan
    return Marks("P1", NODES, STATION, read, SIGMA, placement)


def dense(marks, placement):
    """Mean and covariance of each mark's readings, in each lane: x(X) + l X_grip and sigma² + placement² l lᵀ, times
    the image scale; positions and stretches by interpolation written anew."""
    position = prediction().state.position
    for lane in range(LANES):
        scale, grip = (VALUES[k][lane] for k in ("position_scale", "grip_position"))
        for j, station in enumerate(STATION):
            seen = np.isfinite(marks.position[j])
            e = min(int(station // 5.0), 9)
            left, right = position[e, seen, lane], position[e + 1, seen, lane]
            stretch = (right - left) / 5.0
            mean = (left + stretch * (station - 5.0 * e + grip)) * (1.0 + scale)
            by_shift = stretch * (1.0 + scale)
            cov = SIGMA**2 * np.eye(seen.sum()) + placement**2 * np.outer(by_shift, by_shift)
            yield lane, marks.position[j, seen], mean, cov


@pytest.mark.parametrize("placement", [PLACEMENT, 0.0])
def test_log_density_is_the_dense_normal(placement):
    marks, seen = term(placement), prediction()
    zeros = {k: np.zeros(LANES) for k in VALUES}
    cot = Cotangent(np.zeros_like(seen.state.position), np.zeros((5, LANES)), np.zeros((5, LANES)), np.zeros(0), zeros)
    wanted, chi = np.zeros(LANES), np.zeros(LANES)
    for lane, read, mean, cov in dense(marks, placement):
        wanted[lane] += stats.multivariate_normal(mean, cov).logpdf(read)
        chi[lane] += (read - mean) @ np.linalg.solve(cov, read - mean)
    assert marks.log_density(VALUES, seen, cot) == pytest.approx(wanted, rel=1e-12)
    assert marks.chi_square(VALUES, seen) == pytest.approx(chi, rel=1e-11)


def test_whitened_residuals_have_that_chi_square():
    marks, seen = term(), prediction()
    one = SimpleNamespace(state=SimpleNamespace(position=seen.state.position[..., :1]))
    values = {k: v[:1] for k, v in VALUES.items()}
    r = marks.whitened(values, one)
    assert r.shape == (17,)
    assert r @ r == pytest.approx(marks.chi_square(VALUES, seen)[0], rel=1e-11)


def test_simulated_chi_square_has_as_many_degrees_as_readings():
    """Mean n and variance 2n over 4000 lanes, within five standard errors."""
    position = np.repeat(prediction().state.position[..., :1], 4000, axis=2)
    many = SimpleNamespace(state=SimpleNamespace(position=position))
    chi = term().simulate_chi_square({}, many, np.random.default_rng(8))
    n = term().count
    assert abs(chi.mean() - n) < 5.0 * np.sqrt(2.0 * n / chi.size)
    # The fourth central moment of chi-square is 12 n (n + 4).
    assert abs(chi.var() - 2.0 * n) < 5.0 * np.sqrt((12.0 * n * (n + 4.0) - 4.0 * n * n) / chi.size)

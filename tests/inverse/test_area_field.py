"""The sine basis against the squared-exponential covariance it stands for, over its range of correlation lengths.

With the boundary two of the longest lengths beyond the part, the largest error is that of the image mirrored at the
boundary, four lengths off: exp(−4²/2) = 3.35e-4 of the variance.
"""

from __future__ import annotations

import numpy as np
import pytest

from pullback.inverse.area_field import Basis

SPREAD = 0.06
WITHIN = 1.02 * np.exp(-8.0)
CASES = [(120.0, 8.0, 40.0), (60.0, 15.0, 15.0), (150.0, 6.0, 25.0), (40.0, 5.0, 80.0)]
"""Length of the part, and the shortest and longest correlation length, mm."""


def largest_error(basis: Basis, length: float, ell: float) -> float:
    """Largest departure from the covariance anywhere on the part, over the variance."""
    x = np.linspace(0.0, length, 81)
    root = basis.at(x) * np.exp(basis.log_weight(np.array([SPREAD]), np.array([ell]))[:, 0])
    exact = SPREAD**2 * np.exp(-0.5 * ((x[:, None] - x) / ell) ** 2)
    return float(np.max(np.abs(root @ root.T - exact)) / SPREAD**2)


@pytest.mark.parametrize("length, low, high", CASES)
@pytest.mark.parametrize("at", [0.0, 0.5, 1.0])
def test_covariance(length, low, high, at):
    basis = Basis.spanning(length, low, high)
    assert largest_error(basis, length, low ** (1.0 - at) * high**at) < WITHIN


@pytest.mark.parametrize("length, low, high", CASES)
def test_usual_smaller_basis_fails(length, low, high):
    """Negative control: the boundary at 1.2 half lengths, and half as many terms."""
    good = Basis.spanning(length, low, high)
    narrow = Basis(good.middle, min(0.6 * length, 0.5 * length + 0.25 * high), good.omega)
    narrow = Basis(narrow.middle, narrow.boundary, np.arange(1, good.omega.size + 1) * np.pi / (2.0 * narrow.boundary))
    assert largest_error(narrow, length, high) > 0.1
    few = Basis(good.middle, good.boundary, good.omega[: good.omega.size // 2])
    assert largest_error(few, length, low) > 0.01


def test_weight_by_length():
    basis, ell, h = Basis.spanning(60.0, 8.0, 30.0), np.array([9.0, 14.0, 28.0]), 1e-5
    up, down = (basis.log_weight(np.full(3, SPREAD), ell * np.exp(s * h)) for s in (1.0, -1.0))
    assert basis.log_weight_by_log_ell(ell) == pytest.approx((up - down) / (2.0 * h), rel=1e-6, abs=1e-7)

"""Symmetric positive definite tridiagonal systems, one a lane, all lanes in one LAPACK call.

    | d0 e0          |
    | e0 d1 e1       |      The lanes' systems stand one after the other on one long diagonal, with a zero between
    |    e1 d2 ..    |      neighbours, so that a single factorisation serves them all.
    |       .. ..    |
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import lapack

Array = NDArray[np.float64]


class Tridiagonal:
    """L D Lᵀ factors of one system per lane.

    `diagonal` (m, *lanes), `off` (m−1, *lanes), the entries beside the diagonal. Raises numpy.linalg.LinAlgError where
    a system is not positive definite.
    """

    def __init__(self, diagonal: Array, off: Array) -> None:
        self.shape = diagonal.shape
        m = self.shape[0]
        d = np.ascontiguousarray(diagonal.reshape(m, -1).T)
        e = np.zeros_like(d)
        e[:, :-1] = off.reshape(m - 1, -1).T
        self._d, self._e, info = lapack.dpttrf(d.ravel(), e.ravel()[:-1], overwrite_d=True)
        if info != 0:
            raise np.linalg.LinAlgError(f"tridiagonal system not positive definite at row {info}")

    def solve(self, right: Array) -> Array:
        """Solution for `right` (m, *lanes), or (m, *lanes, k) for k right-hand sides a lane."""
        m = self.shape[0]
        lanes = int(np.prod(self.shape[1:], dtype=int))
        many = right.reshape(m, lanes, -1)
        b = np.asfortranarray(many.transpose(1, 0, 2).reshape(lanes * m, -1))
        x, info = lapack.dpttrs(self._d, self._e, b, overwrite_b=True)
        if info != 0:
            raise np.linalg.LinAlgError(f"tridiagonal solve failed with code {info}")
        return np.ascontiguousarray(x.reshape(lanes, m, -1).transpose(1, 0, 2)).reshape(right.shape)

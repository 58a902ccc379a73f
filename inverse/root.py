"""A square root of a covariance that may have lost its definiteness to rounding."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

_LEAST = 1e-12


def root(covariance: Array) -> Array:
    """Lower triangular L with L Lᵀ the covariance, its eigenvalues raised to 1e-12 of the largest where need be."""
    try:
        return np.asarray(np.linalg.cholesky(covariance), float)
    except np.linalg.LinAlgError:
        values, vectors = np.linalg.eigh(covariance)
        half = vectors * np.sqrt(np.maximum(values, _LEAST * values.max()))
        return np.asarray(np.linalg.qr(half.T)[1].T, float)

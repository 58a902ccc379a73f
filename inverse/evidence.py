"""The Laplace evidence as a smooth surface over the hyper-parameters, and draws from it."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import RBFInterpolator

Array = NDArray[np.float64]

_REACH = 3.5
_GRID = 141
_DEPTH = 25.0  # what is a billion times less likely need not bend the surface


class HasEvidence(Protocol):
    """A node of the nested fit."""

    @property
    def hyper(self) -> Array:
        """Coordinates of the hyper-parameters."""

    @property
    def log_evidence(self) -> float:
        """Log of their evidence, prior included."""


class Surface:
    """log evidence (hyper-prior included) through all nodes by a thin-plate spline over a grid of ±3.5."""

    def __init__(self, nodes: Sequence[HasEvidence]) -> None:
        kept = [n for n in nodes if np.isfinite(n.log_evidence)]
        z = np.array([n.hyper for n in kept])
        level = np.array([n.log_evidence for n in kept])
        z, first = np.unique(z.round(6), axis=0, return_index=True)
        level = level[first]
        self.axis = np.linspace(-_REACH, _REACH, _GRID)
        self.dims = z.shape[1]
        mesh = np.meshgrid(*[self.axis] * self.dims, indexing="ij")
        self.points = np.stack([m.ravel() for m in mesh], axis=1)
        # The normal prior of the coordinates is taken out first: what is left, the data's part, is smoother and flat
        # far out, where there are no nodes.
        data = np.maximum(level - level.max(), -_DEPTH) + 0.5 * np.sum(z**2, axis=1)
        order = 1 if z.shape[0] > self.dims else 0
        spline = RBFInterpolator(z, data, kernel="thin_plate_spline" if order else "linear", degree=order)
        clipped = np.clip(self.points, z.min(axis=0) - 0.5, z.max(axis=0) + 0.5)
        log = spline(clipped) - 0.5 * np.sum(self.points**2, axis=1)
        self.weight = np.exp(log - log.max())
        self.weight /= self.weight.sum()

    def moments(self) -> tuple[Array, Array]:
        """Mean and covariance of the coordinates."""
        mean = self.weight @ self.points
        off = self.points - mean
        return mean, (off * self.weight[:, None]).T @ off

    def draw(self, n: int, rng: np.random.Generator) -> Array:
        """n draws (n, dims), jittered within the grid's cells."""
        k = rng.choice(self.points.shape[0], n, p=self.weight)
        cell = self.axis[1] - self.axis[0]
        return self.points[k] + cell * (rng.random((n, self.dims)) - 0.5)

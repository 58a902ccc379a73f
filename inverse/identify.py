"""What the data determine and what they leave to the prior, from the whitened Jacobian at a point."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.layout import Field, Scalar
from pullback.inverse.posterior import Posterior

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Direction:
    """A combination of unknowns: how much of its prior variance the data take away, and its largest parts."""

    informed: float
    parts: list[tuple[str, float]]


@dataclass(frozen=True)
class Determined:
    """`informed` per proper scalar unknown, the least informed directions among them, and coefficients of the field
    that the data determine better than the prior does."""

    informed: dict[str, float]
    weakest: list[Direction]
    field_coefficients: int


def determined(posterior: Posterior, q: Array) -> Determined:
    """What the Gaussian readings determine about the point q (dim,).

    With prior precision one on every proper coordinate and J the whitened Jacobian, the posterior covariance is
    (JᵀJ + prior)⁻¹; `informed` is one less its diagonal. Directions are its eigenvectors over the proper scalars.
    """
    layout = posterior.layout
    jacobian = posterior.jacobian(q)
    proper = np.zeros(layout.dim)
    scalars: list[int] = []
    for b in layout.blocks:
        cut = layout.slices[b.name]
        if isinstance(b, Field) or (isinstance(b, Scalar) and b.prior.proper):
            proper[cut] = 1.0
        if isinstance(b, Scalar) and b.prior.proper:
            scalars.append(cut.start)
    seen = np.flatnonzero((np.sum(jacobian**2, axis=0) > 0.0) | (proper > 0.0))
    precision = jacobian[:, seen].T @ jacobian[:, seen] + np.diag(proper[seen])
    covariance = np.linalg.inv(precision)
    at = {int(i): k for k, i in enumerate(seen)}
    names = layout.names()
    informed = {names[i]: float(np.clip(1.0 - covariance[at[i], at[i]], 0.0, 1.0)) for i in scalars}
    rows = [at[i] for i in scalars]
    variance, vectors = np.linalg.eigh(covariance[np.ix_(rows, rows)])
    labels, last = [names[i] for i in scalars], range(-1, -1 - min(3, len(rows)), -1)
    weakest = [_direction(variance[k], vectors[:, k], labels) for k in last]
    information = np.sum(jacobian**2, axis=0)
    fields = [layout.slices[b.name] for b in layout.blocks if isinstance(b, Field)]
    coefficients = sum(int(np.sum(information[cut] > 1.0)) for cut in fields)
    return Determined(informed, weakest, coefficients)


def _direction(variance: float, vector: Array, names: list[str]) -> Direction:
    order = [k for k in np.argsort(-np.abs(vector))[:3] if abs(vector[k]) > 0.2]
    sign = np.sign(vector[order[0]]) if order else 1.0
    return Direction(float(np.clip(1.0 - variance, 0.0, 1.0)), [(names[k], float(sign * vector[k])) for k in order])

"""The contract of a constitutive law of an incompressible compound in simple tension."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Parameter:
    """One parameter of a law.

    `default` declares its prior where a study gives none: ("lognormal", median, geometric standard deviation), with a
    negative median for a parameter that is negative by nature, or ("normal", mean, standard deviation).
    """

    name: str
    unit: str
    meaning: str
    default: tuple[str, float, float]


class Law(Protocol):
    """A law, given by its strain energy W(stretch) per unstretched volume in simple tension.

    In every method `stretch` is an array of any shape and `theta` holds the parameters along its first axis, in the
    order of `parameters`, the rest of its shape broadcasting against `stretch`. Stress and energy are in the unit of
    the moduli (MPa; MJ/m³ = MPa).
    """

    @property
    def name(self) -> str:
        """Name in the registry."""

    @property
    def source(self) -> str:
        """Author, place and year."""

    @property
    def parameters(self) -> tuple[Parameter, ...]:
        """Parameters in the order of `theta`."""

    def stress(self, stretch: Array, theta: Array) -> Array:
        """Nominal stress P = dW/dstretch."""

    def stress_and_slope(self, stretch: Array, theta: Array) -> tuple[Array, Array]:
        """P and dP/dstretch."""

    def stress_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dP/dtheta, shape (number of parameters, *broadcast shape)."""

    def energy(self, stretch: Array, theta: Array) -> Array:
        """W, zero at stretch 1."""

    def energy_by_parameter(self, stretch: Array, theta: Array) -> Array:
        """dW/dtheta, shape (number of parameters, *broadcast shape)."""


def modulus_at_rest(law: Law, theta: Array) -> Array:
    """A third of dP/dstretch at stretch 1: the initial shear modulus of any incompressible law."""
    return law.stress_and_slope(np.ones(np.shape(theta)[1:]), theta)[1] / 3.0

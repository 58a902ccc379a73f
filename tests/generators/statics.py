"""A bar under dead loads: axial force from statics, stretch from the law, positions by adding up stretches."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import cumulative_trapezoid
from scipy.optimize import brentq

from generators.laws import Theta, stress, stretch_at

Array = NDArray[np.float64]

GRAVITY = 9.80665e-3
"""N per g at the standard acceleration of gravity."""

TOWARDS_PULLED_END = {"held end above": 1.0, "held end below": -1.0, "horizontal": 0.0}
"""Share of the weight that acts along the part, towards the pulled end."""


@dataclass(frozen=True)
class Bar:
    """One real part: sections `area` (mm²) at fine stations `x` (mm), and a factor on the stress of the law."""

    x: Array
    area: Array
    law: str
    theta: Theta
    stiffness: float
    density: float
    axis: str

    @property
    def mass(self) -> float:
        """Mass of the free length, g."""
        return float(self.density * np.trapezoid(self.area, self.x))

    def weight_beyond(self) -> Array:
        """Weight (N) between each station and the pulled end, positive where it pulls towards that end."""
        carried = cumulative_trapezoid(self.area, self.x, initial=0.0)
        return TOWARDS_PULLED_END[self.axis] * GRAVITY * self.density * (carried[-1] - carried)

    def axial_force(self, end_force: float) -> Array:
        """Axial force (N) at every station for a force at the pulled end."""
        return end_force + self.weight_beyond()

    def stretch(self, end_force: float) -> Array:
        """Stretch at every station."""
        return stretch_at(self.law, self.theta, self.axial_force(end_force) / (self.area * self.stiffness))

    def position(self, end_force: float) -> Array:
        """Position (mm) of every station."""
        return cumulative_trapezoid(self.stretch(end_force), self.x, initial=0.0)

    def end_force_at(self, travel: float) -> float:
        """The end force (N) at which the pulled end has moved by `travel` (mm)."""
        length = float(self.x[-1])
        guess = float(stress(self.law, self.theta, np.array(1.0 + travel / length))) * float(self.area.mean())
        return _root(lambda force: float(self.position(force)[-1]) - length - travel, guess)


def _root(function: Callable[[float], float], guess: float) -> float:
    low, high = 0.9 * guess - 0.1, 1.1 * guess + 0.1
    while function(low) > 0.0:
        low -= 0.3 * abs(guess) + 0.1
    while function(high) < 0.0:
        high += 0.3 * abs(guess) + 0.1
    return float(brentq(function, low, high, xtol=1e-10, rtol=1e-13))


def cell_reading(bar: Bar, end_force: float, force_at: str, tared: str) -> float:
    """What a faultless load cell shows (N).

    A cell at the held end carries the axial force there. One zeroed with the piece shows less by the piece's weight
    where the piece hung on it then, that is where the cell sits at the upper end.
    """
    shown = end_force if force_at == "pulled end" else float(bar.axial_force(end_force)[0])
    upper = {"held end above": "held end", "held end below": "pulled end", "horizontal": None}[bar.axis]
    if tared == "with piece" and force_at == upper:
        shown -= GRAVITY * bar.mass
    return shown

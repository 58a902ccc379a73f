"""Nominal stress in simple tension, written out from the published strain energies, and its inverse by bisection."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Theta = dict[str, float]

PARAMETERS = {
    "neo-hookean": ("mu",),
    "yeoh": ("c10", "c20", "c30"),
    "ogden-1": ("mu1", "alpha1"),
    "ogden-2": ("mu1", "alpha1", "mu2", "alpha2"),
    "ogden-3": ("mu1", "alpha1", "mu2", "alpha2", "mu3", "alpha3"),
}


def stress(law: str, theta: Theta, stretch: Array) -> Array:
    """Nominal stress (MPa): Treloar (1944), Yeoh (1993), Ogden (1972)."""
    if law == "neo-hookean":
        return theta["mu"] * (stretch - 1.0 / stretch**2)
    if law == "yeoh":
        first_invariant = stretch**2 + 2.0 / stretch
        bracket = first_invariant - 3.0
        energy_slope = theta["c10"] + 2.0 * theta["c20"] * bracket + 3.0 * theta["c30"] * bracket**2
        return 2.0 * energy_slope * (stretch - 1.0 / stretch**2)
    total = np.zeros_like(stretch)
    for k in range(1, len(theta) // 2 + 1):
        mu, alpha = theta[f"mu{k}"], theta[f"alpha{k}"]
        total = total + mu * (stretch ** (alpha - 1.0) - stretch ** (-0.5 * alpha - 1.0))
    return total


def stable_up_to(law: str, theta: Theta, limit: float) -> bool:
    """Whether nominal stress rises with stretch from 0.7 to `limit`."""
    return bool(np.all(np.diff(stress(law, theta, np.linspace(0.7, limit, 3000))) > 0.0))


def stretch_at(law: str, theta: Theta, wanted: Array, top: float = 30.0) -> Array:
    """The stretch between 0.2 and `top` at each nominal stress, by bisection to the last bit.

    Raises ValueError where a stress is out of reach, or the law does not rise up to there.
    """
    low, high = np.full_like(wanted, 0.2), np.full_like(wanted, _ceiling(law, theta, float(wanted.max()), top))
    if np.any(stress(law, theta, low) > wanted):
        raise ValueError("compressed beyond a stretch of 0.2")
    for _ in range(56):
        middle = 0.5 * (low + high)
        over = stress(law, theta, middle) > wanted
        high, low = np.where(over, middle, high), np.where(over, low, middle)
    return 0.5 * (low + high)


def _ceiling(law: str, theta: Theta, wanted: float, top: float) -> float:
    high = 1.05
    while float(stress(law, theta, np.array(high))) <= wanted:
        high *= 1.1
        if high > top:
            raise ValueError(f"{law} {theta} does not carry {wanted} MPa below a stretch of {top}")
    if not stable_up_to(law, theta, high):
        raise ValueError(f"{law} {theta} does not rise up to a stretch of {high}")
    return high

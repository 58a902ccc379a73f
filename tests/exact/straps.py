"""Neo-Hookean straps with everything that is known of them, in N, mm, MPa: one bundle a case of the data set."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from exact.richardson import ALL, EVEN
from pullback.datasets import load
from pullback.forward import Force, Part, State, Weight, law, solve

CASES = load("neo_hookean_straps").data
MU = 0.4
DENSITY = 950e-6
G = 9.80665
AREA = 20.0
BETA = 0.4


@dataclass(frozen=True)
class Quantity:
    """One known number: how it is had from a state, its exact value, and the powers of the size in its error."""

    case: str
    name: str
    exact: float
    of: Callable[[State], float]
    powers: tuple[int, ...]

    def __str__(self) -> str:
        return f"{self.case} {self.name}"


def state(case: str, n: int) -> State:
    """The case with n elements of one length."""
    if case.startswith("H"):
        length = {"H1": 20e3, "H2": 50e3, "H3": 20e3}[case]
        force = AREA * {"H1": 0.0, "H2": 0.0, "H3": 0.2}[case]
        part = Part(np.linspace(0.0, length, n + 1), np.full(n, AREA), DENSITY)
        return solve(part, law("neo-hookean", mu=MU), Force([force]), loads=[Weight()])
    force = {"T1": 2.0, "T2": 6.0}[case]
    part = Part(np.linspace(0.0, 100.0, n + 1), AREA * (1.0 - BETA * _middles(n)))
    return solve(part, law("neo-hookean", mu=MU), Force([force]))


def _middles(n: int) -> np.ndarray:
    """Middles of n elements over the length."""
    return (np.arange(n) + 0.5) / n


def _length_gradient(s: State):
    """Adjoint gradient of the length."""
    g = np.zeros_like(s.position)
    g[-1] = 1.0
    return s.gradient(position=g)


def _density_by_area(s: State) -> np.ndarray:
    """d length / d area per unstretched length, at the elements' middles (1/mm²)."""
    return _length_gradient(s).area / np.diff(s.equilibrium.bar.nodes)


def _by_beta(s: State) -> float:
    g = _length_gradient(s).area
    return float(-g @ (AREA * _middles(g.size)))


def _energy(s: State) -> float:
    bar = s.equilibrium.bar
    volume = bar.area[:, 0, 0] * np.diff(bar.nodes)
    return float(volume @ law("neo-hookean", mu=MU).energy(s.stretch[:, 0]))


def _at_start(v: np.ndarray) -> float:
    return float(1.5 * v[0] - 0.5 * v[1])


def _at_end(v: np.ndarray) -> float:
    return float(1.5 * v[-1] - 0.5 * v[-2])


def _at_middle(v: np.ndarray) -> float:
    n = v.size
    return float(0.5 * (v[n // 2 - 1] + v[n // 2]))


# Name in the data set: factor from m, Pa, N/m3 to mm, MPa, g/mm3; how it is had from a state; powers.
_KINDS: dict[str, tuple[float, Callable[[State], float], tuple[int, ...]]] = {
    "length": (1e3, lambda s: float(s.position[-1, 0]), EVEN),
    "position of L/2": (1e3, lambda s: float(s.position[s.position.shape[0] // 2, 0]), EVEN),
    "stretch at 0": (1.0, lambda s: _at_start(s.stretch[:, 0]), ALL),
    "stretch at L/2": (1.0, lambda s: _at_middle(s.stretch[:, 0]), EVEN),
    "stretch at L": (1.0, lambda s: _at_end(s.stretch[:, 0]), ALL),
    "d length / d mu": (1e9, lambda s: float(_length_gradient(s).theta[0]), EVEN),
    "d length / d rho g": (1e9 * G, lambda s: _length_gradient(s).density, EVEN),
    "d length / d Pe": (1e9, lambda s: float(_length_gradient(s).drive[0]) * AREA, EVEN),
    "d length / d F": (1e3, lambda s: float(_length_gradient(s).drive[0]), EVEN),
    "d length / d beta": (1e3, _by_beta, EVEN),
    "d length / d area at 0": (1e-6, lambda s: _at_start(_density_by_area(s)), ALL),
    "d length / d area at L/2": (1e-6, lambda s: _at_middle(_density_by_area(s)), EVEN),
    "d length / d area at L": (1e-6, lambda s: _at_end(_density_by_area(s)), ALL),
    "strain energy": (1e3, _energy, EVEN),
}

OUTSIDE = {"d length / d L"}
"""Known numbers that no single state gives; tested on their own."""

QUANTITIES = [
    Quantity(str(case), str(name), float(value) * _KINDS[name][0], *_KINDS[name][1:])
    for case, name, value in zip(CASES["case"], CASES["quantity"], CASES["value"], strict=True)
    if name not in OUTSIDE
]

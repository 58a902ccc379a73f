"""Linear-elastic bars of the handbooks, reached by every law as the load goes to zero.

Values: data set small_strain_bars (Timoshenko, Strength of Materials; Roark, Formulas for Stress and Strain), E = 1.2
MPa. Under f times the load a nonlinear law stretches by f u + f² c + O(f³), so half the difference between f and −f,
over f, is the handbook's u with an error in even powers of f: extrapolated from the strains 4e-3 and 2e-3.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest

from exact.richardson import EVEN, extrapolate, order
from pullback.datasets import load
from pullback.forward import BoundLaw, Force, Part, Weight, law, solve
from pullback.forward.laws.base import modulus_at_rest
from pullback.forward.laws.registry import registry

BARS = load("small_strain_bars").data
E = 1.2
STRAIN = 4e-3
SIZES = (32, 64, 128, 256)


@dataclass(frozen=True)
class Case:
    """`strain`: about the largest under the whole load. `powers`: of the element size, in the error."""

    name: str
    length: float
    area: Callable[[np.ndarray], np.ndarray]
    strain: float
    force: float = 0.0
    density: float = 0.0
    powers: tuple[int, ...] = EVEN

    @property
    def exact(self) -> float:
        """Elongation, mm."""
        return 1e3 * float(BARS["elongation"][BARS["case"] == self.name][0])


# The tip of the cone takes the error to h² (a + b log h): the power counts twice. A uniform hanging bar is exact at
# its nodes.
CASES = [
    Case("conical bar", 200.0, lambda u: np.pi / 4.0 * (10.0 - 4.0 * u) ** 2, 0.3, force=10.0),
    Case("width taper", 200.0, lambda u: 2.0 * (20.0 - 8.0 * u), 0.3, force=10.0),
    Case("hanging prism", 1000.0, lambda u: np.full_like(u, 25.0), 8e-3, density=950e-6),
    Case("hanging cone", 1000.0, lambda u: 25.0 * (1.0 - u) ** 2, 3e-3, density=950e-6, powers=(2, 2, 4)),
]


def unit_law(name: str) -> BoundLaw:
    """The law at its default parameters, moduli scaled to E = 3 mu."""
    kind = registry[name]
    theta = {p.name: p.default[1] for p in kind.parameters}
    mu = float(modulus_at_rest(kind, np.array(list(theta.values()))[:, None])[0])
    return law(name, **{p.name: theta[p.name] * (E / (3.0 * mu) if p.unit == "MPa" else 1.0) for p in kind.parameters})


def elongation(case: Case, rubber: BoundLaw, n: int) -> float:
    nodes = np.linspace(0.0, case.length, n + 1)
    part = Part(nodes, case.area((np.arange(n) + 0.5) / n), case.density)

    def per_load(f: float) -> float:
        up, down = (
            solve(part, rubber, Force([x * case.force]), loads=[Weight(x * 9806.65)]).travel[0] for x in (f, -f)
        )
        return float(0.5 * (up - down) / f)

    f = STRAIN / case.strain
    return (4.0 * per_load(0.5 * f) - per_load(f)) / 3.0


@pytest.mark.parametrize("name", registry)
@pytest.mark.parametrize("case", CASES, ids=lambda c: c.name)
def test_handbook_bar(case, name):
    rubber = unit_law(name)
    values = [elongation(case, rubber, n) for n in SIZES]
    assert extrapolate(values, case.powers) == pytest.approx(case.exact, rel=2e-7)


@pytest.mark.parametrize("case", CASES[:2], ids=lambda c: c.name)
def test_order_is_two(case):
    values = [elongation(case, unit_law("neo-hookean"), n) for n in SIZES]
    assert order(values[0], values[1], case.exact) == pytest.approx(2.0, abs=0.05)

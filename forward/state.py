"""One part under a sequence of load steps: the plain front of the solver."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from pullback.forward.balance import Bar
from pullback.forward.ends import End, Travel
from pullback.forward.laws.bound import BoundLaw
from pullback.forward.loads import Load
from pullback.forward.outcomes import Outcome
from pullback.forward.part import Part
from pullback.forward.sensitivity import Directions, adjoint, tangent_linear
from pullback.forward.solve import Equilibrium, equilibrium

Array = NDArray[np.float64]

_TIGHT = 1e-13


@dataclass(frozen=True)
class StateGradient:
    """Derivatives of one scalar: `theta` (k,) per unit of each law parameter, `area` (n,) per mm², `drive` (steps,)
    per mm or N, `density` per g/mm³."""

    theta: Array
    area: Array
    drive: Array
    density: float


@dataclass(frozen=True)
class StateSensitivity:
    """d(state)/d(parameters), parameters in the order law parameters, element sections, drive of each step.

    `position` (n+1, steps, p) and `force` (steps, p); `theta`, `area`, `drive`: slices of the last axis.
    """

    position: Array
    force: Array
    theta: slice
    area: slice
    drive: slice


@dataclass(frozen=True)
class State:
    """Equilibrium of one part: positions in mm, forces in N, stresses in MPa; the last axis counts load steps."""

    equilibrium: Equilibrium

    def __repr__(self) -> str:
        forces = ", ".join(f"{f:.4g}" for f in self.force)
        outcomes = ", ".join(sorted({o.value for o in self.outcome}))
        return f"State({len(self.outcome)} steps, force {forces} N, {outcomes})"

    @property
    def outcome(self) -> list[Outcome]:
        """What became of each step."""
        names = list(Outcome)
        return [names[int(c)] for c in self.equilibrium.code[:, 0]]

    @property
    def position(self) -> Array:
        """Position of each node (n+1, steps), mm from the held end."""
        return self.equilibrium.position[..., 0]

    @property
    def stretch(self) -> Array:
        """Stretch of each element (n, steps)."""
        return self.equilibrium.element.stretch[..., 0]

    @property
    def stress(self) -> Array:
        """Nominal stress of each element (n, steps), MPa."""
        return self.equilibrium.element.stress[..., 0]

    @property
    def force(self) -> Array:
        """Force at the pulled end (steps,), N."""
        return self.equilibrium.end_force[:, 0]

    @property
    def held_force(self) -> Array:
        """Force at the held grip (steps,), N."""
        return self.equilibrium.held_force[:, 0]

    @property
    def travel(self) -> Array:
        """Travel of the pulled end (steps,), mm."""
        return self.position[-1] - self.equilibrium.bar.nodes[-1]

    def gradient(
        self, position: ArrayLike | None = None, force: ArrayLike | None = None, held_force: ArrayLike | None = None
    ) -> StateGradient:
        """Adjoint derivatives of a scalar given by its derivatives: `position` (n+1, steps), forces (steps,)."""
        e = self.equilibrium
        g = adjoint(
            e, _lane(position, e.position.shape), _lane(force, e.end_force.shape), _lane(held_force, e.end_force.shape)
        )  # fmt: skip
        density = e.bar.density[0]
        per_density = g.log_density[0] / density if density > 0.0 else 0.0
        return StateGradient(g.theta[:, 0], g.log_area[:, 0] / e.bar.area[:, 0, 0], g.drive[:, 0], float(per_density))

    def sensitivity(self) -> StateSensitivity:
        """Tangent-linear derivatives of all positions and end forces."""
        e = self.equilibrium
        k, n, s = e.bar.theta.shape[0], e.bar.area.shape[0], e.end_force.shape[0]
        theta, area, drive = slice(0, k), slice(k, k + n), slice(k + n, k + n + s)
        p = k + n + s
        along = Directions(
            np.eye(p)[theta], np.eye(p)[area] / e.bar.area[:, 0], np.zeros(p), np.zeros(p), np.eye(p)[drive]
        )
        change = tangent_linear(e, along)
        return StateSensitivity(change.position, change.end_force, theta, area, drive)


def _lane(values: ArrayLike | None, shape: tuple[int, ...]) -> Array:
    if values is None:
        return np.zeros(shape)
    return np.asarray(values, float).reshape(shape)


def solve(part: Part, law: BoundLaw, end: End, loads: Sequence[Load] = ()) -> State:
    """Equilibrium of `part` under each value of `end`, in the order given, and `loads`.

    Outcomes other than *converged* are reported per step, with the best state found. Raises ValueError for a drive
    that is not finite.
    """
    if not np.all(np.isfinite(end.values)):
        raise ValueError("travel or force of every step must be finite")
    bar = Bar(
        part.nodes, part.area[:, None, None], law.law, law.theta[:, None, None], np.ones((1, 1)),
        np.array([part.density]), tuple(loads),
    )  # fmt: skip
    return State(equilibrium(bar, end.values[:, None], isinstance(end, Travel), tolerance=_TIGHT))

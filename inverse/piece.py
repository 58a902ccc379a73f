"""One pulled piece: from named values to its equilibrium, and derivatives back to the values."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.forward.balance import Bar
from pullback.forward.laws.base import Law
from pullback.forward.loads import Load
from pullback.forward.sensitivity import Change, Directions, adjoint, tangent_linear
from pullback.forward.solve import Equilibrium, equilibrium
from pullback.inverse.area_field import Basis
from pullback.inverse.layout import Values

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Names:
    """Names of the values that belong to one piece."""

    section: str
    field: str
    drive: str
    stiffness: str

    @classmethod
    def of(cls, piece: str, by_travel: bool) -> Names:
        """`P1 section`, `P1 field`, `P1 travel` or `P1 force`, `P1 stiffness`."""
        drive = "travel" if by_travel else "force"
        return cls(f"{piece} section", f"{piece} field", f"{piece} {drive}", f"{piece} stiffness")


@dataclass(frozen=True)
class Prediction:
    """State of one piece for a batch of values; `log_area` (n, lanes)."""

    piece: Piece
    values: Values
    log_area: Array
    state: Equilibrium


@dataclass
class Cotangent:
    """Derivatives of the log-density by what a piece's terms see; terms add to it."""

    position: Array
    end_force: Array
    held_force: Array
    log_area: Array
    values: Values

    @classmethod
    def zero(cls, prediction: Prediction, grads: Values) -> Cotangent:
        """All zero, sharing the gradients by value."""
        s = prediction.state
        return cls(
            np.zeros_like(s.position), np.zeros_like(s.end_force), np.zeros_like(s.end_force),
            np.zeros_like(prediction.log_area), grads,
        )  # fmt: skip


@dataclass(frozen=True)
class Tangent:
    """Change of a piece per unit of each coordinate, p of them; `log_area` (n, p), `values` as `Layout.push`."""

    state: Change
    log_area: Array
    values: Values


@dataclass(frozen=True)
class Piece:
    """Mesh, nominal section and loading of one piece.

    `nodes` (n+1,) mm; `log_outline` (n,) of mm²; `basis` with `phi` (n, m) at the elements' middles, or None where the
    section does not vary along the part; `density` g/mm³; `steps`: labels.
    """

    name: str
    nodes: Array
    log_outline: Array
    basis: Basis | None
    phi: Array | None
    law: Law
    loads: Sequence[Load]
    density: float
    by_travel: bool
    steps: tuple[str, ...]

    @property
    def names(self) -> Names:
        """Names of this piece's values."""
        return Names.of(self.name, self.by_travel)

    @property
    def middle(self) -> Array:
        """Stations of the elements' middles (n,), mm."""
        return 0.5 * (self.nodes[1:] + self.nodes[:-1])

    @property
    def length(self) -> float:
        """Unstretched length, mm."""
        return float(self.nodes[-1] - self.nodes[0])

    def offset(self, values: Values) -> Array:
        """Departure of the whole piece's log section from the outline (lanes,)."""
        return values["lot"] + values[self.names.section]

    def log_area(self, values: Values) -> Array:
        """log of each element's section (n, lanes)."""
        log_area = self.log_outline[:, None] + self.offset(values)
        return log_area if self.phi is None else log_area + self.phi @ values[self.names.field]

    def theta(self, values: Values) -> Array:
        """Law parameters (k, 1, lanes)."""
        return np.stack([values[p.name] for p in self.law.parameters])[:, None, :]

    def bar(self, values: Values, log_area: Array) -> Bar:
        """The bars of all lanes."""
        stiffness = np.exp(values["stiffness_scatter"] * values[self.names.stiffness])
        density = self.density * (1.0 + values["density_error"])
        return Bar(
            self.nodes, np.exp(log_area)[:, None, :], self.law, self.theta(values), stiffness[None], density, self.loads
        )

    def predict(self, values: Values, guess: Array | None = None) -> Prediction:
        """Equilibrium for every lane; `guess` (n+1, steps, lanes) are starting positions."""
        log_area = self.log_area(values)
        state = equilibrium(self.bar(values, log_area), values[self.names.drive], self.by_travel, guess, tolerance=1e-9)
        return Prediction(self, values, log_area, state)

    def pull_back(self, p: Prediction, cot: Cotangent) -> None:
        """Add to `cot.values` what the state and the sections contribute."""
        g, v, names = adjoint(p.state, cot.position, cot.end_force, cot.held_force), cot.values, self.names
        by_area = g.log_area + cot.log_area
        whole = by_area.sum(axis=0)
        v["lot"] = v["lot"] + whole
        v[names.section] = v[names.section] + whole
        if self.phi is not None:
            v[names.field] = v[names.field] + self.phi.T @ by_area
        for k, parameter in enumerate(self.law.parameters):
            v[parameter.name] = v[parameter.name] + g.theta[k]
        v[names.drive] = v[names.drive] + g.drive
        v["stiffness_scatter"] = v["stiffness_scatter"] + g.log_stiffness * p.values[names.stiffness]
        v[names.stiffness] = v[names.stiffness] + g.log_stiffness * p.values["stiffness_scatter"]
        v["density_error"] = v["density_error"] + g.log_density / (1.0 + p.values["density_error"])

    def push(self, p: Prediction, pushed: Values) -> Tangent:
        """Tangent along every coordinate, at a single lane; `pushed` from `Layout.push`."""
        names, v = self.names, p.values
        log_area = np.broadcast_to(pushed["lot"] + pushed[names.section], (self.log_outline.size, pushed["lot"].size))
        if self.phi is not None:
            log_area = log_area + self.phi @ pushed[names.field]
        along = Directions(
            np.stack([pushed[q.name] for q in self.law.parameters]),
            np.asarray(log_area),
            pushed["stiffness_scatter"] * v[names.stiffness] + pushed[names.stiffness] * v["stiffness_scatter"],
            pushed["density_error"] / (1.0 + v["density_error"]),
            pushed[names.drive],
        )
        return Tangent(tangent_linear(p.state, along), along.log_area, pushed)

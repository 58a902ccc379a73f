"""Balance of the bar: residual and tangent of all load steps and lanes at once.

Unknown: the position x_i of each node. Element e, between nodes e and e+1, has the stretch
(x_{e+1} − x_e)/h_e and carries the force N_e = stiffness A_e P(stretch_e). Balance of node i:

    R_i = N_{i−1} − N_i − f_i,        dR/dx tridiagonal with k_e = stiffness A_e P'(stretch_e)/h_e:

    node 0   | k0   −k0                |
    node 1   | −k0  k0+k1  −k1         |
    node 2   |      −k1    k1+k2  −k2  |
    ...

Arrays are (nodes or elements, steps, lanes); what does not change with the step has 1 in the middle.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.forward.laws.base import Law
from pullback.forward.loads import Load

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Bar:
    """The bars of all lanes: one geometry of nodes, each lane its own sections, law parameters and stiffness.

    `nodes` (n+1,) mm; `area` (n, 1, lanes) mm²; `theta` (k, 1, lanes); `stiffness` (1, lanes), a factor on the
    stress; `density` (lanes,) g/mm³. In a solved state the middle axis has as many entries as there are steps.
    """

    nodes: Array
    area: Array
    law: Law
    theta: Array
    stiffness: Array
    density: Array
    loads: Sequence[Load] = ()

    @property
    def h(self) -> Array:
        """Element lengths (n, 1, 1), mm."""
        return np.diff(self.nodes)[:, None, None]

    @property
    def lanes(self) -> int:
        """Number of lanes."""
        return self.area.shape[-1]

    def nodal_load(self) -> Array:
        """Sum of all loads (n+1, 1, lanes), N."""
        total = np.zeros((self.nodes.size, 1, self.lanes))
        for load in self.loads:
            total += load.nodal(self.h, self.area[:, :1], self.density)
        return total

    def spread(self, steps: int) -> Bar:
        """The same with every array laid out over the steps, so that steps and lanes run as one fast axis."""
        area, theta = (np.repeat(x[:, :1], steps, axis=1) for x in (self.area, self.theta))
        stiffness = np.repeat(self.stiffness[:1], steps, axis=0)
        return Bar(self.nodes, area, self.law, theta, stiffness, self.density, self.loads)

    def take(self, lane: NDArray[np.intp]) -> Bar:
        """The bars of some lanes only."""
        return Bar(
            self.nodes, self.area[..., lane], self.law, self.theta[..., lane], self.stiffness[..., lane],
            self.density[..., lane], self.loads,
        )  # fmt: skip


@dataclass(frozen=True)
class ElementState:
    """Stretch, nominal stress P times stiffness, its slope, and force of each element; (n, steps, lanes)."""

    stretch: Array
    stress: Array
    slope: Array
    force: Array


def elements(bar: Bar, position: Array) -> ElementState:
    """State of the elements for nodal positions (n+1, steps, lanes)."""
    stretch = np.diff(position, axis=0)
    stretch *= 1.0 / bar.h
    stress, slope = bar.law.stress_and_slope(stretch, bar.theta)
    stress, slope = stress * bar.stiffness, slope * bar.stiffness
    return ElementState(stretch, stress, slope, bar.area * stress)


def residual(force: Array, nodal: Array) -> Array:
    """R of every node (n+1, steps, lanes): at node 0 minus the held grip's pull, at node n the pulled end's force."""
    r = np.empty((force.shape[0] + 1, *force.shape[1:]))
    np.negative(force[0], out=r[0])
    np.subtract(force[:-1], force[1:], out=r[1:-1])
    r[-1] = force[-1]
    r -= nodal
    return r


def tangent(k: Array, by_travel: bool) -> tuple[Array, Array]:
    """Diagonal and off-diagonal of dR/dx on the free nodes; k (n, steps, lanes): the elements' stiffnesses, N/mm."""
    diagonal = k.copy()
    diagonal[:-1] += k[1:]
    m = k.shape[0] - 1 if by_travel else k.shape[0]
    return diagonal[:m], -k[1:m]

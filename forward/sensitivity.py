"""Derivatives at a converged state: adjoint (one solve for a scalar) and tangent-linear (one solve a parameter).

Both need only the residual's derivatives. For a scalar phi(x, end force, held force) the multipliers a of all nodes
obey  sum_j K_ji a_j = dphi/dx_i  on the free nodes, with a known on the held ones: the grip's pull is −R_0 and the end
force under travel is R_n, so a_0 = dphi/d(held force) and a_n = −dphi/d(end force). Then dphi/dp = −a · dR/dp.
(Implicit function theorem; e.g. Giles & Pierce, Flow Turbul. Combust. 65 (2000) 393, sec. 2.)
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.forward.balance import tangent
from pullback.forward.solve import Equilibrium, free_nodes, stiffnesses
from pullback.forward.tridiagonal import Tridiagonal

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Gradient:
    """Derivatives of one scalar per lane: `theta` (k, lanes), `log_area` (n, lanes), `log_stiffness` and `log_density`
    (lanes,), `drive` (steps, lanes)."""

    theta: Array
    log_area: Array
    log_stiffness: Array
    log_density: Array
    drive: Array


def _factors(state: Equilibrium) -> Tridiagonal:
    return Tridiagonal(*tangent(stiffnesses(state.bar, state.element.slope), state.by_travel))


def adjoint(state: Equilibrium, position: Array, end_force: Array, held_force: Array) -> Gradient:
    """Gradient of scalars whose derivatives are `position` (n+1, steps, lanes) and the two forces (steps, lanes)."""
    bar, e = state.bar, state.element
    k_first = bar.area[0] * e.slope[0] / bar.h[0]
    k_last = bar.area[-1] * e.slope[-1] / bar.h[-1]
    free = free_nodes(bar, state.by_travel)
    right = position[free].copy()
    right[0] += k_first * held_force
    a = np.empty_like(position)
    a[0] = held_force
    if state.by_travel:
        a[-1] = -end_force
        right[-1] += k_last * a[-1]
    a[free] = _factors(state).solve(np.nan_to_num(right))
    drive = position[-1] + k_last * (a[-2] - a[-1]) if state.by_travel else end_force + a[-1]
    return _contract(state, a, drive)


def _contract(state: Equilibrium, a: Array, drive: Array) -> Gradient:
    """−a · dR/dp for every parameter."""
    bar, e = state.bar, state.element
    rise = np.diff(a, axis=0)
    log_area = -(rise * e.force).sum(axis=1)
    log_stiffness = log_area.sum(axis=0)
    log_density = np.zeros(bar.lanes)
    for load in bar.loads:
        pulled = (load.area_pull_back(a, bar.h, bar.density) * bar.area).sum(axis=1)
        log_area = log_area + pulled
        log_density = log_density + pulled.sum(axis=0)
    rise *= bar.area * bar.stiffness
    by_theta = bar.law.stress_by_parameter(e.stretch, bar.theta)
    theta = -np.einsum("nsw,knsw->kw", rise, by_theta)
    return Gradient(theta, log_area, log_stiffness, log_density, drive)


@dataclass(frozen=True)
class Directions:
    """Directions in parameter space for one lane, p of them: `theta` (k, p), `log_area` (n, p), `log_stiffness` and
    `log_density` (p,), `drive` (steps, p)."""

    theta: Array
    log_area: Array
    log_stiffness: Array
    log_density: Array
    drive: Array


@dataclass(frozen=True)
class Change:
    """Change of a state per unit of each direction: `position` (n+1, steps, p) mm, both forces (steps, p) N."""

    position: Array
    end_force: Array
    held_force: Array


def tangent_linear(state: Equilibrium, along: Directions) -> Change:
    """Directional derivatives of the state of a single lane. Raises ValueError for more than one."""
    bar, e = state.bar, state.element
    if bar.lanes != 1:
        raise ValueError(f"tangent-linear derivatives are for one lane; got {bar.lanes}")
    force, steps, p = _explicit(state, along), state.end_force.shape[0], along.theta.shape[1]
    load = np.zeros((bar.nodes.size, 1, p))
    for one in bar.loads:
        scaled = bar.area[:, :1] * (along.log_area[:, None, :] + along.log_density)
        load += one.nodal_change(bar.h, scaled, np.broadcast_to(bar.density, (p,)))
    change = force[:-1] - force[1:] - load[1:-1]
    if not state.by_travel:
        change = np.concatenate((change, (force[-1] - load[-1] - along.drive)[None]))
    right = -change
    k_first = (bar.area[0] * e.slope[0] / bar.h[0])
    k_last = (bar.area[-1] * e.slope[-1] / bar.h[-1])
    if state.by_travel:
        right[-1] += k_last * along.drive
    x = np.zeros((bar.nodes.size, steps, p))
    free = free_nodes(bar, state.by_travel)
    x[free] = _factors(state).solve(right.reshape(*right.shape[:2], 1, p)).reshape(right.shape)
    if state.by_travel:
        x[-1] = along.drive
        end = force[-1] + k_last * (x[-1] - x[-2]) - load[-1]
    else:
        end = np.array(along.drive)
    held = force[0] + k_first * x[1] + load[0]
    return Change(x, end, held)


def _explicit(state: Equilibrium, along: Directions) -> Array:
    """Change of the element forces at fixed positions, (n, steps, p)."""
    bar, e = state.bar, state.element
    by_theta = bar.law.stress_by_parameter(e.stretch, bar.theta)[..., 0] * (bar.area * bar.stiffness)[..., 0]
    force = np.einsum("kns,kp->nsp", by_theta, along.theta)
    return force + e.force * (along.log_area[:, None, :] + along.log_stiffness)

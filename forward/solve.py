"""Newton's method for the bar; this module alone decides what has converged.

The tangent is kept positive definite by a floor on dP/dstretch, so that every step is a descent direction of the
potential energy; a step that does not lower the residual is halved. Lanes that still fail are drawn up from the
unstretched part in small load steps.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.forward.balance import Bar, ElementState, elements, residual, tangent
from pullback.forward.outcomes import Outcome
from pullback.forward.tridiagonal import Tridiagonal

Array = NDArray[np.float64]

TOLERANCE = 1e-10
"""Largest residual over largest element force at which a step has converged."""

_MAX_ITERATIONS = 30
_LOAD_STEPS = 24
_MIN_STRETCH = 0.05


@dataclass(frozen=True)
class Equilibrium:
    """Converged (or best) state of all steps and lanes.

    `position` (n+1, steps, lanes) mm; `element`: the elements' state; `end_force` (steps, lanes) N at the pulled end;
    `held_force` (steps, lanes) N at the held grip; `by_travel`: how the end was driven; `code` (steps, lanes): index
    into `list(Outcome)`.
    """

    bar: Bar
    position: Array
    element: ElementState
    end_force: Array
    held_force: Array
    by_travel: bool
    code: NDArray[np.int8]
    iterations: int

    @property
    def converged(self) -> NDArray[np.bool_]:
        """Lanes whose every step converged."""
        return np.all(self.code == 0, axis=0)


def equilibrium(
    bar: Bar, drive: Array, by_travel: bool, guess: Array | None = None, tolerance: float = TOLERANCE
) -> Equilibrium:
    """Equilibrium under `drive` (steps, lanes), the travel (mm) or end force (N) of each step.

    `guess` (n+1, steps, lanes) are starting positions; without it the linear-elastic shape is taken.
    """
    bar, nodal = bar.spread(drive.shape[0]), bar.nodal_load()
    start = _linear_shape(bar, drive, by_travel) if guess is None else guess
    position, element, iterations = _newton(bar, nodal, drive, by_travel, start, tolerance)
    code = _codes(bar, nodal, drive, by_travel, position, element, tolerance)
    bad = np.flatnonzero(np.any((code != 0) & (code != 3), axis=0))
    if bad.size:
        retry = _stepped if guess is None else _afresh
        position, element = retry(bar, nodal, drive, by_travel, position, bad, tolerance)
        code = _codes(bar, nodal, drive, by_travel, position, element, tolerance)
    # The grip's pull and the pulled end's force are the residual of the held nodes.
    end = element.force[-1] - nodal[-1]
    held = element.force[0] + nodal[0]
    return Equilibrium(bar, position, element, end, held, by_travel, code, iterations)


def free_nodes(bar: Bar, by_travel: bool) -> slice:
    """Nodes whose position is unknown."""
    return slice(1, bar.nodes.size - 1 if by_travel else bar.nodes.size)


def _linear_shape(bar: Bar, drive: Array, by_travel: bool) -> Array:
    """Positions with elongation as 1/A, scaled to the travel, or to the force at the modulus of rest."""
    ones = np.ones((1, *drive.shape))
    e = bar.law.stress_and_slope(ones, bar.theta)[1] * bar.stiffness
    unit = bar.h / (e * bar.area)
    most = 2.0 * e[0] * bar.area.min(axis=0)
    scale = drive / unit.sum(axis=0) if by_travel else np.minimum(drive, most)
    growth = np.zeros((bar.nodes.size, *drive.shape))
    np.cumsum(unit * scale[None], axis=0, out=growth[1:])
    return bar.nodes[:, None, None] + growth


def _free_residual(bar: Bar, nodal: Array, drive: Array, by_travel: bool, force: Array) -> Array:
    r = residual(force, nodal)
    if not by_travel:
        r[-1] -= drive
    return r[free_nodes(bar, by_travel)]


def _rounding(bar: Bar, position: Array, element: ElementState) -> Array:
    """Residual (steps, lanes) that the rounding of nodal positions alone can leave in a short, stiff element."""
    with np.errstate(invalid="ignore"):
        stiffest = (bar.area * element.slope / bar.h).max(axis=0)
    return 16.0 * np.finfo(float).eps * np.abs(position[-1]) * np.abs(stiffest)


def stiffnesses(bar: Bar, slope: Array) -> Array:
    """A dP/dstretch / h of each element (N/mm), the slope with a floor, so that the tangent stays positive definite.

    A step and lane that has left the range of the law or of the numbers gets ones: one bad lane must not stop all.
    """
    k = np.maximum(slope, 1e-3 * slope.max(axis=0))
    k *= bar.area / bar.h
    top = k.max(axis=0)
    good = (top > 1e-12) & (top < 1e12)
    return k if np.all(good) else np.where(good, k, 1.0)


def _largest(values: Array) -> Array:
    return np.maximum(values.max(axis=0), -values.min(axis=0))


def _newton(
    bar: Bar, nodal: Array, drive: Array, by_travel: bool, start: Array, tolerance: float
) -> tuple[Array, ElementState, int]:
    x = np.array(start)
    x[0] = bar.nodes[0]
    if by_travel:
        x[-1] = bar.nodes[-1] + drive
    state = elements(bar, x)
    r = _free_residual(bar, nodal, drive, by_travel, state.force)
    error, rounding = _largest(r), _rounding(bar, x, state)
    count = 0
    while count < _MAX_ITERATIONS and np.any(error > np.maximum(tolerance * _largest(state.force), rounding)):
        count += 1
        r = np.where(np.isfinite(error), r, 0.0)
        step = Tridiagonal(*tangent(stiffnesses(bar, state.slope), by_travel)).solve(-r)
        x, state, r, error = _advance(bar, nodal, drive, by_travel, x, state, step, np.maximum(error, rounding))
        if not np.any(np.isfinite(error)):
            break
    return x, state, count


def _advance(
    bar: Bar, nodal: Array, drive: Array, by_travel: bool, x: Array, state: ElementState, step: Array, error: Array
) -> tuple[Array, ElementState, Array, Array]:
    """Take the Newton step, halved lane by lane until the residual falls and no element is crushed."""
    free = free_nodes(bar, by_travel)
    full = np.zeros_like(x)
    full[free] = step
    change = np.diff(full, axis=0) / bar.h
    room = np.where(change < 0.0, (state.stretch - _MIN_STRETCH) * 0.8, np.inf) / np.maximum(-change, 1e-300)
    size = np.minimum(1.0, room.min(axis=0))
    for _ in range(12):
        trial = x + size * full
        new = elements(bar, trial)
        r = _free_residual(bar, nodal, drive, by_travel, new.force)
        new_error = _largest(r)
        worse = ~(new_error <= error)
        if not np.any(worse):
            break
        size = np.where(worse, 0.5 * size, size)
    return trial, new, r, new_error


def _codes(
    bar: Bar, nodal: Array, drive: Array, by_travel: bool, position: Array, element: ElementState, tolerance: float
) -> NDArray[np.int8]:
    names = list(Outcome)
    r = _largest(_free_residual(bar, nodal, drive, by_travel, element.force))
    scale = _largest(element.force)
    code = np.zeros(r.shape, np.int8)
    allowed = np.maximum(tolerance * scale, 4.0 * _rounding(bar, position, element))
    code[r > allowed] = names.index(Outcome.NOT_CONVERGED)
    code[(code == 0) & np.any(element.slope <= 0.0, axis=0)] = names.index(Outcome.UNSTABLE)
    code[~np.isfinite(r)] = names.index(Outcome.NOT_FINITE)
    return code


def _afresh(
    bar: Bar, nodal: Array, drive: Array, by_travel: bool, position: Array, bad: NDArray[np.intp], tolerance: float
) -> tuple[Array, ElementState]:
    """Solve the failed lanes once more, from the linear-elastic shape instead of the guess."""
    sub, target = bar.take(bad), drive[:, bad]
    start = _linear_shape(sub, target, by_travel)
    out = np.array(position)
    out[:, :, bad] = _newton(sub, nodal[..., bad], target, by_travel, start, tolerance)[0]
    return out, elements(bar, out)


def _stepped(
    bar: Bar, nodal: Array, drive: Array, by_travel: bool, position: Array, bad: NDArray[np.intp], tolerance: float
) -> tuple[Array, ElementState]:
    """Draw the failed lanes up from rest: steps in rising order of drive, each from the shape before it."""
    sub = bar.take(bad)
    load, target = nodal[..., bad], drive[:, bad]
    out = np.array(position)
    x = np.broadcast_to(bar.nodes[:, None, None], (bar.nodes.size, *target.shape)).copy()
    previous = x.copy()
    for k in range(1, _LOAD_STEPS + 1):
        share = k / _LOAD_STEPS
        ahead = 2.0 * x - previous if k > 1 else x
        previous, x = x, _newton(sub, share * load, share * target, by_travel, ahead, tolerance)[0]
    out[:, :, bad] = x
    return out, elements(bar, out)

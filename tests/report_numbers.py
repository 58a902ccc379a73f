"""Invented numbers for a synthetic results folder: test data only, no measurement and no run of the program.

A strap 120 mm long with a waist, Yeoh's law, eight steps of travel; weight neglected, so that the force is the same all
along. 'Draws' are random numbers around chosen values, not a posterior.
"""

from __future__ import annotations

import zlib
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

CHAINS, DRAWS, THINNED = 8, 250, 200
LENGTH = 120.0
STEPS = tuple(str(k) for k in range(1, 9))
TRAVEL = np.array([20.0, 45.0, 75.0, 110.0, 150.0, 195.0, 240.0, 280.0])
LAW_UNITS = {"c10": "MPa", "c20": "MPa", "c30": "MPa"}
CENTRE = {"c10": (0.302, 0.008), "c20": (-4.1e-3, 6.0e-4), "c30": (2.05e-4, 1.6e-5)}
PRIOR = {"c10": (0.31, 0.12), "c20": (0.0, 0.012), "c30": (2.5e-4, 2.2e-4)}
_GRID = np.linspace(1.0, 8.0, 600)


def outline(station: Array) -> Array:
    """Nominal section, mm²: 20 mm x 2.1 mm with a waist of 16 mm at the middle."""
    return 2.1 * (20.0 - 4.0 * np.exp(-(((station - 60.0) / 26.0) ** 2)))


def stress(stretch: Array, c10: float, c20: float, c30: float) -> Array:
    """Nominal stress of Yeoh's law, MPa."""
    i = stretch**2 + 2.0 / stretch - 3.0
    return 2.0 * (stretch - stretch**-2) * (c10 + 2.0 * c20 * i + 3.0 * c30 * i * i)


def bands(samples: Array) -> dict[str, Array]:
    """Median and 95 % interval over the first axis."""
    lower, median, upper = np.quantile(samples, [0.025, 0.5, 0.975], axis=0)
    return {"median": median, "lower": lower, "upper": upper}


@dataclass
class Numbers:
    """All invented draws, made from one seed."""

    seed: int = 11

    def stream(self, name: str) -> np.random.Generator:
        """Random numbers of one quantity, the same in whatever order quantities are asked for."""
        return np.random.default_rng([self.seed, zlib.crc32(name.encode())])

    @cached_property
    def law(self) -> dict[str, Array]:
        """(chain, draw) per law parameter, correlated as curve fits are."""
        corr = np.array([[1.0, -0.75, 0.55], [-0.75, 1.0, -0.9], [0.55, -0.9, 1.0]])
        z = self.stream("law").multivariate_normal(np.zeros(3), corr, size=(CHAINS, DRAWS))
        return {name: m + s * z[..., k] for k, (name, (m, s)) in enumerate(CENTRE.items())}

    @cached_property
    def other(self) -> dict[str, Array]:
        """(chain, draw) of the unknowns beside the law."""
        stream = self.stream("other")
        normal, lognormal = stream.normal, stream.lognormal
        shape = (CHAINS, DRAWS)
        return {
            "lot": normal(0.006, 0.011, shape),
            "spread": lognormal(np.log(0.031), 0.25, shape),
            "correlation_length": lognormal(np.log(17.0), 0.3, shape),
            "force_scale": normal(1.001, 0.0046, shape),
            "strength_scale": normal(4.62, 0.13, shape),
            "strength_modulus": lognormal(np.log(13.0), 0.24, shape),
        }

    @cached_property
    def station(self) -> Array:
        return np.linspace(0.0, LENGTH, 61)

    @cached_property
    def area(self) -> Array:
        """(thinned draws, stations) of the section, mm²."""
        waves = np.sin(np.outer(np.arange(1, 5), self.station) * np.pi / LENGTH)
        true = np.array([0.024, -0.02, 0.012, 0.008]) @ waves
        stream = self.stream("area")
        wobble = stream.normal(0.0, 0.004, (THINNED, 4)) @ waves + stream.normal(0, 0.006, (THINNED, 1))
        return outline(self.station) * np.exp(true + wobble)

    def thinned(self, name: str) -> Array:
        return self.law[name].reshape(-1)[:: CHAINS * DRAWS // THINNED]

    @cached_property
    def curves(self) -> Array:
        """(thinned draws, stretch grid) nominal stress, MPa."""
        return np.stack([stress(_GRID, *(self.thinned(n)[d] for n in CENTRE)) for d in range(THINNED)])

    @cached_property
    def stretch(self) -> Array:
        """(thinned draws, steps, stations) stretch, and with it `force` (thinned draws, steps) in N."""
        return self._equilibrium[0]

    @cached_property
    def force(self) -> Array:
        return self._equilibrium[1]

    @cached_property
    def _equilibrium(self) -> tuple[Array, Array]:
        trial = np.linspace(0.0, 320.0, 160)
        stretch, force = np.empty((THINNED, len(STEPS), self.station.size)), np.empty((THINNED, len(STEPS)))
        for d in range(THINNED):
            profile = np.interp(trial[:, None] / self.area[d], self.curves[d], _GRID)
            travel = np.trapezoid(profile - 1.0, self.station, axis=1)
            force[d] = np.interp(TRAVEL, travel, trial)
            stretch[d] = np.interp(force[d][:, None] / self.area[d], self.curves[d], _GRID)
        return stretch, force

    @cached_property
    def position(self) -> Array:
        """(thinned draws, steps, stations) position, mm."""
        gap = np.diff(self.station)
        means = 0.5 * (self.stretch[..., 1:] + self.stretch[..., :-1])
        return np.concatenate([np.zeros((*means.shape[:2], 1)), np.cumsum(means * gap, axis=-1)], axis=-1)

    @cached_property
    def capacity(self) -> Array:
        """(thinned draws, 400 parts) of the next part's load at failure, N."""
        shape, stream = (THINNED, 400), self.stream("capacity")
        scale = self.other["strength_scale"].reshape(-1)[:THINNED, None]
        modulus = self.other["strength_modulus"].reshape(-1)[:THINNED, None]
        elongation = 0.93 * scale * (-np.log(stream.random(shape))) ** (1.0 / modulus)
        section = outline(np.array([60.0])) * np.exp(stream.normal(0.0, 0.03, shape))
        loads = [np.interp(1.0 + elongation[d], _GRID, self.curves[d]) for d in range(THINNED)]
        return np.stack(loads) * section

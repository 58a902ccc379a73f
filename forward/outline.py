"""The nominal section along the part, from stations linear in width and thickness, in diameter, or in area."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Outline:
    """Section = factor times the product of `edges`, each (stations, ) mm or mm² and linear between `station` (mm).

    Width and thickness are two edges; a diameter counts twice, with the factor pi/4; an area is one edge.
    """

    station: Array
    edges: tuple[Array, ...]
    factor: float = 1.0

    def area(self, at: Array) -> Array:
        """Section (mm²) at each station (mm)."""
        out = np.full(np.shape(at), self.factor)
        for edge in self.edges:
            out = out * np.interp(at, self.station, edge)
        return out

    def log_slope(self, at: Array) -> Array:
        """d log area / dX (1/mm) at each station; at a corner, that of the segment behind it."""
        k = np.clip(np.searchsorted(self.station, at, side="right") - 1, 0, self.station.size - 2)
        step = self.station[k + 1] - self.station[k]
        out = np.zeros(np.shape(at))
        for edge in self.edges:
            out = out + (edge[k + 1] - edge[k]) / step / np.interp(at, self.station, edge)
        return out

    def mesh(self, length: float, elements: int) -> Array:
        """Nodes (mm) from 0 to `length` at every corner of the outline, about `elements` elements of even size."""
        inside = self.station[(self.station > 0.0) & (self.station < length)]
        corners = np.concatenate(([0.0], inside, [length]))
        counts = np.maximum(1, np.round(np.diff(corners) * elements / length)).astype(int)
        runs = [np.linspace(a, b, n, endpoint=False) for a, b, n in zip(corners[:-1], corners[1:], counts, strict=True)]
        return np.concatenate((*runs, [length]))

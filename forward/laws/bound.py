"""A law together with values of its parameters."""

from __future__ import annotations

from dataclasses import dataclass
from difflib import get_close_matches

import numpy as np

from pullback.forward.laws.base import Array, Law
from pullback.forward.laws.registry import registry


@dataclass(frozen=True)
class BoundLaw:
    """A law with its parameter values, `theta` in the order of `law.parameters`."""

    law: Law
    theta: Array

    def __repr__(self) -> str:
        pairs = zip(self.law.parameters, self.theta, strict=True)
        values = ", ".join(f"{p.name}={v:g}{' ' + p.unit if p.unit else ''}" for p, v in pairs)
        return f"{self.law.name}({values})"

    def stress(self, stretch: Array) -> Array:
        """Nominal stress (MPa) at each stretch."""
        return self.law.stress(np.asarray(stretch, float), self.theta)

    def energy(self, stretch: Array) -> Array:
        """Strain energy per unstretched volume (MPa) at each stretch."""
        return self.law.energy(np.asarray(stretch, float), self.theta)


def law(name: str, **values: float) -> BoundLaw:
    """The law `name` with its parameters by keyword, moduli in MPa.

    Raises ValueError for a name that is not registered (naming the nearest), and for parameters missing, unknown or
    not finite.
    """
    if name not in registry:
        near = get_close_matches(name, registry, 1)
        hint = f"; did you mean {near[0]!r}?" if near else ""
        raise ValueError(f"no law named {name!r}{hint} Known: {', '.join(registry)}")
    kind = registry[name]
    wanted = [p.name for p in kind.parameters]
    if set(values) != set(wanted):
        raise ValueError(f"{name} takes {', '.join(wanted)}; got {', '.join(values) or 'none'}")
    theta = np.array([values[p] for p in wanted], float)
    if not np.all(np.isfinite(theta)):
        raise ValueError(f"{name}: every parameter must be finite, got {values}")
    return BoundLaw(kind, theta)

"""Parameters for tests that hold for every registered law."""

from __future__ import annotations

import numpy as np

from pullback.forward import BoundLaw, law
from pullback.forward.laws.registry import registry

NAMES = sorted(registry)


def typical(name: str, moduli: float = 1.0) -> BoundLaw:
    """The law at the middle of its declared default priors, its moduli times a factor."""
    kind = registry[name]
    return law(name, **{p.name: p.default[1] * (moduli if p.unit == "MPa" else 1.0) for p in kind.parameters})


def is_modulus(name: str) -> np.ndarray:
    """Which parameters are moduli, (k,)."""
    return np.array([p.unit == "MPa" for p in registry[name].parameters])

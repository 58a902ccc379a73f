"""Priors of the laws' parameters in invented studies: what study.toml states is what the truth is drawn from."""

from __future__ import annotations

import numpy as np

from generators.laws import Theta

Prior = tuple[str, float, float]
"""("lognormal", median, geometric standard deviation), sign by the median; or ("normal", mean, standard deviation)."""

_OGDEN: dict[str, Prior] = {
    "alpha1": ("lognormal", 1.7, 1.15),
    "mu2": ("lognormal", 1e-3, 1.8),
    "alpha2": ("lognormal", 5.0, 1.1),
    "mu3": ("lognormal", -1e-2, 1.8),
    "alpha3": ("lognormal", -2.0, 1.2),
}

LAWS: dict[str, dict[str, Prior]] = {
    "neo-hookean": {"mu": ("lognormal", 0.6, 1.5)},
    "yeoh": {
        "c10": ("lognormal", 0.3, 1.5),
        "c20": ("normal", -0.002, 0.002),
        "c30": ("lognormal", 1.2e-4, 1.8),
    },
    "ogden-1": {"mu1": ("lognormal", 0.5, 1.5), "alpha1": ("lognormal", 2.2, 1.2)},
    "ogden-2": {"mu1": ("lognormal", 0.55, 1.4)} | dict(list(_OGDEN.items())[:3]),
    "ogden-3": {"mu1": ("lognormal", 0.55, 1.4)} | _OGDEN,
}


def draw(law: str, rng: np.random.Generator) -> Theta:
    """A law's parameters from their priors, to five digits."""
    return {name: float(f"{_value(prior, rng.standard_normal()):.5g}") for name, prior in LAWS[law].items()}


def _value(prior: Prior, z: float) -> float:
    family, middle, width = prior
    return middle + width * z if family == "normal" else middle * width**z


def toml(law: str) -> str:
    """The priors as keys of the section `law` of study.toml."""
    return "\n".join(f"prior.{law}.{name} = {_one(name, *prior)}" for name, prior in LAWS[law].items())


def _one(name: str, family: str, middle: float, width: float) -> str:
    unit = "" if name.startswith("alpha") else " MPa"
    first = f'"{middle:g}{unit}"' if unit else f"{middle:g}"
    second = f'"{width:g}{unit}"' if unit and family == "normal" else f"{width:g}"
    return f"{{ {family} = [{first}, {second}] }}"

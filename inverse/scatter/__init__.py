"""Strength scatter, one family a file."""

from pullback.inverse.scatter.base import Scatter
from pullback.inverse.scatter.lognormal import LogNormalStrength
from pullback.inverse.scatter.weibull import Weibull


def scatter(name: str, reference_volume: float) -> Scatter:
    """The family `name`; KeyError for one that is not known."""
    families: dict[str, Scatter] = {f.name: f for f in (Weibull(reference_volume), LogNormalStrength(reference_volume))}
    return families[name]


__all__ = ["LogNormalStrength", "Scatter", "Weibull", "scatter"]

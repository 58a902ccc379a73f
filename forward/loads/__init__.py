"""Axial loads, one a file."""

from pullback.forward.loads.base import Load
from pullback.forward.loads.weight import FORCE_UNIT, STANDARD_GRAVITY, Weight

__all__ = ["FORCE_UNIT", "STANDARD_GRAVITY", "Load", "Weight"]

"""Failure criteria, one a file; a new one is one line here."""

from pullback.forward.criteria import elongation, nominal_stress
from pullback.forward.criteria.base import Criterion

criteria: dict[str, Criterion] = {c.name: c for c in (elongation.CRITERION, nominal_stress.CRITERION)}

__all__ = ["Criterion", "criteria"]

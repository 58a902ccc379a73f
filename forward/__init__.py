"""The bar in tension: laws, loads, equilibrium and its derivatives. Units N, mm, MPa, g, s."""

from pullback.forward.ends import Force, Travel
from pullback.forward.laws import BoundLaw, law
from pullback.forward.loads import Weight
from pullback.forward.outcomes import Outcome
from pullback.forward.part import Part
from pullback.forward.state import State, solve

__all__ = ["BoundLaw", "Force", "Outcome", "Part", "State", "Travel", "Weight", "law", "solve"]

"""The registered laws, one file each; a new law is one line here."""

from pullback.forward.laws import neo_hookean, yeoh
from pullback.forward.laws.base import Law, Parameter
from pullback.forward.laws.bound import BoundLaw, law
from pullback.forward.laws.ogden import Ogden
from pullback.forward.laws.registry import register, registry

for _law in (neo_hookean.LAW, yeoh.LAW, Ogden(1), Ogden(2), Ogden(3)):
    register(_law)

__all__ = ["BoundLaw", "Law", "Parameter", "law", "register", "registry"]

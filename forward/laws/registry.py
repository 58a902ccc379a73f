"""Laws by name."""

from __future__ import annotations

from pullback.forward.laws.base import Law

registry: dict[str, Law] = {}


def register(law: Law) -> None:
    """Make a law known under its name; a name taken already raises ValueError."""
    if law.name in registry:
        raise ValueError(f"a law named {law.name!r} is registered already")
    registry[law.name] = law

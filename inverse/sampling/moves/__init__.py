"""Moves of the sampler, one a file."""

from pullback.inverse.sampling.moves.hamiltonian import Hamiltonian

__all__ = ["Hamiltonian"]

"""Posterior predictive checks: chi-square of each kind of reading against readings simulated at the same draws.

Gelman, Meng & Stern, Stat. Sinica 6 (1996) 733.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.posterior import Posterior

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Check:
    """One kind of reading: how many, chi-square a reading (mean over draws), and the predictive p."""

    kind: str
    piece: str | None
    readings: int
    chi2_per_reading: float
    p: float


def checks(posterior: Posterior, q: Array, seed: int) -> list[Check]:
    """Checks of all kinds of reading over draws q (n, dim)."""
    rng = np.random.Generator(np.random.Philox(key=[seed, 4]))
    values, predictions = posterior.predict(q)
    out = []
    for term in posterior.terms:
        if term.count == 0:
            continue
        prediction = predictions[term.piece] if term.piece else None
        seen = term.chi_square(values, prediction)
        drawn = term.simulate_chi_square(values, prediction, rng)
        chi2, p = float(np.mean(seen)) / term.count, float(np.mean(drawn >= seen))
        out.append(Check(term.kind, term.piece, term.count, chi2, p))
    return out

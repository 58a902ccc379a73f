"""From hardness to the small-strain shear modulus.

Shore A: E = 0.0981 (56 + 7.62336 S) / (0.137505 (254 − 2.54 S)) MPa, Gent, Trans. Inst. Rubber Ind. 34 (1958) 46.
IRHD: S = 100 Phi((log10 E − 0.364)/0.7), ISO 48 / ASTM D1415 (the formula from memory of the standards).
The two differ by up to 1.3 and other correlations by 1.6–1.9 at 60–80 Shore A, so that a geometric standard deviation
of 1.3 is taken.
"""

from __future__ import annotations

from scipy import special

from pullback.inverse.priors import LogNormal

RELATION_GSD = 1.3
"""Geometric standard deviation of the modulus about either relation."""


def young_modulus(hardness: float, scale: str) -> float:
    """Small-strain Young's modulus, MPa. `scale`: "Shore A" or "IRHD"."""
    if scale == "IRHD":
        return float(10.0 ** (0.364 + 0.7 * special.ndtri(hardness / 100.0)))
    return 0.0981 * (56.0 + 7.62336 * hardness) / (0.137505 * (254.0 - 2.54 * hardness))


def modulus_prior(hardness: float | None, scale: str | None) -> LogNormal | None:
    """Prior of the initial shear modulus (a third of Young's), or None without a hardness."""
    if hardness is None or scale is None:
        return None
    return LogNormal(young_modulus(hardness, scale) / 3.0, RELATION_GSD)

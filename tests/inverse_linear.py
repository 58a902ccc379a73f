"""A linear problem whose evidence can be had exactly: sections of known error along a part, and nothing else.

    log section = log outline + offset + Phi beta + error,   offset and beta normal.
"""

from __future__ import annotations

import numpy as np

from pullback.forward.laws import registry
from pullback.inverse.area_field import Basis
from pullback.inverse.layout import Field, Layout, Scalar
from pullback.inverse.piece import Piece
from pullback.inverse.posterior import Posterior
from pullback.inverse.priors import HalfNormal, LogNormal, Normal
from pullback.inverse.readings.sections import Sections

LENGTH, ERROR, OFFSET = 120.0, 0.01, 0.02
SPREAD, ELL = HalfNormal(0.05), LogNormal(15.0, 1.5)
STATION = np.linspace(4.0, 116.0, 29)


def problem() -> tuple[Posterior, np.ndarray, Basis]:
    """Posterior, readings of log section less the outline's, and basis; truth: spread 4 %, ell 18 mm."""
    basis = Basis.spanning(LENGTH, 6.0, 38.0)
    rng = np.random.default_rng(20)
    cov = 0.04**2 * np.exp(-0.5 * ((STATION[:, None] - STATION) / 18.0) ** 2)
    off = rng.multivariate_normal(np.zeros(29), cov) + 0.015 + ERROR * rng.standard_normal(29)
    x = np.linspace(0.0, LENGTH, 3)
    piece = Piece("P1", x, np.full(2, np.log(30.0)), basis, None, registry["neo-hookean"], (), 0.0, True, ("1",))
    outline = np.full(29, np.log(30.0))
    term = Sections(piece, STATION, np.exp(outline + off), np.full(29, ERROR), 0.0, outline, np.zeros(29))
    term.piece = None  # needs no equilibrium
    blocks = [
        Scalar("lot", "", Normal(0.0, OFFSET)),
        Scalar("spread", "", SPREAD),
        Scalar("correlation_length", "mm", ELL),
        Field("P1 field", "", basis),
    ]
    constants = {"mu": 0.6, "P1 section": 0.0, "grip_position": 0.0}
    return Posterior(Layout(blocks, constants), registry["neo-hookean"], [], [term]), off, basis

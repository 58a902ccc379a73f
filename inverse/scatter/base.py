"""The contract of strength scatter: how the strength of coupons and of parts is distributed.

The hazard H of a loaded body is minus the log of its chance to hold. Parameters are (lanes,); measures (sections, ...,
lanes); volumes broadcast against them, mm³.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.priors import Prior

Array = NDArray[np.float64]


class Scatter(Protocol):
    """A family of strength distributions."""

    @property
    def name(self) -> str:
        """Name of the family."""

    @property
    def parameter_names(self) -> tuple[str, str]:
        """Names of its two unknowns."""

    @property
    def reference_volume(self) -> float:
        """Volume that the first parameter refers to, mm³."""

    def default_priors(self, measure: Array, broke: NDArray[np.bool_]) -> tuple[Prior, Prior]:
        """The right-Haar prior: flat in log location and in log scale, with starting values from the coupons."""

    def coupon_log_density(
        self, measure: Array, volume: Array, broke: NDArray[np.bool_], parameters: Sequence[Array]
    ) -> tuple[Array, tuple[Array, Array]]:
        """Log-density of coupons (N,) and its derivatives by both parameters, each (lanes,)."""

    def coupon_hazard(self, measure: Array, volume: Array, parameters: Sequence[Array]) -> Array:
        """H of each coupon (N, lanes)."""

    def hazard(
        self, measure: Array, volume: Array, parameters: Sequence[Array]
    ) -> tuple[Array, Array, Array, tuple[Array, Array]]:
        """H (..., lanes) of bodies of n sections, dH/dmeasure and dH/dlog volume (n, ..., lanes), dH/dparameters."""

    def log_hazard(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """log H (...) of bodies whose sections (n, ...) have the given log measure, −inf where not loaded; one draw."""

    def shares(self, log_measure: Array, volume: Array, first: float, second: float) -> Array:
        """Probability that each section (n, ...) is where the body fails, at these measures; one draw."""

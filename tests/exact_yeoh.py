"""The posterior of Yeoh's law on Treloar's simple tension with unknown noise, and its exact form.

The law is linear in its parameters, so that with a prior flat in them and in the logarithm of the noise sigma they are
jointly Student t about the least-squares values, with n − 3 degrees of freedom, and (n − 3) s²/sigma² is chi-square.
Box & Tiao, Bayesian Inference in Statistical Analysis (1973), sec. 2.7.
"""

from __future__ import annotations

import numpy as np

from pullback.datasets import load
from pullback.forward.laws import registry
from pullback.inverse.layout import Layout, Scalar
from pullback.inverse.posterior import Posterior
from pullback.inverse.priors import Flat, FlatLog
from pullback.inverse.readings.curve import Curve

NAMES = ("c10", "c20", "c30", "noise")
CENTRE = np.array([0.17553474744432596, -0.0018785063513755123, 4.632219031706473e-05])
SD = np.array([0.0124916248, 3.97397976e-4, 3.90891523e-6])
"""Posterior standard deviations."""
CORRELATION = {(0, 1): -0.899444690, (0, 2): 0.789999438, (1, 2): -0.975232531}
INTERVALS = np.array(
    [
        [0.150824973, 0.200244522],
        [-2.66460226e-3, -1.09241050e-3],
        [3.85899364e-5, 5.40544442e-5],
        [0.08629138, 0.16028562],
    ]
)
"""95 % intervals, of the noise (MPa) last. All from least squares and the Student t distribution, twelve digits."""
NOISE_MEDIAN = 0.113974174


def posterior(guess: float = 0.11, noise: str | None = "noise") -> Posterior:
    """Yeoh on the 24 points; `guess`: first guess of the noise, or its value where that is taken as known."""
    data, yeoh = load("treloar_uniaxial"), registry["yeoh"]
    starts = ((0.2, 0.02), (-0.001, 5e-4), (4e-5, 5e-6))
    blocks = [Scalar(n, "MPa", Flat(a, u)) for n, (a, u) in zip(NAMES[:3], starts, strict=True)]
    if noise:
        blocks.append(Scalar(noise, "MPa", FlatLog(guess, 0.2)))
    stretch, stress = data["stretch"], data["nominal stress"]
    term = Curve(yeoh, stretch, stress, np.full(stretch.size, guess), noise)
    return Posterior(Layout(blocks), yeoh, [], [term])

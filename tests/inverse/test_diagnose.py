"""Diagnostics against values worked out for fixed chains.

Rank-normalised split R-hat, bulk, tail and sd effective sizes after Vehtari, Gelman, Simpson, Carpenter & Bürkner,
Bayesian Anal. 16 (2021) 667, by code of its own and by ArviZ 0.23, which agree to ten digits.
"""

from __future__ import annotations

import numpy as np
import pytest

from pullback.datasets import load
from pullback.inverse.sampling.diagnose import diagnose

GOOD = (0.9990973442, 379.564488, 601.326728, 649.746798)
SHIFTED = (1.0335041393, 226.269887, 601.929501, 624.540091)
EXPONENTIAL = (0.9990973442, 379.564488, 601.326728, 557.123959)
"""R-hat, bulk, tail and sd effective sizes; of exp(2 x) for the good chains."""


def chains(name):
    data = load(name)
    return np.stack([data[f"c{k}"] for k in range(1, 5)])


def figures(draws):
    d = diagnose(draws[:, :, None], ["x"])
    return d.rhat[0], d.bulk[0], d.tail[0], d.sd[0]


@pytest.mark.parametrize("name, wanted", [("mcmc_ar1_good", GOOD), ("mcmc_ar1_shifted", SHIFTED)])
def test_fixed_chains(name, wanted):
    assert figures(chains(name)) == pytest.approx(wanted, rel=1e-6)


def test_monotone_transform_moves_nothing_that_is_ranked():
    plain, changed = figures(chains("mcmc_ar1_good")), figures(np.exp(2.0 * chains("mcmc_ar1_good")).round(6))
    assert changed == pytest.approx(EXPONENTIAL, rel=1e-6)
    assert changed[:3] == pytest.approx(plain[:3], rel=1e-9)


def test_worst_of_several():
    draws = np.stack([chains("mcmc_ar1_good"), chains("mcmc_ar1_shifted")], axis=2)
    d = diagnose(draws, ["good", "shifted"])
    assert d.worst() == "shifted" and d.least == pytest.approx(SHIFTED[1]) and d.rhat_max == pytest.approx(SHIFTED[0])
    assert d.draws == 250


def test_antithetic_draws_are_capped_at_their_number():
    """Draws that alternate about the mean have an effective size for it above their number."""
    rng = np.random.default_rng(1)
    x = rng.standard_normal((4, 125))
    paired = np.stack([x, -x], axis=2).reshape(4, 250)
    d = diagnose(paired[:, :, None], ["x"])
    assert d.bulk[0] == 1000.0


def test_what_does_not_move_has_no_effective_size():
    d = diagnose(np.ones((4, 100, 1)), ["x"])
    assert d.least == 0.0 and d.rhat_max == np.inf

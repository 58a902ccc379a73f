"""The nested fit on a small study of every gauge: it finds the truth, and says so where there is nothing to find."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from every_gauge import LAWS, model

from pullback.inverse.fit import fit
from pullback.inverse.laplace import laplace
from pullback.inverse.posterior import Posterior


@pytest.fixture(scope="module")
def found():
    return fit(model().posterior, 3)


def test_truth_is_within_the_laplace_band(found):
    """Law and section offset within three standard deviations, from a strap that follows its outline."""
    around = laplace(found, 2000, 3)
    values = around.posterior.layout.unpack(around.draws)
    rubber = LAWS["yeoh"]
    truth = {p.name: v for p, v in zip(rubber.law.parameters, rubber.theta, strict=True)}
    truth |= {"lot": 0.0, "grip_position": 0.0, "force_scale": 0.0, "travel_zero": 0.0}
    for name, true in truth.items():
        assert abs(values[name].mean() - true) < 3.0 * values[name].std(), name


def test_best_node_is_a_maximum_over_the_free_coordinates(found):
    """The gradient there is nil in units of each coordinate's standard deviation."""
    gradient = found.posterior.value_and_gradient(found.best.q)[1][0, found.free]
    assert np.max(np.abs(gradient) * np.sqrt(np.diag(np.linalg.inv(found.best.curvature)))) < 0.01


def test_all_starts_reach_the_same(found):
    assert np.ptp(found.starts_cost) < 0.01 * found.starts_cost.min()


def test_a_study_without_a_fit_says_so():
    """A law that is never stable leaves no point with a finite density."""

    class Falling:
        def __init__(self, law):
            self.law, self.parameters = law, law.parameters

        def __getattr__(self, name):
            return getattr(self.law, name)

        def stress_and_slope(self, stretch, theta):
            stress = self.law.stress(stretch, theta)
            return stress, -np.ones_like(stress)

    whole = model().posterior
    hopeless = Posterior(whole.layout, Falling(whole.law), whole.pieces, whole.terms, whole.stable_stretch)
    with pytest.raises(RuntimeError, match="no starting point leads to a fit"):
        fit(replace(hopeless), 3)

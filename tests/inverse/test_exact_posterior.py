"""Fit, Laplace approximation and sampler together, on real data whose posterior is known exactly (see exact_yeoh).

Every figure of the sample must lie within four of its own Monte Carlo standard errors, with the least effective size
that the diagnosis gives. Standard errors: Student t with 21 degrees of freedom has kurtosis 3 + 6/17.
"""

from __future__ import annotations

import numpy as np
import pytest
from exact_yeoh import CENTRE, CORRELATION, INTERVALS, NAMES, NOISE_MEDIAN, SD, posterior
from scipy import stats

from pullback.inverse.fit import Fit, fit
from pullback.inverse.laplace import laplace
from pullback.inverse.sampling.loop import Draws, sample

SEED, FREEDOM = 7, 21
KURTOSIS = 3.0 + 6.0 / (FREEDOM - 4)


def sampled(noise: str | None, guess: float, effective: int) -> tuple[Draws, Fit, np.ndarray]:
    """Draws, fit, and named values (names, draws)."""
    found = fit(posterior(guess, noise), SEED)
    start = laplace(found, 500, SEED)
    draws = sample(start, SEED, effective, 2.0)
    values = start.posterior.layout.unpack(draws.q.reshape(-1, draws.q.shape[2]))
    return draws, found, np.stack([values[n] for n in NAMES if n in values])


def departures(x: np.ndarray, n: float) -> dict[str, float]:
    """Each figure's distance from the exact one in standard errors, for n effective draws x (3 or 4, draws)."""
    out = {}
    t = stats.t(FREEDOM)
    # The density of the standardised t at its 97.5 % point; the posterior's sd is se·sqrt(21/19).
    tail = np.sqrt(0.025 * 0.975 / n) / (t.pdf(t.ppf(0.975)) * np.sqrt(FREEDOM / (FREEDOM - 2.0)))
    for k in range(3):
        out[f"{NAMES[k]} mean"] = (x[k].mean() - CENTRE[k]) / SD[k] * np.sqrt(n)
        out[f"{NAMES[k]} sd"] = (x[k].std() / SD[k] - 1.0) / np.sqrt((KURTOSIS - 1.0) / (4.0 * n))
        out[f"{NAMES[k]} lower"], out[f"{NAMES[k]} upper"] = (
            (np.quantile(x[k], [0.025, 0.975]) - INTERVALS[k]) / (SD[k] * tail)
        )  # fmt: skip
    for (i, j), rho in CORRELATION.items():
        se = (1.0 - rho**2) * np.sqrt(KURTOSIS / 3.0 / n)
        out[f"correlation {NAMES[i]} {NAMES[j]}"] = (np.corrcoef(x[i], x[j])[0, 1] - rho) / se
    if x.shape[0] == 4:
        out |= noise_departures(x[3], n)
    return out


def noise_departures(sigma: np.ndarray, n: float) -> dict[str, float]:
    """21 s²/sigma² is chi-square: its density gives the standard errors of sigma's quantiles."""
    chi = stats.chi2(FREEDOM)
    out = {}
    for name, p, exact in zip(("lower", "middle", "upper"), (0.025, 0.5, 0.975), _noise_quantiles(), strict=True):
        c = chi.isf(p)
        density = chi.pdf(c) * 2.0 * c / exact
        out[f"noise {name}"] = (np.quantile(sigma, p) - exact) * density / np.sqrt(p * (1.0 - p) / n)
    return out


def _noise_quantiles() -> tuple[float, float, float]:
    return INTERVALS[3, 0], NOISE_MEDIAN, INTERVALS[3, 1]


def test_exact_figures_agree_with_one_another():
    """The tabulated intervals are CENTRE ± t sd sqrt(19/21), and sqrt(21 s²/chi-square) with s = 0.1121612 MPa."""
    half = stats.t(FREEDOM).ppf(0.975) * SD * np.sqrt((FREEDOM - 2.0) / FREEDOM)
    assert np.stack((CENTRE - half, CENTRE + half), 1) == pytest.approx(INTERVALS[:3], rel=1e-7)
    sigma = 0.1121612086712046 * np.sqrt(FREEDOM / stats.chi2(FREEDOM).isf([0.025, 0.5, 0.975]))
    assert sigma == pytest.approx(_noise_quantiles(), rel=1e-6)


def test_sampled_posterior_is_the_exact_one():
    draws, _, x = sampled("noise", 0.11, 4000)
    assert draws.diagnosis.rhat_max < 1.01 and draws.diagnosis.least >= 4000
    assert draws.diverging.sum() == 0
    off = departures(x, draws.diagnosis.least)
    assert len(off) == 18
    assert max(np.abs(list(off.values()))) < 4.0, off


def test_fit_is_least_squares():
    found = fit(posterior(guess=0.3), SEED)
    values = found.posterior.layout.unpack(found.best.q[None])
    assert [values[n][0] for n in NAMES[:3]] == pytest.approx(CENTRE, rel=1e-5)
    # The mode of log sigma: n sigma² = sum of squares = 21 s².
    assert values["noise"][0] == pytest.approx(0.1121612086712046 * np.sqrt(FREEDOM / 24.0), rel=1e-3)
    assert found.starts_cost == pytest.approx(np.full(4, found.starts_cost[0]), rel=1e-6)


def test_wrong_noise_fails():
    """Negative control: the noise taken as known, a third too large, leaves the means and nothing else."""
    draws, _, x = sampled(None, 0.15, 2000)
    off = departures(x, draws.diagnosis.least)
    assert max(abs(off[f"{n} mean"]) for n in NAMES[:3]) < 4.0
    assert min(abs(off[f"{n} sd"]) for n in NAMES[:3]) > 8.0
    assert min(abs(off[f"{n} lower"]) for n in NAMES[:3]) > 6.0

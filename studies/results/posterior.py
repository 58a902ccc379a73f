"""posterior.nc: draws as ArviZ InferenceData, names and units in the open."""

from __future__ import annotations

import warnings
from pathlib import Path
from typing import Any

import arviz as az
import numpy as np
import xarray as xr

from pullback.inverse.layout import Field, Scalar
from pullback.inverse.readings.base import GaussianTerm
from pullback.inverse.readings.marks import Marks
from pullback.studies.statement import Statement

_PRIOR_DRAWS = 2000


def inference_data(s: Statement) -> az.InferenceData:
    """Groups posterior, prior, sample_stats, observed_data, posterior_predictive, log_likelihood and predictions."""
    groups: dict[str, Any] = {"posterior": _posterior(s), "prior": _prior(s), "observed_data": _observed(s)}
    predictions = _thinned(s)
    if predictions is not None:
        groups["predictions"] = predictions
    predictive, likelihood = _predictive(s)
    groups |= {"posterior_predictive": predictive, "log_likelihood": likelihood}
    if s.sample.chains is not None:
        groups["sample_stats"] = _sample_stats(s)
    return az.InferenceData(**groups)


def write_posterior(s: Statement, path: Path) -> None:
    """Write posterior.nc."""
    with warnings.catch_warnings():
        # What the netCDF libraries deprecate among themselves is not the user's business.
        warnings.simplefilter("ignore")
        inference_data(s).to_netcdf(str(path), engine="h5netcdf")


def _posterior(s: Statement) -> xr.Dataset:
    q, layout = s.sample.q, s.calibration.model.posterior.layout
    values = layout.unpack(q.reshape(-1, q.shape[-1]))
    found: dict[str, xr.Variable] = {}
    coords: dict[str, list[str]] = {}
    for block in layout.blocks:
        draws = values[block.name]
        if draws.ndim == 1:
            found[block.name] = xr.Variable(("chain", "draw"), draws.reshape(q.shape[:2]), {"unit": block.unit})
            continue
        piece = s.calibration.model.piece
        dim = f"{piece.name} {'coefficient' if isinstance(block, Field) else 'step'}"
        each = np.moveaxis(draws.reshape(-1, *q.shape[:2]), 0, -1)
        found[block.name] = xr.Variable(("chain", "draw", dim), each, {"unit": block.unit})
        if not isinstance(block, Field):
            coords[dim] = list(piece.steps)
    return xr.Dataset(found, coords)


def _thinned(s: Statement) -> xr.Dataset | None:
    """Margins and capacities, had at every so many draws of each chain."""
    of = s.next_part if s.study.statement.applies_to == "next part" else s.pulled
    if of is None or not s.margins:
        return None
    shape = (s.chains, -1)
    margin = np.stack([m.draws.reshape(shape) for m in s.margins], axis=-1)
    share = of.quantiles.reshape(s.chains, -1, of.quantiles.shape[1])
    found = {
        "margin": xr.Variable(("chain", "draw", "demand"), margin, {"unit": ""}),
        "capacity": xr.Variable(("chain", "draw"), of.load.reshape(shape), {"unit": "N"}),
        "capacity_quantile": xr.Variable(("chain", "draw", "share"), share, {"unit": "N"}),
    }
    shares = [0.5, *(1.0 - r for r in s.study.statement.reliability)]
    return xr.Dataset(found, {"demand": [m.demand for m in s.margins], "share": shares})


def _prior(s: Statement) -> xr.Dataset:
    """Draws of each proper scalar prior."""
    rng = np.random.Generator(np.random.Philox(key=[s.study.seed, 6]))
    found = {}
    for block in s.calibration.model.posterior.layout.blocks:
        if isinstance(block, Scalar) and block.prior.proper:
            draws = block.prior.value(rng.standard_normal(_PRIOR_DRAWS))[None]
            found[block.name] = xr.Variable(("chain", "draw"), draws, {"unit": block.unit})
    return xr.Dataset(found)


def _sample_stats(s: Statement) -> xr.Dataset:
    chains = s.sample.chains
    assert chains is not None
    found = {"lp": chains.log_density, "acceptance_rate": chains.acceptance, "energy": chains.energy}
    return xr.Dataset({k: (("chain", "draw"), v) for k, v in (found | {"diverging": chains.diverging}).items()})


def _gaussian(s: Statement) -> dict[str, GaussianTerm]:
    return {t.kind: t for t in s.calibration.model.posterior.terms if isinstance(t, GaussianTerm)}


def _observed(s: Statement) -> xr.Dataset:
    """Readings as the likelihood takes them (sections and coupon stresses by their logarithm), and marks as a table."""
    found = {k: xr.Variable((f"{k} reading",), t.readings) for k, t in _gaussian(s).items()}
    marks = next((t for t in s.calibration.model.posterior.terms if isinstance(t, Marks)), None)
    if marks is not None:
        found["marks"] = xr.Variable(("mark", "step"), marks.position)
    return xr.Dataset(found)


def _predictive(s: Statement) -> tuple[xr.Dataset, xr.Dataset]:
    """Simulated readings and log-likelihood of the Gaussian kinds over the band's draws, one chain."""
    posterior, b = s.calibration.model.posterior, s.bands
    values, predictions = posterior.predict(b.q)
    rng = np.random.Generator(np.random.Philox(key=[s.study.seed, 7]))
    simulated, likelihood = {}, {}
    for kind, term in _gaussian(s).items():
        expected = term.expected(values, predictions[term.piece] if term.piece else None)
        sigma = term.sigma[:, None]
        dims = ("chain", "draw", f"{kind} reading")
        simulated[kind] = (dims, (expected + sigma * rng.standard_normal(expected.shape)).T[None])
        z = (term.readings[:, None] - expected) / sigma
        likelihood[kind] = (dims, (-0.5 * z * z - np.log(sigma) - 0.5 * np.log(2.0 * np.pi)).T[None])
    return xr.Dataset(simulated), xr.Dataset(likelihood)

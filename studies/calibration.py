"""Fit and sampling of a study."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pullback.inverse.fit import Fit, first_fit, fit
from pullback.inverse.laplace import Laplace, laplace
from pullback.inverse.sampling.diagnose import Diagnosis
from pullback.inverse.sampling.loop import Draws
from pullback.inverse.sampling.loop import sample as run_chains
from pullback.studies.assemble import ELEMENTS, Model, assemble, with_coupon_slope
from pullback.studies.study import Study

Array = NDArray[np.float64]
Progress = Callable[[str, float], None]

LAPLACE_DRAWS = 4000


def _silent(stage: str, share: float) -> None:
    """Progress that nobody looks at."""


@dataclass(frozen=True)
class Calibration:
    """A study's model, its fit, and the Laplace approximation; `laplace.posterior` is what is sampled."""

    model: Model
    fit: Fit
    laplace: Laplace

    def __repr__(self) -> str:
        best = self.laplace.posterior.layout.unpack(self.laplace.mean[None])
        law = ", ".join(f"{p.name} {best[p.name][0]:.4g} {p.unit}".strip() for p in self.model.law.parameters)
        return f"Calibration of {self.model.study.title!r}: {self.model.law.name}, {law}"

    def draws(self) -> Array:
        """Laplace draws as (1, draws, dim), the form that sampled ones have."""
        return self.laplace.draws[None]


@dataclass(frozen=True)
class Sample:
    """Draws (chains, draws, dim) of the posterior; `chains` says how they were had, None for the Laplace ones."""

    q: Array
    chains: Draws | None

    @property
    def diagnosis(self) -> Diagnosis | None:
        """Convergence of the unknowns."""
        return self.chains.diagnosis if self.chains else None

    def __repr__(self) -> str:
        how = f"least effective {self.chains.diagnosis.least:.0f}" if self.chains else "Laplace approximation"
        return f"Sample of {self.q.shape[0]} x {self.q.shape[1]} draws, {how}"


def calibrate(study: Study, progress: Progress = _silent, elements: int = ELEMENTS) -> Calibration:
    """Fit law and section of `study` together.

    Raises RuntimeError where no start leads to a fit with finite density.
    """
    model = assemble(study, elements)
    model = with_coupon_slope(model, first_fit(model.posterior, study.seed))
    found = fit(model.posterior, study.seed, lambda share: progress("fit", share))
    around = laplace(found, LAPLACE_DRAWS, study.seed)
    return Calibration(replace(model, posterior=around.posterior), found, around)


def sample(calibration: Calibration, progress: Progress = _silent) -> Sample:
    """Sample the posterior until every unknown has the effective draws that the study asks for, or time is up."""
    spec = calibration.model.study.sampler
    seed = calibration.model.study.seed
    draws = run_chains(calibration.laplace, seed, spec.effective_samples, spec.max_minutes, progress)
    return Sample(draws.q, draws)


def approximate(calibration: Calibration) -> Sample:
    """The Laplace draws in place of sampled ones: quick, and never stated."""
    return Sample(calibration.draws(), None)

"""How well the posterior was sampled."""

from __future__ import annotations

from typing import Any

from pullback.studies.report import words
from pullback.studies.report.load import ResultsFolder
from pullback.studies.report.tables.base import Table

_NAMES = {
    "rhat_max": "R-hat (rank-normalised, split), greatest",
    "ess_bulk_min": "Effective draws, bulk, least",
    "ess_tail_min": "Effective draws, tails, least",
    "ess_sd_min": "Effective draws, standard deviation, least",
    "acceptance": "Acceptance rate",
    "evaluations": "Log-densities with gradient",
    "seconds": "Time (s)",
    "chi2_per_reading": "χ² per reading at the fit",
    "largest_stretch_informed": "Largest stretch at which a force or stress was read (1)",
    "stretch_at_capacity": "Stretch at failure, median (1)",
    "walkers": "Chains",
    "draws": "Draws kept of each chain",
    "warm_up": "Warm-up steps",
    "step_size": "Step size (1)",
    "leapfrog_steps": "Leapfrog steps, mean",
    "failures": "Forward solutions that failed",
    "divergences": "Divergences",
    "stopped": "Ended because",
}
_DIGITS = {"rhat_max": 4}


def diagnostics(folder: ResultsFolder) -> Table:
    """One row a number; what a quick run lacks is said once."""
    found = folder.results["diagnostics"]
    flat = {k: v for k, v in found.items() if k not in ("sampling", "reason")} | (found.get("sampling") or {})
    why = found.get("reason") or ("no chain was run" if folder.quick else None)
    rows = [(_NAMES.get(key, key.replace("_", " ")), _value(key, value, why)) for key, value in flat.items()]
    return Table("Sampling", ("Diagnostic", "Value"), rows, (0,))


def _value(key: str, value: Any, why: str | None) -> str:
    if isinstance(value, str):
        return value
    if isinstance(value, bool):
        return "yes" if value else "no"
    if not words.is_number(value):
        return why or "not given by the results"
    return words.number(value, _DIGITS.get(key, 3))

"""How well the posterior was sampled."""

from __future__ import annotations

from typing import Any

from pullback.studies.reporting import words
from pullback.studies.reporting.load import ResultsFolder
from pullback.studies.reporting.tables.base import Table

_NAMES = {
    "rhat_max": "R-hat (rank-normalised, split), greatest",
    "ess_bulk_min": "Effective draws, bulk, least",
    "ess_tail_min": "Effective draws, tails, least",
    "ess_sd_min": "Effective draws, standard deviation, least",
    "walkers": "Chains",
    "warm_up": "Warm-up steps, not kept",
    "draws": "Draws kept of each chain",
    "stopped": "Ended because",
    "acceptance": "Acceptance rate",
    "divergences": "Trajectories whose energy ran away (divergences)",
    "failures": "Points where no equilibrium was found",
    "outside_stable_laws": "Points where the law's stress falls within the stretches read",
    "evaluations": "Points tried (log-density with gradient)",
    "step_size": "Step size (1)",
    "leapfrog_steps": "Leapfrog steps a draw, mean",
    "chi2_per_reading": "χ² per reading, mean over draws",
    "largest_stretch_informed": "Largest stretch at which a force or stress was read (1)",
    "stretch_at_capacity": "Stretch at failure, median (1)",
    "elements": "Elements along a part",
    "largest_discretisation_error_over_gauge_error": "Error of the mesh over a gauge's error, greatest (1)",
    "sampling_seconds": "Time spent on sampling (s)",
    "seconds": "Time altogether (s)",
}
_DIGITS = {"rhat_max": 4}
_NOTE = (
    "Points without equilibrium, or where the law is not stable, have no probability: a trajectory that meets one is "
    "turned down and counted. Few of them beside the points tried are harmless."
)


def diagnostics(folder: ResultsFolder) -> Table:
    """One row a number, convergence first; what a quick run lacks is said once."""
    found = folder.results["diagnostics"]
    flat = {k: v for k, v in found.items() if k not in ("sampling", "reason")} | (found.get("sampling") or {})
    order = [key for key in _NAMES if key in flat] + [key for key in flat if key not in _NAMES]
    absent = [key for key in order if not words.is_number(flat[key]) and not isinstance(flat[key], str | bool)]
    why = found.get("reason") or ("no chain was run" if folder.quick else None)
    if absent and why:
        rows = [(_name(key), _value(key, flat[key])) for key in order if key not in absent]
        names = ", ".join(_name(key).partition(" (")[0] for key in absent)
        return Table("Sampling", ("Diagnostic", "Value"), rows, (0,), f"Not given ({why}): {names}.")
    rows = [(_name(key), _value(key, flat[key])) for key in order]
    return Table("Sampling", ("Diagnostic", "Value"), rows, (0,), _NOTE if "failures" in flat else "")


def _name(key: str) -> str:
    return _NAMES.get(key, key.replace("_", " "))


def _value(key: str, value: Any) -> str:
    if isinstance(value, str):
        return value
    if isinstance(value, bool):
        return "yes" if value else "no"
    if not words.is_number(value):
        return "not given by the results"
    return words.number(value, _DIGITS.get(key, 3))

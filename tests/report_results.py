"""What results.json of the synthetic folder holds: invented numbers, with no study behind them."""

from __future__ import annotations

from typing import Any

import numpy as np
import pandas as pd
from report_numbers import LAW_UNITS, STEPS, Numbers, bands

REQUIRED = 112.5
CONFIDENCE = 0.95
UNITS = LAW_UNITS | {"correlation_length": "mm"}


def where(n: Numbers) -> pd.DataFrame:
    station = n.station[:-1] + 1.0
    weight = np.exp(-0.5 * ((station - 57.0) / 14.0) ** 2)
    return pd.DataFrame({"part": "next part", "station [mm]": station, "probability": weight / weight.sum()})


def guaranteed(n: Numbers) -> list[dict[str, Any]]:
    value = float(np.quantile(np.quantile(n.capacity, 0.1, axis=1), 1.0 - CONFIDENCE))
    known = {"reliability": 0.9, "confidence": CONFIDENCE, "value": value, "margin": value / REQUIRED - 1.0}
    known["met"] = "met" if value >= REQUIRED else "not met"
    reason = "11 coupons broke; a 99 % share needs at least 10 failures and a sampled tail"
    withheld = {"reliability": 0.99, "confidence": CONFIDENCE, "value": None, "margin": None, "met": "not shown"}
    return [known, withheld | {"reason": reason}]


def checks() -> list[dict[str, Any]]:
    return [
        {"kind": "marks", "piece": "P1", "readings": 152, "chi2_per_reading": 1.01, "p": 0.43},
        {"kind": "forces", "piece": "P1", "readings": 8, "chi2_per_reading": 0.82, "p": 0.66},
        {"kind": "sections", "piece": "P1", "readings": 3, "chi2_per_reading": 0.64, "p": 0.71},
        {"kind": "coupons", "piece": None, "readings": 12, "chi2_per_reading": 1.12, "p": 0.31},
    ]


def sensitivity() -> list[dict[str, Any]]:
    changes = {("spread", 0.5): 0.004, ("spread", 2.0): -0.006, ("c10", 0.5): 0.001, ("c10", 2.0): -0.002}
    return [{"prior": p, "factor": f, "reliability": 0.9, "change": c, "error": 0.003} for (p, f), c in changes.items()]


def parameters(n: Numbers) -> dict[str, Any]:
    found = {}
    for name, draws in (n.law | n.other).items():
        band = {k: float(v) for k, v in bands(draws.reshape(-1)).items()}
        flat = name.startswith("strength")
        found[name] = {
            "unit": UNITS.get(name, ""),
            "median": band["median"],
            "sd": float(draws.std()),
            "interval": [band["lower"], band["upper"]],
            "level": 0.95,
            "informed": None if flat else 0.97,
            "meaning": f"what the {name.replace('_', ' ')} is",
            "prior": "flat in its logarithm" if flat else "log-normal, median 0.31, geometric standard deviation 3",
        }
    return found


def piece(n: Numbers) -> dict[str, Any]:
    stretch = {k: v.tolist() for k, v in bands(n.stretch).items()}
    section = {k: v.tolist() for k, v in bands(n.area).items()}
    return {
        "station": n.station.tolist(),
        "area": {"unit": "mm^2", "level": 0.95} | section,
        "stretch": {"station": n.station.tolist(), "step": list(STEPS), "level": 0.95} | stretch,
        "capacity": [predictive(n)],
        "record": {"condition": "as moulded, invented"},
    }


def predictive(n: Numbers) -> dict[str, Any]:
    band = {k: float(v) for k, v in bands(n.capacity.reshape(-1)).items()}
    found = {"measure": "force", "unit": "N", "service": None, "median": band["median"], "level": 0.95}
    return found | {"interval": [band["lower"], band["upper"]]}


def next_part(n: Numbers) -> dict[str, Any]:
    deep = bands(np.quantile(n.capacity, 0.1, axis=1))
    quantile = {"share": 0.1, "median": float(deep["median"]), "level": 0.95}
    quantile["interval"] = [float(deep["lower"]), float(deep["upper"])]
    keys = ("reliability", "confidence", "value", "reason")
    kept = [{k: g[k] for k in keys if k in g} for g in guaranteed(n)]
    table = where(n)
    place = {"station": table["station [mm]"].tolist(), "probability": table["probability"].tolist()}
    return {"capacity": [predictive(n) | {"quantiles": [quantile], "guaranteed": kept, "where": place}]}


def margin(n: Numbers) -> dict[str, Any]:
    band = {k: float(v) for k, v in bands(n.capacity.reshape(-1) / REQUIRED - 1.0).items()}
    short = bands((n.capacity < REQUIRED).mean(axis=1))
    return {
        "demand": "hold-down",
        "service": None,
        "measure": "force",
        "unit": "N",
        "required": REQUIRED,
        "median": band["median"],
        "interval": [band["lower"], band["upper"]],
        "level": 0.95,
        "guaranteed": guaranteed(n),
        "shortfall_probability": {
            "median": float(short["median"]),
            "upper": float(short["upper"]),
            "confidence": CONFIDENCE,
        },
        "shares": None,
    }


def results(n: Numbers) -> dict[str, Any]:
    low = guaranteed(n)[0]
    return {
        "pullback": "0.1.0",
        "study": {
            "title": "Invented strap for the tests of the report",
            "sha256": "3f" * 32,
            "files": {"study.toml": "ab" * 32, "outline.csv": "cd" * 32, "P1_marks.csv": "ef" * 32},
            "seed": 7,
            "method": "sampled",
            "law": "yeoh",
            "created": "2026-03-02",
            "applies_to": "next part",
            "reliability": [0.9, 0.99],
            "confidence": CONFIDENCE,
        },
        "versions": {"pullback": "0.1.0", "python": "3.11", "numpy": "2.4.6", "emcee": "3.1.6", "arviz": "0.23.4"},
        "record": {"laboratory": "invented for a test", "date": "2026-02-20", "compound": "invented NR 50"},
        "verdict": {
            "state": "stated",
            "sentence": f"90 % of parts carry at least {low['value'] - 0.05:.1f} N with 95 % confidence, a margin of "
            f"{100 * low['margin'] - 0.05:.1f} % on the {REQUIRED} N required for hold-down: {low['met']}.",
            "reasons": [],
            "rules": rules(),
        },
        "warnings": ["P1_readings.csv, line 9: the last force is 3 % above the trend of the others."],
        "assumed": ["part_to_part of the section: 2 %.", "law.part_to_part: half-normal, 3 %."],
        "excluded": ["P1_marks.csv: 16 readings within one local width of a grip (near_grip = leave out)."],
        "not_recorded": ["certificate", "batch", "drawing"],
        "rests_on": {
            "pieces": 1,
            "steps": 8,
            "mark_readings": 152,
            "force_readings": 8,
            "sections": 3,
            "masses": 1,
            "coupons": 12,
            "coupons_broken": 11,
        },
        "left_out": ["Only one law was tried.", "Creep, fatigue, ageing and fluids are not covered."],
        "cautions": [
            "Stretched parts store energy and recoil when they break: shield, and keep out of the line of pull."
        ],
        "parameters": parameters(n),
        "pieces": {"P1": piece(n)},
        "next_part": next_part(n),
        "margins": [margin(n)],
        "energy": [{"demand": "hold-down", "at_demand": 9.2, "at_capacity": 17.1, "unit": "J"}],
        "diagnostics": diagnostics(),
        "checks": checks(),
        "prior_sensitivity": sensitivity(),
        "not_yet": "shares",
    }


def rules() -> list[dict[str, Any]]:
    rows = [
        ("sampled", "greatest R-hat of any parameter or margin", 1.003, 1.01),
        ("fits", "smallest predictive p of any piece and kind of reading", 0.31, [0.005, 0.995]),
        ("stable", "share of draws that lose stability before capacity", 0.0, 0.001),
        ("informed", "stretch at capacity over the largest stretch informed", 0.91, 1.1),
        (
            "not carried by the prior",
            "largest change of a guaranteed load when a prior's scale is halved or doubled",
            0.006,
            0.05,
        ),
    ]
    return [{"rule": r, "passed": True, "text": t, "number": x, "limit": limit} for r, t, x, limit in rows]


def diagnostics() -> dict[str, Any]:
    sampling = {
        "walkers": 8,
        "draws": 500,
        "warm_up": 400,
        "step_size": 0.31,
        "leapfrog_steps": 9,
        "failures": 0,
        "divergences": 0,
        "stopped": "R-hat and effective draws reached",
    }
    return {
        "rhat_max": 1.003,
        "ess_bulk_min": 2100.0,
        "ess_tail_min": 1900.0,
        "evaluations": 123456,
        "seconds": 6.1,
        "acceptance": 0.81,
        "chi2_per_reading": 1.02,
        "largest_stretch_informed": 5.58,
        "stretch_at_capacity": 5.07,
        "sampling": sampling,
    }


def withheld(found: dict[str, Any]) -> dict[str, Any]:
    """The same results with the rule 'informed' broken."""
    reason = {
        "rule": "informed",
        "text": "The parts fail at a stretch at which no force or stress was read.",
        "number": 1.73,
        "limit": 1.1,
        "remedy": "Report the coupons' stress at break, or pull a piece further.",
    }
    verdict = found["verdict"] | {"state": "withheld", "sentence": "No load is stated: not shown.", "reasons": [reason]}
    verdict["rules"] = [r | ({"passed": False, "number": 1.73} if r["rule"] == "informed" else {}) for r in rules()]
    return found | {"verdict": verdict}


def quick(found: dict[str, Any]) -> dict[str, Any]:
    """The same results as the quick approximation would give them: no chain, no diagnostics of one."""
    no_chain = dict.fromkeys(("rhat_max", "ess_bulk_min", "ess_tail_min", "acceptance", "sampling"))
    diagnosed = found["diagnostics"] | no_chain | {"reason": "no chain was run"}
    return withheld(found) | {"study": found["study"] | {"method": "laplace"}, "diagnostics": diagnosed}

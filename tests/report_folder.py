"""Writes a synthetic results folder for the tests of the report: invented numbers (see report_numbers), no study behind it."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd
import xarray as xr
from report_numbers import (
    CENTRE,
    CHAINS,
    DRAWS,
    LAW_UNITS,
    LENGTH,
    PRIOR,
    STEPS,
    TRAVEL,
    Numbers,
    bands,
    outline,
    stress,
)

REQUIRED = 112.5
CONFIDENCE = 0.95
UNITS = LAW_UNITS | {"correlation_length": "mm"}


def build(folder: Path, **changes: Any) -> Path:
    """Write results.json, posterior.nc and tables/ into `folder`; `changes` replace top-level keys of results.json."""
    numbers = Numbers()
    (folder / "tables").mkdir(parents=True, exist_ok=True)
    for name, table in tables(numbers).items():
        table.to_csv(folder / "tables" / f"{name}.csv", index=False, float_format="%.7g")
    write_posterior(folder / "posterior.nc", numbers)
    write_results(folder, results(numbers) | changes)
    return folder


def write_results(folder: Path, found: dict[str, Any]) -> None:
    (folder / "results.json").write_text(json.dumps(found, indent=1, allow_nan=False), encoding="utf-8")


def write_posterior(path: Path, n: Numbers) -> None:
    draws = n.law | n.other
    margin = np.quantile(n.capacity, 0.1, axis=1)[:, None] / REQUIRED - 1.0
    margin = np.resize(margin, (CHAINS, DRAWS, 1))
    variables = {k: xr.Variable(("chain", "draw"), v, {"unit": UNITS.get(k, "")}) for k, v in draws.items()}
    variables["margin"] = xr.Variable(("chain", "draw", "demand"), margin, {"unit": ""})
    shape = (CHAINS, DRAWS)
    stats = {
        "lp": n.rng.normal(-210.0, 3.4, shape),
        "acceptance_rate": n.rng.uniform(0.6, 1.0, shape),
        "energy": n.rng.normal(225.0, 5.0, shape),
        "diverging": np.zeros(shape),
    }
    prior = {k: (("chain", "draw"), n.rng.normal(m, s, (1, 2000))) for k, (m, s) in PRIOR.items()}
    groups = {
        "posterior": xr.Dataset(variables, coords={"demand": ["hold-down"]}),
        "sample_stats": xr.Dataset({k: (("chain", "draw"), v) for k, v in stats.items()}),
        "prior": xr.Dataset(prior),
    }
    for k, (group, data) in enumerate(groups.items()):
        data.to_netcdf(path, mode="w" if k == 0 else "a", group=group, engine="h5netcdf")


def columns(samples: np.ndarray, quantity: str, unit: str = "") -> dict[str, np.ndarray]:
    tail = f" [{unit}]" if unit else ""
    return {f"{quantity} {which}{tail}": values.reshape(-1) for which, values in bands(samples).items()}


def tables(n: Numbers) -> dict[str, pd.DataFrame]:
    return {
        "parameters": parameters_table(n),
        "marks": marks(n),
        "readings": readings(n),
        "sections": sections(n),
        "area": area(n),
        "profile": profile(n),
        "force_travel": force_travel(n),
        "law": law(n),
        "coupons": coupons(n),
        "capacity": capacity(n),
        "where": where(n),
        "margins": pd.DataFrame([{"demand": "hold-down", "required [N]": REQUIRED}]),
        "guaranteed": pd.DataFrame([g | {"demand": "hold-down"} for g in guaranteed(n)]),
        "margin_distribution": margin_distribution(n),
        "checks": pd.DataFrame(checks()),
        "prior_sensitivity": pd.DataFrame(sensitivity()),
    }


def parameters_table(n: Numbers) -> pd.DataFrame:
    rows = [{"parameter": k, **v, "lower": v["interval"][0], "upper": v["interval"][1]} for k, v in parameters(n).items()]
    return pd.DataFrame(rows).drop(columns=["interval", "prior", "symbol"], errors="ignore")


def marks(n: Numbers) -> pd.DataFrame:
    station = np.linspace(6.0, 114.0, 19)
    at = np.searchsorted(n.station, station)
    frames = []
    for k, step in enumerate(STEPS):
        predicted = bands(n.position[:, k, at])
        noise = n.rng.normal(0.0, 1.0, station.size)
        frame = {"piece": "P1", "step": step, "station [mm]": station}
        frame |= {"position read [mm]": predicted["median"] + 0.2 * noise}
        frame |= {f"position {w} [mm]": v for w, v in predicted.items()} | {"residual": noise}
        frames.append(pd.DataFrame(frame | {"file": "P1_marks.csv", "line": 2 + k * 19 + np.arange(19)}))
    return pd.concat(frames)


def readings(n: Numbers) -> pd.DataFrame:
    force = bands(n.force)["median"]
    frame: dict[str, Any] = {"piece": "P1", "step": STEPS, "travel read [mm]": TRAVEL + n.rng.normal(0, 0.05, 8)}
    frame |= columns(np.resize(TRAVEL, (9, 8)) + n.rng.normal(0, 0.04, (9, 8)), "travel", "mm")
    frame |= {"force read [N]": force + n.rng.normal(0, 0.12, 8)} | columns(n.force, "force", "N")
    return pd.DataFrame(frame | {"file": "P1_readings.csv", "line": np.arange(2, 10)})


def sections(n: Numbers) -> pd.DataFrame:
    station = np.array([20.0, 60.0, 100.0])
    sample = n.area[:, np.searchsorted(n.station, station)]
    middle = bands(sample)["median"]
    frame = {"piece": "P1", "station [mm]": station, "area read [mm^2]": middle * (1 + n.rng.normal(0, 0.01, 3))}
    return pd.DataFrame(frame | {"standard error [mm^2]": 0.01 * middle} | columns(sample, "area", "mm^2"))


def area(n: Numbers) -> pd.DataFrame:
    frame = {"piece": "P1", "station [mm]": n.station, "outline [mm^2]": outline(n.station)}
    return pd.DataFrame(frame | columns(n.area, "area", "mm^2"))


def profile(n: Numbers) -> pd.DataFrame:
    frames = []
    for k, step in enumerate(STEPS):
        nominal = n.force[:, k, None] / n.area
        frame = {"piece": "P1", "step": step, "station [mm]": n.station} | columns(n.position[:, k], "position", "mm")
        frame |= columns(n.stretch[:, k], "stretch") | columns(nominal, "nominal stress", "MPa")
        frame |= columns(nominal * n.stretch[:, k], "true stress", "MPa")
        frames.append(pd.DataFrame(frame | columns(n.area / n.stretch[:, k], "current section", "mm^2") | {"J": 1.0}))
    return pd.concat(frames)


def force_travel(n: Numbers) -> pd.DataFrame:
    fine = np.linspace(TRAVEL[0], TRAVEL[-1], 60)
    force = np.stack([np.interp(fine, TRAVEL, row) for row in n.force])
    return pd.DataFrame({"piece": "P1", "travel [mm]": fine} | columns(force, "force", "N"))


def law(n: Numbers) -> pd.DataFrame:
    grid = np.linspace(1.0, 6.4, 80)
    curves = np.stack([stress(grid, *(n.thinned(p)[d] for p in CENTRE)) for d in range(200)])
    frame = {"stretch": grid} | columns(curves, "nominal stress", "MPa")
    return pd.DataFrame(frame | {"informed": np.where(grid <= 5.6, "yes", "no")})


def coupons(n: Numbers) -> pd.DataFrame:
    elongation = np.array([3.62, 3.81, 3.93, 4.05, 4.12, 4.2, 4.28, 4.33, 4.41, 4.5, 4.58, 4.1])
    curves = np.stack([stress(1 + elongation, *(n.thinned(p)[d] for p in CENTRE)) for d in range(200)])
    read = bands(curves)["median"] * (1 + n.rng.normal(0, 0.03, 12))
    frame = {"coupon": np.arange(1, 13), "measure read": elongation, "nominal stress read [MPa]": read}
    frame |= columns(curves, "nominal stress", "MPa")
    return pd.DataFrame(frame | {"broke": ["yes"] * 11 + ["no"], "line": np.arange(2, 14)})


def capacity(n: Numbers) -> pd.DataFrame:
    load = np.linspace(40.0, 260.0, 90)
    share = (n.capacity[:, :, None] < load).mean(axis=1)
    frame = {"part": "next part", "load [N]": load} | columns(share, "share failed")
    return pd.DataFrame(frame | {"predictive": share.mean(axis=0)})


def where(n: Numbers) -> pd.DataFrame:
    station = n.station[:-1] + 1.0
    weight = np.exp(-0.5 * ((station - 57.0) / 14.0) ** 2)
    return pd.DataFrame({"part": "next part", "station [mm]": station, "probability": weight / weight.sum()})


def margin_distribution(n: Numbers) -> pd.DataFrame:
    count, edge = np.histogram(n.capacity / REQUIRED - 1.0, bins=np.linspace(-0.7, 2.2, 59))
    frame = {"demand": "hold-down", "margin from": edge[:-1], "margin to": edge[1:]}
    return pd.DataFrame(frame | {"probability": count / n.capacity.size})


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
            "pieces": 1, "steps": 8, "mark_readings": 152, "force_readings": 8, "sections": 3, "masses": 1, "coupons": 12,
            "coupons_broken": 11,
        },
        "left_out": ["Only one law was tried.", "Creep, fatigue, ageing and fluids are not covered."],
        "cautions": ["Stretched parts store energy and recoil when they break: shield, and keep out of the line of pull."],
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
        ("not carried by the prior", "largest change of a guaranteed load when a prior's scale is halved or doubled", 0.006, 0.05),
    ]
    return [{"rule": r, "passed": True, "text": t, "number": x, "limit": limit} for r, t, x, limit in rows]


def diagnostics() -> dict[str, Any]:
    sampling = {
        "walkers": 8, "draws": 500, "warm_up": 400, "step_size": 0.31, "leapfrog_steps": 9, "failures": 0, "divergences": 0,
        "stopped": "R-hat and effective draws reached",
    }
    return {
        "rhat_max": 1.003, "ess_bulk_min": 2100.0, "ess_tail_min": 1900.0, "evaluations": 123456, "seconds": 6.1,
        "acceptance": 0.81, "chi2_per_reading": 1.02, "largest_stretch_informed": 5.58, "stretch_at_capacity": 5.07,
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
    no_chain = {k: None for k in ("rhat_max", "ess_bulk_min", "ess_tail_min", "acceptance", "sampling")}
    diagnosed = found["diagnostics"] | no_chain | {"reason": "no chain was run"}
    return withheld(found) | {"study": found["study"] | {"method": "laplace"}, "diagnostics": diagnosed}


if __name__ == "__main__":
    import sys

    print(build(Path(sys.argv[1])), LENGTH)

"""Writes a synthetic results folder for the tests of the report: invented numbers, with no study behind them."""

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
    LENGTH,
    PRIOR,
    STEPS,
    TRAVEL,
    Numbers,
    bands,
    outline,
    stress,
)
from report_results import REQUIRED, UNITS, checks, guaranteed, parameters, results, sensitivity, where


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
    rng = n.stream("posterior")
    draws = n.law | n.other
    margin = np.quantile(n.capacity, 0.1, axis=1)[:, None] / REQUIRED - 1.0
    margin = np.resize(margin, (CHAINS, DRAWS, 1))
    variables = {k: xr.Variable(("chain", "draw"), v, {"unit": UNITS.get(k, "")}) for k, v in draws.items()}
    thinned = xr.Variable(("chain", "draw", "demand"), margin[:, ::2], {"unit": ""})
    shape = (CHAINS, DRAWS)
    stats = {
        "lp": rng.normal(-210.0, 3.4, shape),
        "acceptance_rate": rng.uniform(0.6, 1.0, shape),
        "energy": rng.normal(225.0, 5.0, shape),
        "diverging": np.zeros(shape),
    }
    prior = {k: (("chain", "draw"), rng.normal(m, s, (1, 2000))) for k, (m, s) in PRIOR.items()}
    groups = {
        "posterior": xr.Dataset(variables),
        "predictions": xr.Dataset({"margin": thinned}, coords={"demand": ["hold-down"]}),
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
    rows = [
        {"parameter": k, **v, "lower": v["interval"][0], "upper": v["interval"][1]} for k, v in parameters(n).items()
    ]
    return pd.DataFrame(rows).drop(columns=["interval", "symbol"], errors="ignore")


def marks(n: Numbers) -> pd.DataFrame:
    rng = n.stream("marks")
    station = np.linspace(6.0, 114.0, 19)
    at = np.searchsorted(n.station, station)
    frames = []
    for k, step in enumerate(STEPS):
        predicted = bands(n.position[:, k, at])
        noise = rng.normal(0.0, 1.0, station.size)
        frame = {"piece": "P1", "step": step, "station [mm]": station}
        frame |= {"position read [mm]": predicted["median"] + 0.2 * noise}
        frame |= {f"position {w} [mm]": v for w, v in predicted.items()} | {"residual": noise}
        frames.append(pd.DataFrame(frame | {"file": "P1_marks.csv", "line": 2 + k * 19 + np.arange(19)}))
    return pd.concat(frames)


def readings(n: Numbers) -> pd.DataFrame:
    rng = n.stream("readings")
    force = bands(n.force)["median"]
    frame: dict[str, Any] = {"piece": "P1", "step": STEPS, "travel read [mm]": TRAVEL + rng.normal(0, 0.05, 8)}
    frame |= columns(np.resize(TRAVEL, (9, 8)) + rng.normal(0, 0.04, (9, 8)), "travel", "mm")
    frame |= {"force read [N]": force + rng.normal(0, 0.12, 8), "force standard error [N]": 0.12}
    frame |= columns(n.force, "force", "N")
    return pd.DataFrame(frame | {"file": "P1_readings.csv", "line": np.arange(2, 10)})


def sections(n: Numbers) -> pd.DataFrame:
    rng = n.stream("sections")
    station = np.array([20.0, 60.0, 100.0])
    sample = n.area[:, np.searchsorted(n.station, station)]
    middle = bands(sample)["median"]
    frame = {"piece": "P1", "station [mm]": station, "area read [mm^2]": middle * (1 + rng.normal(0, 0.01, 3))}
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
    rng = n.stream("coupons")
    elongation = np.array([3.62, 3.81, 3.93, 4.05, 4.12, 4.2, 4.28, 4.33, 4.41, 4.5, 4.58, 4.1])
    curves = np.stack([stress(1 + elongation, *(n.thinned(p)[d] for p in CENTRE)) for d in range(200)])
    read = bands(curves)["median"] * (1 + rng.normal(0, 0.03, 12))
    frame = {"coupon": np.arange(1, 13), "measure read": elongation, "elongation read": elongation}
    frame |= {"nominal stress read [MPa]": read}
    frame |= columns(curves, "nominal stress", "MPa")
    return pd.DataFrame(frame | {"broke": ["yes"] * 11 + ["no"], "line": np.arange(2, 14)})


def capacity(n: Numbers) -> pd.DataFrame:
    load = np.linspace(40.0, 260.0, 90)
    share = (n.capacity[:, :, None] < load).mean(axis=1)
    frame = {"part": "next part", "load [N]": load} | columns(share, "share failed")
    return pd.DataFrame(frame | {"predictive": share.mean(axis=0)})


def margin_distribution(n: Numbers) -> pd.DataFrame:
    count, edge = np.histogram(n.capacity / REQUIRED - 1.0, bins=np.linspace(-0.7, 2.2, 59))
    frame = {"demand": "hold-down", "margin from": edge[:-1], "margin to": edge[1:]}
    return pd.DataFrame(frame | {"probability": count / n.capacity.size})


if __name__ == "__main__":
    import sys

    print(build(Path(sys.argv[1])), LENGTH)

"""What a run leaves behind, and what it leaves alone."""

from __future__ import annotations

import shutil
import warnings
from pathlib import Path

import pytest
from job_worked import WORKED, Ran, copied

from pullback.studies.commands.group import entry
from pullback.studies.results.schema import validate

TABLES = {
    "parameters", "marks", "readings", "sections", "area", "profile", "force_travel", "law", "coupons", "capacity",
    "where", "margins", "guaranteed", "margin_distribution", "checks", "prior_sensitivity",
}  # fmt: skip


def test_every_file_is_there_and_nothing_unfinished(sampled: Ran) -> None:
    assert {p.name for p in sampled.folder.iterdir()} == {"results.json", "posterior.nc", "report.html", "tables"}
    assert {p.stem for p in (sampled.folder / "tables").iterdir()} == TABLES
    validate(sampled.results)


def test_the_posterior_opens_with_names_and_units(sampled: Ran) -> None:
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        import arviz as az

        data = az.from_netcdf(str(sampled.folder / "posterior.nc"))
    assert data.posterior["c10"].attrs["unit"] == "MPa"
    assert data.posterior["c10"].shape[0] >= 4 and data.posterior["c10"].shape[1] >= 500
    groups = {"posterior", "prior", "sample_stats", "observed_data", "posterior_predictive", "log_likelihood"}
    assert groups <= set(data.groups())
    assert list(data.predictions["demand"].values) == ["rough road", "pull-over at fitting"]


def test_quick_is_never_stated(quick: Ran) -> None:
    assert quick.code == 3
    assert quick.results["study"]["method"] == "laplace"
    assert [r["rule"] for r in quick.results["verdict"]["reasons"]] == ["sampled"]
    assert {g["met"] for m in quick.results["margins"] for g in m["guaranteed"]} == {"not shown"}
    assert "quick approximation" in (quick.folder / "report.html").read_text(encoding="utf-8").lower()


def test_quick_and_sampled_agree_about_the_law(quick: Ran, sampled: Ran) -> None:
    for name in ("c10", "c20", "c30"):
        a, b = quick.results["parameters"][name], sampled.results["parameters"][name]
        assert abs(a["median"] - b["median"]) < 0.5 * b["sd"]


def test_without_the_coupons_stress_it_is_withheld_and_says_why(tmp_path: Path) -> None:
    study = copied(tmp_path / "strap")
    rows = (study / "coupons.csv").read_text(encoding="utf-8").splitlines()
    table = [row.split(",") for row in rows if not row.startswith("#")]
    column = table[0].index("nominal stress at break [MPa]")
    kept = [",".join(c for k, c in enumerate(row) if k != column) for row in table]
    (study / "coupons.csv").write_text("\n".join(kept) + "\n", encoding="utf-8")
    text = (study / "study.toml").read_text(encoding="utf-8")
    lines = [line for line in text.splitlines() if not line.startswith(("coupon_stress", "coupon_elongation"))]
    (study / "study.toml").write_text("\n".join(lines), encoding="utf-8")
    assert entry(["run", str(study), "--quick"]) == 3
    reasons = {r["rule"]: r for r in Ran(3, study / "results").results["verdict"]["reasons"]}
    assert reasons["informed"]["number"] > reasons["informed"]["limit"] == 1.1
    assert "coupons' nominal stress" in reasons["informed"]["remedy"]


def test_the_report_is_drawn_again_from_the_folder_alone(quick: Ran, tmp_path: Path) -> None:
    folder = shutil.copytree(quick.folder, tmp_path / "results")
    before = (folder / "report.html").read_text(encoding="utf-8")
    (folder / "report.html").unlink()
    assert entry(["report", str(folder)]) == 0
    assert (folder / "report.html").read_text(encoding="utf-8") == before


def test_bad_input_leaves_earlier_results_untouched(
    quick: Ran, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    study = copied(tmp_path / "strap")
    shutil.copytree(quick.folder, study / "results")
    before = {p: p.read_bytes() for p in (study / "results").rglob("*") if p.is_file()}
    (study / "P1_readings.csv").write_text("step,travel [mm],force [N]\n1,ten,5\n", encoding="utf-8")
    assert entry(["run", str(study)]) == 2
    said = capsys.readouterr().err
    assert "P1_readings.csv" in said and "line 2" in said and "ten" in said and "Traceback" not in said
    assert {p: p.read_bytes() for p in (study / "results").rglob("*") if p.is_file()} == before


def test_results_of_another_study_are_moved_aside(quick: Ran, tmp_path: Path) -> None:
    study = copied(tmp_path / "strap")
    shutil.copytree(quick.folder, study / "results")
    text = (study / "study.toml").read_text(encoding="utf-8")
    (study / "study.toml").write_text(text.replace("seed = 31", "seed = 32"), encoding="utf-8")
    assert entry(["run", str(study), "--quick"]) == 3
    old = quick.results["study"]["sha256"][:12]
    assert (study / f"results-{old}" / "results.json").is_file()
    assert Ran(3, study / "results").results["study"]["seed"] == 32


def test_strict_tells_a_demand_that_is_not_met(monkeypatch: pytest.MonkeyPatch) -> None:
    from pullback.studies import run as job

    class Found:
        stated, met, rules, margins = True, "not met", (), ()

    done = job.Finished(Found(), Path("results"), [])  # type: ignore[arg-type]
    monkeypatch.setattr(job, "run_study", lambda *_: done)
    monkeypatch.setattr("pullback.studies.results.sentence.sentence", lambda _: "a sentence")
    assert entry(["run", str(WORKED)]) == 0
    assert entry(["run", str(WORKED), "--strict"]) == 4

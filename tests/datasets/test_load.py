"""Every data set is whole, says where it comes from, and is loaded by name."""

import shutil
from pathlib import Path

import numpy as np
import pytest

import pullback.datasets
from pullback.datasets import load, names

FOLDER = Path(pullback.datasets.__file__).parent


def test_every_folder_is_a_data_set():
    folders = {p.name for p in FOLDER.iterdir() if p.is_dir() and p.name != "__pycache__"}
    assert folders == set(names())
    assert {"treloar_uniaxial", "nist_censored_lives", "tolerance_factors", "neo_hookean_straps"} <= folders


@pytest.mark.parametrize("name", names())
def test_reads_and_names_its_source(name):
    dataset = load(name)
    for key in ("title", "source", "obtained", "uncertainty", "left_out"):
        assert len(dataset.source[key]) > 5, key
    assert set(dataset.data) == set(dataset.source["units"])
    lengths = {len(v) for v in dataset.data.values()}
    assert len(lengths) == 1 and lengths.pop() >= 3
    for column, values in dataset.data.items():
        if dataset.source["units"][column] != "text":
            assert np.all(np.isfinite(values)), column


@pytest.mark.parametrize("mode, points", [("uniaxial", 24), ("equibiaxial", 16), ("pure_shear", 13)])
def test_treloar_is_complete_and_rises(mode, points):
    data = load(f"treloar_{mode}").data
    assert len(data["stretch"]) == points
    assert np.all(np.diff(data["stretch"]) > 0) and np.all(np.diff(data["nominal stress"]) > 0)


def test_lives_are_ten_failures_and_ten_survivors():
    data = load("nist_censored_lives").data
    assert data["failed"].sum() == 10 and len(data["failed"]) == 20
    assert np.all(data["life"][data["failed"] == 0] == 500)


def test_unknown_name_names_the_nearest():
    with pytest.raises(ValueError, match="no data set named 'treloar_uniaxal'; the nearest is 'treloar_uniaxial'"):
        load("treloar_uniaxal")


def test_changed_data_are_refused(tmp_path):
    shutil.copytree(FOLDER / "ogden_1972", tmp_path / "ogden_1972")
    assert load("ogden_1972", tmp_path).data["stretch"][0] == 2.0
    with (tmp_path / "ogden_1972" / "data.csv").open("a") as file:
        file.write("7,1,1\n")
    with pytest.raises(ValueError, match=r"data\.csv: sha256 is .*, source\.toml was written for"):
        load("ogden_1972", tmp_path)


def test_column_without_unit_is_refused(tmp_path):
    shutil.copytree(FOLDER / "ogden_1972", tmp_path / "ogden_1972")
    toml = tmp_path / "ogden_1972" / "source.toml"
    toml.write_text(toml.read_text().replace("energy = ", "work = "))
    with pytest.raises(ValueError, match="gives units for"):
        load("ogden_1972", tmp_path)

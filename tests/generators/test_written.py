"""Written studies: the worked one is what the generator writes, and a seed writes the same study every time."""

import json
import tomllib

import pytest

from generators.campaign import write_study
from generators.worked import HOME, NAME, write_worked


def test_worked_study_is_what_the_generator_writes(tmp_path):
    true = write_worked(tmp_path)
    kept = HOME / NAME
    written = {p.name for p in tmp_path.iterdir()}
    assert written == {p.name for p in kept.iterdir() if p.is_file()} - {"expected.json"}
    for name in written:
        assert (tmp_path / name).read_bytes() == (kept / name).read_bytes(), name
    assert json.loads((kept / "expected.json").read_text())["truth"] == true


def test_worked_coupons_break_beyond_what_the_pull_reached():
    """Without their stress column the capacity would be an extrapolation by more than a tenth."""
    true = json.loads((HOME / NAME / "expected.json").read_text())["truth"]
    rows = (HOME / NAME / "coupons.csv").read_text().splitlines()[2:]
    weakest = 1.0 + min(float(r.split(",")[0]) for r in rows) / 100.0
    assert 3.0 < true["largest_stretch"] < 3.5
    assert weakest > 1.1 * true["largest_stretch"]


@pytest.fixture(scope="module")
def pair(tmp_path_factory):
    folder = tmp_path_factory.mktemp("pair")
    return folder, write_study(folder / "a", 1001), write_study(folder / "b", 1001, factor=0.5)


def test_a_seed_writes_the_same_readings(pair):
    folder, first, second = pair
    assert first == second
    for path in (folder / "a").glob("*.csv"):
        assert path.read_bytes() == (folder / "b" / path.name).read_bytes()


def test_factor_changes_the_gauges_alone(pair):
    one, half = (tomllib.loads((pair[0] / n / "study.toml").read_text()) for n in "ab")
    gauges, halved = one.pop("gauges"), half.pop("gauges")
    assert one == half and set(gauges) == set(halved)
    for name, value in gauges.items():
        number, unit = value.split()
        assert float(halved[name].split()[0]) == pytest.approx(0.5 * float(number), rel=1e-5)
        assert halved[name].split()[1] == unit

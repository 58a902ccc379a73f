"""Every gauge of the invented test house errs as its standard uncertainty says."""

from dataclasses import replace

import numpy as np
import pytest

from generators.measure import Pulled, _coupons, measure, pull
from generators.piece import Lot, draw_lot, draw_piece
from generators.strength import Strength
from generators.worked import WORLD

TRIES = 400


@pytest.fixture(scope="module")
def bench():
    bar = draw_piece(WORLD, Lot(0.01, WORLD.density), np.random.default_rng(0))
    pulled = pull(replace(WORLD, test=replace(WORLD.test, steps=3)), bar)
    return bar, pulled


def readings(bench, **gauges):
    """Readings in which only the named gauges err."""
    bar, pulled = bench
    quiet = dict.fromkeys(WORLD.gauges, 0.0) | gauges
    world = replace(WORLD, gauges=quiet)
    rng = np.random.default_rng(1)
    return [measure(world, bar, pulled, rng) for _ in range(TRIES)]


def true_marks(pulled: Pulled, x: np.ndarray) -> np.ndarray:
    return np.array([np.interp(WORLD.test.marks, x, p) for p in pulled.position.T]).T


def test_faultless_gauges_read_the_truth(bench):
    bar, pulled = bench
    r = readings(bench)[0]
    assert r.marks == pytest.approx(true_marks(pulled, bar.x), rel=1e-12)
    assert r.travel == pytest.approx(pulled.travel) and r.force == pytest.approx(pulled.force)
    assert r.sections.prod(axis=1) == pytest.approx(np.interp(WORLD.test.sections, bar.x, bar.area))
    assert r.mass == pytest.approx(WORLD.density * np.trapezoid(bar.area, bar.x))


def test_mark_reading_errs_each_time(bench):
    error = np.array([r.marks for r in readings(bench, mark_reading=0.2)])
    error -= true_marks(bench[1], bench[0].x)
    assert error.std() == pytest.approx(0.2, rel=0.02)
    assert abs(np.corrcoef(error[:, 5, 0], error[:, 5, 2])[0, 1]) < 0.15


def test_mark_placement_is_the_same_in_every_step(bench):
    bar, pulled = bench
    error = np.array([r.marks for r in readings(bench, mark_placement=0.1)]) - true_marks(pulled, bar.x)
    stretch = np.array([np.interp(WORLD.test.marks, bar.x, s) for s in pulled.stretch.T]).T
    station = error / stretch
    assert station.std() == pytest.approx(0.1, rel=0.03)
    assert station[..., 0] == pytest.approx(station[..., 2], abs=0.01)


def test_force_scale_is_common_and_reading_is_not(bench):
    force = bench[1].force
    ratio = np.array([r.force for r in readings(bench, force_scale=0.01)]) / force
    assert ratio.std() == pytest.approx(0.01, rel=0.1) and np.ptp(ratio, axis=1).max() < 1e-12
    error = np.array([r.force for r in readings(bench, force_reading=0.3)]) - force
    assert error.std() == pytest.approx(0.3, rel=0.05)


def test_travel_sections_and_mass(bench):
    assert np.array([r.travel for r in readings(bench, travel_reading=0.2)]).std(axis=0) == pytest.approx(
        0.2 * np.ones(3), rel=0.12
    )
    sides = np.array([r.sections for r in readings(bench, width_reading=0.05, thickness_reading=0.02)])
    assert sides.std(axis=0).mean(axis=0) == pytest.approx([0.05, 0.02], rel=0.05)
    assert np.std([r.mass for r in readings(bench, mass_reading=0.04)]) == pytest.approx(0.04, rel=0.12)


def test_coupons_lie_on_the_law_and_err(bench):
    world = replace(WORLD, test=replace(WORLD.test, clamp_scale=None))
    exact = measure(replace(world, gauges=dict.fromkeys(WORLD.gauges, 0.0)), *bench, np.random.default_rng(2))
    stretch = 1.0 + exact.coupons[:, 0]
    i = stretch**2 + 2.0 / stretch - 3.0
    t = world.theta
    yeoh = 2.0 * (stretch - stretch**-2) * (t["c10"] + 2.0 * t["c20"] * i + 3.0 * t["c30"] * i**2)
    assert exact.coupons[:, 1] == pytest.approx(yeoh, rel=1e-12)
    pairs = np.array([r.coupons for r in readings(bench, coupon_stress=0.05)])
    true = np.array([r.coupons for r in readings(bench)])
    assert np.std(pairs[..., 1] / true[..., 1]) == pytest.approx(0.05, rel=0.03)


def test_clamp_breaks_are_read_below_the_strength():
    strong = replace(WORLD, strength=Strength("elongation", "lognormal", 4.0, 1e-6, 396.0), gauges={})
    strong = replace(strong, test=replace(strong.test, coupons=500, clamp_scale=1.05))
    pairs, broke = _coupons(strong, np.random.default_rng(3))
    held = np.array(broke) == "clamp"
    assert 0.2 < held.mean() < 0.8
    assert np.all(pairs[held, 0] < 4.0) and pairs[~held, 0] == pytest.approx(4.0, rel=1e-5)


def test_lot_and_piece_scatter_as_stated():
    rng = np.random.default_rng(4)
    lots = [draw_lot(WORLD, rng) for _ in range(2000)]
    assert np.std([lot.offset for lot in lots]) == pytest.approx(0.02, rel=0.05)
    assert np.std([lot.density for lot in lots]) == pytest.approx(0.005 * WORLD.density, rel=0.05)

"""A study without a fault: what is read, what is assumed, what is left out and listed."""

import hashlib
import math

import numpy as np
import pytest
from small_study import SmallStudy

from pullback.inverse.priors import HalfNormal, LogNormal, Normal, Uniform, Varies
from pullback.studies.outline_geometry import area_at, steep_segments, volume, width_at
from pullback.studies.read import read_study
from pullback.studies.study import Gauge, OutlineTable, Rows


def test_values(small: SmallStudy) -> None:
    study = small.read()
    pull = study.pulls[0]
    assert (study.title, study.seed, study.part.length) == ("Strip, invented", 7, 100.0)
    assert math.isclose(study.part.density or 0.0, 1.1e-3)
    assert (pull.piece, pull.driven_by, pull.axis, pull.mass) == ("P1", "travel", "held end above", 2.2)
    assert pull.readings.force.tolist() == [0.0, 7.32, 12.67, 21.0]
    assert study.law.priors == {"c10": LogNormal(0.3, 2.0)}
    assert study.gauges.force_scale == Gauge(0.005, relative=True)
    assert study.strength is not None
    assert np.allclose(study.strength.coupons.elongation, [4.40, 4.65, 4.30, 4.80, 4.55])
    assert study.strength.coupons.broke.tolist() == [True, True, True, False, False]
    assert study.strength.coupons.volume.tolist() == [396.0] * 5
    assert study.demands[0].force == 20.0 and study.demands[0].factor == 1.5


def test_folder_or_file(small: SmallStudy) -> None:
    assert read_study(small.folder / "study.toml").sha256 == small.read().sha256


def test_hashes(small: SmallStudy) -> None:
    study = small.read()
    assert set(study.files) == {"study.toml", "outline.csv", "marks.csv", "readings.csv", "sections.csv", "coupons.csv"}
    for name, digest in study.files.items():
        assert hashlib.sha256((small.folder / name).read_bytes()).hexdigest() == digest
    before = study.sha256
    assert small.read().sha256 == before
    assert small.change("readings.csv", "21.00", "21.01").read().sha256 != before


def test_defaults_are_taken_and_listed(small: SmallStudy) -> None:
    small.change("study.toml", '[part.area_variation]\nlot = "2 %"\nspread = { halfnormal = ["5 %"] }\n', "")
    small.change("study.toml", 'axis = "held end above"\n', "").change("study.toml", "factor = 1.5\n", "")
    small.change("study.toml", "reliability = [0.90, 0.99]\n", "")
    study = small.read()
    assert study.area_variation.lot == study.area_variation.part_to_part == 0.02
    assert study.area_variation.spread == HalfNormal(0.05)
    assert study.area_variation.correlation_length == LogNormal(12.5, 1.5)
    assert study.law.part_to_part == HalfNormal(0.03)
    assert (study.pulls[0].axis, study.pulls[0].force_at, study.pulls[0].tared) == (
        "horizontal", "pulled end", "without piece",
    )  # fmt: skip
    assert study.gauges.density == Gauge(0.005, relative=True)
    assert study.statement.reliability == (0.90, 0.99) and study.statement.confidence == 0.95
    assert study.demands[0].factor == 1.0
    for word in (
        "area_variation.lot", "part_to_part", "spread", "correlation_length", "law.part_to_part", "axis", "force_at",
        "tared", "near_grip", "gauges.density", "reliability", "confidence", "applies_to", "factor", "max_minutes",
        "effective_samples", "travel_zero, force_zero, grip_position, position_scale, coupon_elongation, coupon_scale",
    ):  # fmt: skip
        assert any(word in sentence for sentence in study.assumed), word


def test_what_is_given_is_not_listed_as_assumed(small: SmallStudy) -> None:
    small.change("study.toml", '"0.02 g"', '"0.02 g"\ndensity = "0 %"\ntravel_zero = "0.2 mm"')
    assumed = " ".join(small.read().assumed)
    assert "area_variation.lot" not in assumed and "axis" not in assumed
    assert "gauges.density" not in assumed and "travel_zero" not in assumed


def test_absolute_density_error_becomes_relative(small: SmallStudy) -> None:
    small.change("study.toml", '"0.02 g"', '"0.02 g"\ndensity = "11 kg/m^3"')
    density = small.read().gauges.density
    assert density is not None and density.relative and math.isclose(density.value, 0.01)


def test_not_recorded(small: SmallStudy) -> None:
    small.change("study.toml", "temperature =", 'record = { machine = "bench 2" }\ntemperature =')
    missing = small.read().not_recorded
    assert missing == ["date", "load_cell", "certificate", "speed", "conditioning", "compound", "batch", "drawing"]


def test_record_takes_any_key(small: SmallStudy) -> None:
    small.change("study.toml", "[record]", "[record]\nwitness = 3\nday = 2026-03-02")
    assert small.read().record == {"witness": "3", "day": "2026-03-02", "laboratory": "our own"}


def test_marks_near_the_grips_are_left_out_and_listed(small: SmallStudy) -> None:
    study = small.read()
    marks = study.pulls[0].marks
    assert marks is not None and set(marks.station) == {20.0, 40.0, 60.0, 80.0}
    assert [s for s in study.excluded if "marks.csv: 3 mark readings left out" in s and "stations 5 mm" in s]
    small.change("study.toml", "temperature =", 'near_grip = "keep"\ntemperature =')
    kept = small.read()
    assert kept.pulls[0].marks is not None and 5.0 in kept.pulls[0].marks.station and not kept.excluded


def test_marks_near_a_steep_slope_are_left_out(small: SmallStudy) -> None:
    """From 30 to 40 mm the width falls by 3 in 10 mm, steeper than 1:4: out are 20 + 10 < X < 40 + 7 about it."""
    small.write("outline.csv", "station [mm],width [mm],thickness [mm]\n0,10,2\n30,10,2\n40,7,2\n100,7,2\n")
    small.write("marks.csv", "station [mm],1 [mm]\n19,24\n21,27\n35,44\n46,58\n48,60\n92,115\n94,118\n")
    marks = small.read().pulls[0].marks
    assert marks is not None and marks.station.tolist() == [19.0, 48.0, 92.0]
    small.change("outline.csv", "40,7,2", "40,7.6,2").change("outline.csv", "100,7,2", "100,7.6,2")
    gentle = small.read().pulls[0].marks
    assert gentle is not None and gentle.station.tolist() == [19.0, 21.0, 35.0, 46.0, 48.0, 92.0]


def test_unknown_columns_are_listed_and_not_read(small: SmallStudy) -> None:
    small.write("sections.csv", "station [mm],area [mm^2],remark\n30,20.2,ok\n70,19.9,\n")
    small.write("coupons.csv", small.text("coupons.csv").replace("broke\n", "broke,speed\n").replace("yes", "yes,500"))
    small.write("coupons.csv", small.text("coupons.csv").replace("no\n", "no,500\n").replace("clamp\n", "clamp,500\n"))
    excluded = small.read().excluded
    assert "sections.csv: not known and not read: column remark" in excluded
    assert "coupons.csv: column speed is not computed with" in excluded


def test_steps_without_a_partner_are_warned_of(small: SmallStudy) -> None:
    small.change("readings.csv", "3,100,21.00", "4,100,21.00")
    assert small.read().warnings == [
        "marks.csv: step 3 without a row in readings.csv",
        "readings.csv: step 0, 4 without marks in marks.csv",
    ]


def test_a_reading_may_be_missing_where_there_are_marks(small: SmallStudy) -> None:
    small.change("readings.csv", "2,50,12.67", "2,-,12.67").change("readings.csv", "3,100,21.00", "3,100,")
    readings = small.read().pulls[0].readings
    assert np.isnan(readings.travel[2]) and np.isnan(readings.force[3])


def test_gauges_of_the_pull_go_before_the_common_ones(small: SmallStudy) -> None:
    small.change("study.toml", "temperature =", 'gauges = { force_reading = "0.5 N" }\ntemperature =')
    gauges = small.read().gauges
    assert gauges.force_reading == Gauge(0.5) and gauges.mark_reading == Gauge(0.1)


@pytest.mark.parametrize(
    ("text", "gauge"),
    [
        ('"0.2 N"', Gauge(0.2)),
        ('"0.1 lbf"', Gauge(0.44482216152605)),
        ('{ expanded = ["0.4 N", 2] }', Gauge(0.2)),
        ('{ resolution = "0.01 N" }', Gauge(0.01 / math.sqrt(12.0))),  # JCGM 100:2008, 4.3.7
    ],
)
def test_forms_of_a_gauge(small: SmallStudy, text: str, gauge: Gauge) -> None:
    read = small.change("study.toml", '"0.02 N"', text).read().gauges.force_reading
    assert read is not None and math.isclose(read.value, gauge.value) and not read.relative


def test_relative_forms_of_a_gauge(small: SmallStudy) -> None:
    read = small.change("study.toml", 'force_scale = "0.5 %"', 'force_scale = { expanded = ["1 %", 2] }').read().gauges
    assert read.force_scale == Gauge(0.005, relative=True)


@pytest.mark.parametrize(
    ("text", "force"),
    [
        ('{ normal = ["60 N", "4 N"] }', Normal(60.0, 4.0)),
        ('{ lognormal = ["60 N", 1.1] }', LogNormal(60.0, 1.1)),
        ('{ uniform = ["50 N", "70 N"] }', Uniform(50.0, 70.0)),
        ('{ halfnormal = ["60 N"] }', HalfNormal(60.0)),
        ('{ varies = { normal = ["60 N", "4 N"] } }', Varies(Normal(60.0, 4.0))),
    ],
)
def test_forms_of_a_quantity(small: SmallStudy, text: str, force: object) -> None:
    assert small.change("study.toml", '"20 N"', text).read().demands[0].force == force


def test_priors_of_laws_and_strength(small: SmallStudy) -> None:
    small.change("study.toml", '["yeoh"]', '["ogden-2"]').change("study.toml", "yeoh.c10", "ogden-2.mu1")
    small.change(
        "study.toml", "[[pull]]",
        'prior.ogden-2.mu2 = { lognormal = ["-10 kPa", 3] }\nprior.ogden-2.alpha2 = { normal = [-2, 0.5] }\n[[pull]]',
    )  # fmt: skip
    small.change("study.toml", "coupon_volume", 'prior = { scale = { lognormal = ["450 %", 1.2] } }\ncoupon_volume')
    study = small.read()
    assert study.law.priors == {"mu1": LogNormal(0.3, 2.0), "mu2": LogNormal(-0.01, 3.0), "alpha2": Normal(-2.0, 0.5)}
    assert study.strength is not None and study.strength.scale_prior == LogNormal(4.5, 1.2)


def test_hardness(small: SmallStudy) -> None:
    part = small.change("study.toml", "density =", 'hardness = "55 Shore A"\nrubber = "NR"\ndensity =').read().part
    assert (part.hardness, part.hardness_scale, part.rubber) == (55.0, "Shore A", "NR")


def test_errors_of_sections_from_width_and_thickness(small: SmallStudy) -> None:
    small.write("sections.csv", "station [mm],width [mm],thickness [mm]\n30,10,2\n")
    small.change("study.toml", 'section_reading = "1 %"', 'width_reading = "0.1 mm"\nthickness_reading = "0.04 mm"')
    sections = small.read().pulls[0].sections
    assert sections is not None and sections.area.tolist() == [20.0]
    assert np.allclose(sections.relative_error, math.hypot(0.01, 0.02))


def test_errors_of_sections_from_a_diameter(small: SmallStudy) -> None:
    small.write("sections.csv", "station [mm],diameter [mm]\n30,10\n")
    small.change("study.toml", 'section_reading = "1 %"', 'width_reading = "0.1 mm"')
    sections = small.read().pulls[0].sections
    assert sections is not None and np.allclose(sections.area, 25.0 * math.pi)
    assert np.allclose(sections.relative_error, 0.02)


def test_coupons_without_broke_all_broke(small: SmallStudy) -> None:
    small.write("coupons.csv", "elongation at break [%],volume [mm^3]\n440,300\n465,310\n430,320\n")
    study = small.change("study.toml", 'coupon_stress = "3 %"\n', "").read()
    assert study.strength is not None and study.strength.coupons.broke.all()
    assert study.strength.coupons.volume.tolist() == [300.0, 310.0, 320.0]
    assert np.isnan(study.strength.coupons.stress).all()
    assert "coupons.csv has no column broke: every coupon broke in its gauge" in study.assumed


def test_outline_rows_in_any_order(small: SmallStudy) -> None:
    small.write("outline.csv", "station [mm],diameter [mm]\n100,8\n0,10\n50,8\n")
    outline = small.read().part.outline
    assert outline.station.tolist() == [0.0, 50.0, 100.0] and outline.thickness is None
    assert outline.rows.line.tolist() == [3, 4, 2]
    assert np.allclose(area_at(outline, np.array([25.0])), 0.25 * math.pi * 81.0)


def test_geometry_of_an_outline() -> None:
    station, rows = np.array([0.0, 10.0, 30.0]), Rows("outline.csv", np.array([2, 3, 4]))
    both = OutlineTable(station, np.array([8.0, 4.0, 4.0]), np.array([2.0, 1.0, 1.0]), None, rows)
    # by hand: integral of (8 - 0.4 x)(2 - 0.1 x) over 0…10 is 280/3, then 20 · 4
    assert math.isclose(volume(both), 280.0 / 3.0 + 80.0)
    assert steep_segments(both) == [(0.0, 10.0)]
    area = OutlineTable(station, None, None, np.array([16.0, 9.0, 9.0]), rows)
    assert np.allclose(width_at(area, np.array([0.0, 20.0])), [4.0, 3.0])
    assert steep_segments(area) == []

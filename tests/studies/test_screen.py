"""Each finding is made where the data are made suspicious, names file and row, and is silent on good data."""

import pytest
from small_study import SmallStudy

from pullback.studies.screen.findings import screen

KEEP = ("study.toml", "temperature =", 'near_grip = "keep"\ntemperature =')


def test_good_data_are_not_suspicious(small: SmallStudy) -> None:
    assert screen(small.change(*KEEP).read()) == []


# file, what stands there, what is written instead, words of the one finding
SUSPICIOUS = [
    (
        "marks.csv",
        "2,40,60\n2,60,90",
        "2,40,90\n2,60,60",
        "marks.csv, line 10",
        'in step "2" the mark of station 60 mm',
    ),
    ("readings.csv", "3,100,21.00", "3,100,12.00", "readings.csv, line 5: force falls from 12.67 to 12 N", "a slip"),
    ("marks.csv", "1,40,50\n", "1,40,42\n", "marks.csv, line 4", "between stations 20 and 40 mm is 0.850, below 1"),
    ("sections.csv", "30,20.2", "30,23.2", "sections.csv, line 2: the section at 30 mm is 23.2 mm²", "+16 %"),
    ("sections.csv", "30,20.2", "30,16.8", "sections.csv, line 2: the section at 30 mm is 16.8 mm²", "-16 %"),
    ("study.toml", '"2.20 g"', '"2.46 g"', "mass of P1: 2.46 g between the grips is +12 %", "mass_outside"),
    ("study.toml", '"2.20 g"', '"2.20 g"\nmass_outside = "0.3 g"', "mass of P1: 1.9 g between the grips is -14 %"),
    (
        "readings.csv",
        "force [N]",
        "force [kN]",
        "readings.csv, line 5: 21000 N",
        "it would fit if the heading's kN were N",
    ),
    ("readings.csv", "3,100,21.00", "3,100,0.021", "readings.csv, line 5: 0.021 N", "would fit if the values were kN"),
    ("readings.csv", "3,100,21.00", "3,3.937,21.00", "readings.csv, line 5", "Look at the units: inches against mm?"),
    (
        "readings.csv",
        "3,100,21.00",
        "3,1150,241.00",
        "readings.csv, line 5: a travel of 1150 mm",
        "12.5 times its length",
    ),
    ("coupons.csv", "440,7.1,yes", "440,7.1,yes\n" * 9 + "4.4,7.1,yes\n" * 20, "elongation at break is about 4.4 %"),
    ("readings.csv", "travel [mm]", "travel [in]", "readings.csv, line 5", "Look at the units: mm against inches?"),
    ("readings.csv", "travel [mm]", "travel [cm]", "readings.csv, line 5", "Look at the units: mm against cm?"),
    (
        "coupons.csv",
        "stress at break [MPa]",
        "stress at break [psi]",
        "coupons.csv, line 2 and on: nominal stress",
        "MPa",
    ),
]

# just within what the gauges or the limits allow
INNOCENT = [
    ("readings.csv", "3,100,21.00", "3,100,12.60"),  # lower by 0.07 N; 3 sigma of a difference is 0.085 N
    ("marks.csv", "1,40,50\n", "1,40,44.5\n"),  # shorter by 0.5 mm; 3 sigma of a distance is 0.6 mm
    ("sections.csv", "30,20.2", "30,22.8"),
    ("study.toml", '"2.20 g"', '"2.40 g"'),
]


@pytest.mark.parametrize("case", SUSPICIOUS, ids=[f"{c[0]}: {c[2]}" for c in SUSPICIOUS])
def test_found(small: SmallStudy, case: tuple[str, ...]) -> None:
    name, old, new, *words = case
    small.change("study.toml", 'axis = "held end above"', 'axis = "horizontal"').change(*KEEP)
    found = screen(small.change(name, old, new).read())
    hits = [sentence for sentence in found if all(word in sentence for word in words)]
    assert len(hits) == 1, found


@pytest.mark.parametrize("case", INNOCENT, ids=[f"{c[0]}: {c[2]}" for c in INNOCENT])
def test_not_found_within_the_limits(small: SmallStudy, case: tuple[str, str, str]) -> None:
    small.change(*KEEP)
    assert screen(small.change(*case).read()) == []


def test_marks_of_an_unloaded_step_may_lie_closer(small: SmallStudy) -> None:
    small.change(*KEEP).write("marks.csv", small.text("marks.csv") + "0,20,21\n0,40,38\n0,60,60\n")
    assert screen(small.read()) == []
    small.change("readings.csv", "0,0,0.00", "0,5,3.00")
    assert ['in step "0"' in sentence for sentence in screen(small.read())] == [True]

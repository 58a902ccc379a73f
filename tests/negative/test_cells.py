"""Cells of tables: not a number, not finite, missing, negative, twice, outside; columns absent or without a unit."""

import pytest
from small_study import SmallStudy

# file, what stands there, what is written instead, words of the fault
CHANGED = [
    # not a number, not finite
    ("outline.csv", "50,10,2", "50,ten,2", 'outline.csv, line 3, column width: read "ten"; expected a number'),
    ("marks.csv", "1,20,25\n", "1,20,2 5\n", 'marks.csv, line 3, column position: read "2 5"; expected a number'),
    ("marks.csv", "1,20,25\n", "1,20,1_000\n", 'line 3, column position: read "1_000"; expected a number'),
    ("marks.csv", "1,20,25\n", "1,20,25 mm\n", 'line 3, column position: read "25 mm"; expected a number'),
    (
        "readings.csv",
        "1,25,7.32",
        "1,25,inf",
        'readings.csv, line 3, column force: read "inf"; expected a finite number',
    ),
    ("readings.csv", "1,25,7.32", "1,1e999,7.32", 'line 3, column travel: read "1e999"; expected a finite number'),
    ("sections.csv", "30,20.2", "30,x", 'sections.csv, line 2, column area: read "x"; expected a number'),
    ("coupons.csv", "440,7.1", "440 %,7.1", 'coupons.csv, line 2, column elongation at break: read "440 %"'),
    ("sections.csv", "30,20.2", "30,1e-300", 'column area: read "1e-300"; expected a finite number of usual size'),
    # missing where needed
    (
        "outline.csv",
        "50,10,2",
        "50,,2",
        'outline.csv, line 3, column width: read a missing cell (""); expected a number',
    ),
    ("outline.csv", "50,10,2", "n/a,10,2", 'outline.csv, line 3, column station: read a missing cell ("n/a")'),
    ("marks.csv", "1,20,25\n", "1,-,25\n", 'marks.csv, line 3, column station: read a missing cell ("-")'),
    ("marks.csv", "1,20,25\n", ",20,25\n", "marks.csv, line 3, column step: read a missing cell; expected a label"),
    (
        "readings.csv",
        "0,0,0.00",
        "0,0,NaN",
        "line 2, column force: read a missing cell; expected a number, as no marks",
    ),
    (
        "readings.csv",
        "0,0,0.00",
        "0,,0.00",
        "line 2, column travel: read a missing cell; expected a number, as no marks",
    ),
    ("sections.csv", "30,20.2", "30,", "sections.csv, line 2, column area: read a missing cell"),
    ("coupons.csv", "440,7.1", ",7.1", "coupons.csv, line 2, column elongation at break: read a missing cell"),
    ("coupons.csv", "7.1,yes", "7.1,", "coupons.csv, line 2, column broke: read a missing cell"),
    # negative or zero where positive is needed
    ("outline.csv", "50,10,2", "50,-10,2", 'outline.csv, line 3, column width: read "-10"; expected more than 0'),
    ("outline.csv", "50,10,2", "50,10,0", 'outline.csv, line 3, column thickness: read "0"; expected more than 0'),
    ("sections.csv", "30,20.2", "30,-20.2", 'sections.csv, line 2, column area: read "-20.2"; expected more than 0'),
    ("coupons.csv", "440,7.1", "-440,7.1", 'coupons.csv, line 2, column elongation at break: read "-440"'),
    ("coupons.csv", "440,7.1", "440,-7.1", 'coupons.csv, line 2, column nominal stress at break: read "-7.1"'),
    (
        "readings.csv",
        "1,25,7.32",
        "1,25,-7.32",
        "readings.csv, line 3, column force: read -7.32 N; expected a value of zero",
    ),
    (
        "readings.csv",
        "1,25,7.32",
        "1,-25,7.32",
        "readings.csv, line 3, column travel: read -25 mm; expected a value of zero",
    ),
    # twice
    (
        "outline.csv",
        "50,10,2",
        "0,10,2",
        "outline.csv, line 3, column station: read 0 mm twice; expected each station once",
    ),
    ("marks.csv", "1,20,25\n", "1,5,25\n", 'marks.csv, line 3, column station: read 5 mm twice in step "1"'),
    ("readings.csv", "1,25,7.32", "0,25,7.32", 'readings.csv, line 3, column step: read the step "0" twice'),
    ("marks.csv", "station [mm]", "position [mm]", 'marks.csv, line 1, position: read the heading "position" twice'),
    # outside
    (
        "outline.csv",
        "100,10,2",
        "101,10,2",
        "outline.csv, line 4, column station: read 101 mm; expected a station within",
    ),
    (
        "marks.csv",
        "1,20,25\n",
        "1,120,125\n",
        "marks.csv, line 3, column station: read 120 mm; expected a station within 0…100",
    ),
    (
        "marks.csv",
        "1,20,25\n",
        "1,-20,25\n",
        "marks.csv, line 3, column station: read -20 mm; expected a station within",
    ),
    (
        "sections.csv",
        "30,20.2",
        "300,20.2",
        "sections.csv, line 2, column station: read 300 mm; expected a station within",
    ),
    (
        "outline.csv",
        "100,10,2",
        "90,10,2",
        "outline.csv, line 4, column station: read stations from 0 to 90 mm; expected an",
    ),
    ("outline.csv", "0,10,2\n", "10,10,2\n", "outline.csv, line 2, column station: read stations from 10 to 100 mm"),
    # words
    (
        "coupons.csv",
        "7.1,yes",
        "7.1,maybe",
        'coupons.csv, line 2, column broke: read "maybe"; expected yes, no or clamp',
    ),
    # columns and units
    (
        "readings.csv",
        "force [N]",
        "force",
        "readings.csv, line 1, column force: read no unit; expected a unit of force",
    ),
    ("readings.csv", "force [N]", "force [mm]", 'column force: read force [mm]; expected a unit of force, not "mm"'),
    ("readings.csv", "force [N]", "force [lb]", "column force: read force [lb]", "Write [lbf]."),
    (
        "readings.csv",
        "force [N]",
        "load [N]",
        "readings.csv, line 1, column force: read the columns step,",
        'a column "force"',
    ),
    ("readings.csv", "travel [mm]", "travle [mm]", "column travel", 'Is "travle" meant?'),
    ("marks.csv", "step,", "stage,", "marks.csv, line 1, column step: read the columns stage,"),
    ("outline.csv", "thickness [mm]", "depth [mm]", "outline.csv, line 1, column thickness", 'a column "thickness"'),
    (
        "outline.csv",
        "thickness [mm]",
        "area [mm^2]",
        "outline.csv, line 1: read the columns station [mm], width [mm], area",
    ),
    ("sections.csv", "area [mm^2]", "girth [mm]", "sections.csv, line 1: read the columns", "or diameter, or area"),
    (
        "coupons.csv",
        "elongation at break",
        "stretch at break",
        "coupons.csv, line 1, column elongation at break: read the",
    ),
    (
        "sections.csv",
        "station [mm],area [mm^2]\n",
        "",
        "sections.csv, line 1: read a row of numbers; expected headings",
    ),
    ("sections.csv", "area [mm^2]\n", "area [mm^2],\n", "sections.csv, line 2: read 2 cells; expected 3"),
    (
        "sections.csv",
        "area [mm^2]\n30,20.2\n70,19.9",
        "area [mm^2],\n30,20.2,1\n70,19.9,2",
        "column 3: read no heading",
    ),
    ("marks.csv", "step,station [mm],position [mm]", "station [mm],,", "marks.csv, line 1, column 2: read no heading"),
    # rows that do not fit
    ("marks.csv", "1,20,25\n", "1,20,25,7\n", "marks.csv, line 3: read 4 cells; expected 3, one for each heading"),
    ("marks.csv", "1,20,25\n", "1,20,25,5\n", "With decimal commas, put semicolons between columns"),
    ("marks.csv", "1,20,25\n", '1,20,"25\n', "marks.csv, line 3: read ", "expected quotation marks in pairs"),
    (
        "marks.csv",
        "1,20,25\n",
        '1,20,"25,0"\n',
        "marks.csv, line 3: read a decimal comma in line 3, a decimal point in line 2",
    ),
]


def says(text: str, *words: str) -> None:
    for word in words:
        assert word in text, f"{word!r} is not in:\n{text}"


@pytest.mark.parametrize("case", CHANGED, ids=[f"{c[0]}: {c[2]!r}" for c in CHANGED])
def test_changed(small: SmallStudy, case: tuple[str, ...]) -> None:
    name, old, new, *words = case
    says(small.change(name, old, new).faults(), *words)


def test_position_far_below_the_grip(small: SmallStudy) -> None:
    small.change("study.toml", "temperature =", 'near_grip = "keep"\ntemperature =')
    small.change("marks.csv", "1,5,6.25", "1,5,-6.25")
    says(small.faults(), "marks.csv, line 2, column position: read -6.25 mm; expected a value of zero or above")


def test_a_force_below_zero_by_no_more_than_its_error_is_read(small: SmallStudy) -> None:
    small.change("readings.csv", "0,0,0.00", "0,0,-0.01")
    assert small.read().pulls[0].readings.force[0] == -0.01


def test_too_few_failures(small: SmallStudy) -> None:
    small.change("coupons.csv", "430,6.8,yes", "440,6.8,yes")
    says(small.faults(), "coupons.csv: read 2 distinct failures; expected at least 3, or a prior on the modulus")
    small.change("study.toml", "coupon_volume", "prior = { modulus = { lognormal = [12.0, 1.3] } }\ncoupon_volume")
    assert small.read().strength is not None


def test_no_mark_left_away_from_the_grips(small: SmallStudy) -> None:
    small.write("marks.csv", "step,station [mm],position [mm]\n1,5,6.25\n1,96,120\n")
    says(small.faults(), "marks.csv: read 2 readings, all within one local width", 'Set near_grip = "keep"')


def test_piece_that_the_table_does_not_have(small: SmallStudy) -> None:
    small.write("sections.csv", "piece,station [mm],area [mm^2]\nP2,30,20\nP3,30,20\n")
    says(small.faults(), 'column piece: read the pieces P2, P3; expected rows of the piece "P1"')


def test_travel_column_is_needed_when_driven_by_travel(small: SmallStudy) -> None:
    small.write("readings.csv", "step,force [N]\n1,7.32\n2,12.67\n")
    says(small.faults(), "readings.csv, line 1, column travel: read the columns step, force [N]")
    small.change("study.toml", '"travel"', '"force"')
    assert small.read().pulls[0].driven_by == "force"


def test_many_faults_of_a_kind_are_cut(small: SmallStudy) -> None:
    rows = "".join(f"1,{x},x\n" for x in range(1, 41))
    text = small.write("marks.csv", "step,station [mm],position [mm]\n" + rows).faults()
    assert len(text.splitlines()) == 11
    says(text, "30 more faults of the kind")

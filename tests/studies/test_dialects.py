"""The same table in several dialects of CSV reads as the same numbers."""

import numpy as np
import pytest
from small_study import SmallStudy

from pullback.studies.study import Study
from pullback.studies.tables.dialect import read_table

PLAIN = "step,travel [mm],force [N]\n1,25.5,7.32\n2,50.0,-\n"
SAME = {
    "semicolon": "step;travel [mm];force [N]\n1;25.5;7.32\n2;50.0;\n",
    "decimal comma": "step;travel [mm];force [N]\n1;25,5;7,32\n2;50,0;n/a\n",
    "tab": "step\ttravel [mm]\tforce [N]\n1\t25,5\t7,32\n2\t50,0\tNaN\n",
    "quoted decimal comma": 'step,travel [mm],force [N]\n1,"25,5","7,32"\n2,"50,0",\n',
    "round brackets": "step,travel (mm),force (N)\n1,25.5,7.32\n2,50.0,N/A\n",
    "units row": "step,travel,force\n,mm,N\n1,25.5,7.32\n2,50.0,nan\n",
    "units row in brackets": "step,travel,force\n-,[mm],[N]\n1,25.5,7.32\n2,50.0,-\n",
    "upper case and blanks": " Step , TRAVEL [mm] , Force[N]\n 1 , 25.5 , 7.32 \n 2, 50.0 , \n",
    "comments and blank lines": "# a pull\n\nstep,travel [mm],force [N] # read\n\n1,25.5,7.32 # 1\n#2,1,1\n2,50.0,\n\n",
    "CRLF": PLAIN.replace("\n", "\r\n"),
    "byte-order mark": "\ufeff" + PLAIN,
    "trailing delimiters": "step,travel [mm],force [N],\n1,25.5,7.32,\n2,50.0,-,,\n",
    "exponents": "step,travel [mm],force [N]\n1,2.55e1,732e-2\n2,+50,\n",
    "quoted": '"step","travel [mm]","force [N]"\n"1","25.5","7.32"\n"2","50.0",""\n',
    "inch": "step,travel [in],force [lbf]\n1,1.00393700787402,1.64560146235892\n2,1.96850393700787,\n",
    "cm and kgf": "step;travel [cm];force [kgf]\n1;2,55;0,746432268103787\n2;5;\n",
    "other order": "force [N],step,travel [mm]\n7.32,1,25.5\n-,2,50.0\n",
}


@pytest.mark.parametrize("dialect", SAME)
def test_same_numbers(dialect: str) -> None:
    table = read_table(SAME[dialect].removeprefix("\ufeff"), "readings.csv")
    assert table.labels("step") == ["1", "2"]
    assert np.allclose(table.numbers("travel", "length"), [25.5, 50.0], rtol=1e-12)
    assert np.allclose(table.numbers("force", "force", missing=True), [7.32, np.nan], rtol=1e-12, equal_nan=True)


def test_byte_order_mark_in_the_file(small: SmallStudy) -> None:
    small.write("readings.csv", b"\xef\xbb\xbf" + small.text("readings.csv").encode())
    assert small.read().pulls[0].readings.step == ("0", "1", "2", "3")


def test_lines_are_those_of_the_file() -> None:
    table = read_table(SAME["comments and blank lines"], "readings.csv")
    assert table.line.tolist() == [5, 7]
    assert table.header_line == 3


def test_one_column_with_decimal_comma() -> None:
    table = read_table("elongation at break [%]\n421,7\n391,6\n", "coupons.csv")
    assert np.allclose(table.numbers("elongation at break", "relative"), [4.217, 3.916])


def test_a_comment_sign_within_quotes_is_kept() -> None:
    assert read_table('step,force [N]\n"#1",3\n', "readings.csv").labels("step") == ["#1"]


def _same_marks(a: Study, b: Study) -> None:
    first, second = a.pulls[0].marks, b.pulls[0].marks
    assert first is not None and second is not None
    key = lambda m: sorted(zip(m.step, m.station, m.position, strict=True))  # noqa: E731
    for x, y in zip(key(first), key(second), strict=True):
        assert x[0] == y[0] and np.allclose(x[1:], y[1:], rtol=1e-12)


@pytest.mark.parametrize("heading", ["station [mm],1 [mm],2 [mm],3 [mm]", "station,1,2,3\nmm,mm,mm,mm"])
def test_wide_marks(small: SmallStudy, heading: str) -> None:
    long = small.read()
    rows = "".join(f"{x},{1.25 * x},{1.5 * x},{2 * x}\n" for x in (5, 20, 40, 60, 80))
    small.write("marks.csv", f"{heading}\n{rows}")
    _same_marks(long, small.read())


def test_wide_marks_keep_the_line_of_each_reading_and_drop_missing_ones(small: SmallStudy) -> None:
    small.write("marks.csv", "station [mm],1 [mm],2 [mm]\n20,25,30\n40,-,60\n60,75,90\n")
    marks = small.read().pulls[0].marks
    assert marks is not None
    assert list(zip(marks.step, marks.station, marks.rows.line, strict=True)) == [
        ("1", 20.0, 2), ("1", 60.0, 4), ("2", 20.0, 2), ("2", 40.0, 3), ("2", 60.0, 4),
    ]  # fmt: skip


def test_piece_column_picks_the_rows(small: SmallStudy) -> None:
    one = small.read()
    lines = small.text("marks.csv").splitlines()
    both = [f"piece,{lines[0]}"] + [f"P2,{line}" for line in lines[1:4]] + [f"P1,{line}" for line in lines[1:]]
    small.write("marks.csv", "\n".join(both))
    _same_marks(one, small.read())


def test_us_units_throughout(small: SmallStudy) -> None:
    """The small study in inches, pounds and pounds-force reads as the same numbers."""
    metric = small.read()
    inch, lbf = 25.4, 4.4482216152605
    for old, new in (
        ('"100 mm"', f'"{100 / inch!r} in"'), ('"1100 kg/m^3"', f'"{1100 / 27679.904710203125!r} lb/in^3"'),
        ('"2.20 g"', f'"{2.2 / 28.349523125!r} oz"'), ('"20 N"', f'"{20 / lbf!r} lbf"'), ('"23 degC"', '"73.4 degF"'),
        ('"396 mm^3"', f'"{396 / inch**3!r} in^3"'), ('"0.3 MPa"', f'"{0.3 / (lbf / inch**2)!r} psi"'),
    ):  # fmt: skip
        small.change("study.toml", old, new)
    outline = "".join(f"{x / inch!r},{10 / inch!r},{2 / inch!r}\n" for x in (0, 50, 100))
    small.write("outline.csv", "station [in],width [in],thickness [in]\n" + outline)
    steps = ((0, 0, 0), (1, 25, 7.32), (2, 50, 12.67), (3, 100, 21))
    readings = "".join(f"{step},{travel / inch!r},{force / lbf!r}\n" for step, travel, force in steps)
    small.write("readings.csv", "step,travel [in],force [lbf]\n" + readings)
    us = small.read()
    for a, b in (
        (metric.part.length, us.part.length), (metric.part.density, us.part.density),
        (metric.pulls[0].mass, us.pulls[0].mass), (metric.demands[0].force, us.demands[0].force),
        (metric.pulls[0].temperature, us.pulls[0].temperature),
        (metric.part.outline.width, us.part.outline.width),
        (metric.pulls[0].readings.force, us.pulls[0].readings.force),
        (metric.pulls[0].readings.travel, us.pulls[0].readings.travel),
        (metric.law.priors["c10"].median, us.law.priors["c10"].median),  # type: ignore[union-attr]
    ):  # fmt: skip
        assert np.allclose(a, b, rtol=1e-10)  # type: ignore[arg-type]

"""A small study that reads without a fault, for tests to break: a uniform strip, 100 mm by 10 mm by 2 mm, which obeys
P = 0.6 MPa (stretch - stretch^-2) exactly and is pulled horizontally to stretches of 1, 1.25, 1.5 and 2.
"""

from __future__ import annotations

from pathlib import Path

from pullback.studies.faults import BadInput
from pullback.studies.read import read_study
from pullback.studies.study import Study

STUDY = """\
[study]
title = "Strip, invented"
seed = 7

[record]
laboratory = "our own"

[part]
length = "100 mm"
outline = "outline.csv"
density = "1100 kg/m^3"

[part.area_variation]
lot = "2 %"
spread = { halfnormal = ["5 %"] }

[law]
names = ["yeoh"]
prior.yeoh.c10 = { lognormal = ["0.3 MPa", 2.0] }

[[pull]]
piece = "P1"
driven_by = "travel"
axis = "held end above"
marks = "marks.csv"
readings = "readings.csv"
sections = "sections.csv"
mass = "2.20 g"
temperature = "23 degC"

[gauges]
mark_reading = "0.1 mm"
mark_placement = "0.1 mm"
travel_reading = "0.05 mm"
force_reading = "0.02 N"
force_scale = "0.5 %"
section_reading = "1 %"
mass_reading = "0.02 g"
coupon_stress = "3 %"

[strength]
criterion = "elongation"
scatter = "weibull"
coupons = "coupons.csv"
coupon_volume = "396 mm^3"

[[demand]]
name = "hold"
force = "20 N"
factor = 1.5

[statement]
reliability = [0.90, 0.99]
"""
OUTLINE = "station [mm],width [mm],thickness [mm]\n0,10,2\n50,10,2\n100,10,2\n"
MARKS = "step,station [mm],position [mm]\n" + "".join(
    f"{step},{x},{x * stretch:g}\n" for step, stretch in ((1, 1.25), (2, 1.5), (3, 2.0)) for x in (5, 20, 40, 60, 80)
)
READINGS = "step,travel [mm],force [N]\n0,0,0.00\n1,25,7.32\n2,50,12.67\n3,100,21.00\n"
SECTIONS = "station [mm],area [mm^2]\n30,20.2\n70,19.9\n"
COUPONS = (
    "elongation at break [%],nominal stress at break [MPa],broke\n"
    "440,7.1,yes\n465,7.9,yes\n430,6.8,yes\n480,8.4,no\n455,7.6,clamp\n"
)


class SmallStudy:
    """The study's folder; `change` replaces one piece of text in a file, which must be there."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        files = {"study.toml": STUDY, "outline.csv": OUTLINE, "marks.csv": MARKS, "readings.csv": READINGS}
        for name, text in {**files, "sections.csv": SECTIONS, "coupons.csv": COUPONS}.items():
            self.write(name, text)

    def write(self, name: str, text: str | bytes) -> SmallStudy:
        """Write a file whole."""
        (self.folder / name).write_bytes(text if isinstance(text, bytes) else text.encode())
        return self

    def text(self, name: str) -> str:
        """A file's text."""
        return (self.folder / name).read_text()

    def change(self, name: str, old: str, new: str) -> SmallStudy:
        """Replace the first `old` in a file."""
        text = self.text(name)
        assert old in text, f"{old!r} is not in {name}"
        return self.write(name, text.replace(old, new, 1))

    def read(self) -> Study:
        """Read it."""
        return read_study(self.folder)

    def faults(self) -> str:
        """What reading it complains of; fails where it complains of nothing."""
        try:
            self.read()
        except BadInput as bad:
            return str(bad)
        raise AssertionError("the study was read without a fault")

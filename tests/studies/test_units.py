"""Units: factors by their definitions, and the right spelling in every fault.

Sources: the international yard and pound of 1959 (in = 25.4 mm, lb = 453.59237 g), standard gravity 9.80665 m/s²
(3rd CGPM, 1901), both in NIST SP 811 (2008), appendix B.
"""

import math

import pytest

from pullback.studies.faults import BadInput
from pullback.studies.units import DIMENSIONS, conversion, quantity, spellings

POUND, INCH, FREE_FALL = 453.59237, 25.4, 9.80665
LBF = POUND * 1e-3 * FREE_FALL

READ = [
    ("120 mm", "length", 120.0),
    ("12cm", "length", 120.0),
    ("-3.5e-1 m", "length", -350.0),
    ("4.5 in", "length", 4.5 * INCH),
    ("1 ft", "length", 12 * INCH),
    ("50 um", "length", 0.05),
    ("2 in2", "area", 2 * INCH**2),
    ("3 cm²", "area", 300.0),
    ("0.5 in^3", "volume", 0.5 * INCH**3),
    ("2 mm*cm*m", "volume", 2e4),
    ("60 lbf", "force", 60 * LBF),
    ("16 ozf", "force", LBF),
    ("2 kgf", "force", 2 * FREE_FALL),
    ("0.2 kN", "force", 200.0),
    ("3 kg*m/s^2", "force", 3.0),
    ("1 N/mm2", "stress", 1.0),
    ("1 kgf/cm2", "stress", 0.0980665),
    ("100 psi", "stress", 100 * LBF / INCH**2),
    ("1 ksi", "stress", 1000 * LBF / INCH**2),
    ("300 kPa", "stress", 0.3),
    ("1 lb", "mass", POUND),
    ("8 oz", "mass", POUND / 2),
    ("1120 kg/m3", "density", 1.12e-3),
    ("1.12 g / cm^3", "density", 1.12e-3),
    ("0.04 lb/in³", "density", 0.04 * POUND / INCH**3),
    ("2 min", "time", 120.0),
    ("5 year", "time", 5 * 365.25 * 86400.0),
    ("23 degC", "temperature", 296.15),
    ("73.4 degF", "temperature", 296.15),
    ("300 K", "temperature", 300.0),
    ("2 %", "relative", 0.02),
]

REFUSED = [
    ("18,90 g", "mass", 'Write "18.90 g"'),
    ("1,200 mm", "length", 'Write "1.200 mm" or "1200 mm"'),
    ("1,200.5 mm", "length", 'Write "1200.5 mm"'),
    ("1,200,000 mm", "length", 'Write "1200000 mm"'),
    ("2 %/decade", "relative", 'Write "2 %"'),
    ("2 percent", "relative", 'Write "2 %"'),
    ("60 C", "temperature", 'Write "60 degC"'),
    ("60 °C", "temperature", 'Write "60 degC"'),
    ("140 F", "temperature", 'Write "140 degF"'),
    ("60 lb", "force", 'Write "60 lbf"'),
    ("60 lbs", "force", 'Write "60 lbf"'),
    ("60 lbs", "mass", 'Write "60 lb"'),
    ("6 kg", "force", 'Write "6 kgf"'),
    ("30 lb/in^2", "stress", 'Write "30 psi"'),
    ("3 kg/cm2", "stress", 'Write "3 kgf/cm2"'),
    ("3 Mpa", "stress", 'Write "3 MPa"'),
    ("3 mpa", "stress", 'Write "3 MPa"'),
    ("3 inches", "length", 'Write "3 in"'),
    ("50 µm", "length", 'Write "50 um"'),
    ("5 hrs", "time", 'Write "5 h"'),
    ("5 GN", "force", "Read are N, kN, kgf, lbf, ozf"),
    ("5 m m", "length", "expected a unit that is read"),
    ("5 N", "length", 'expected a unit of length, not "N"'),
    ("5 1/mm", "length", "expected a unit that is read"),
    ("5 mm^0.5", "length", "expected a unit that is read"),
    ("5 degC*mm", "length", "expected a unit of length"),
    ("5 mm*mm*mm/mm/mm*mm/mm", "length", "expected a simpler unit"),
    ("5", "length", "without a unit"),
    ("", "length", 'as in "120 mm"'),
    ("mm", "length", 'as in "120 mm"'),
    ("1_0 mm", "length", "expected a unit that is read"),
    ("0x10 mm", "length", "expected a unit that is read"),
    ("nan mm", "length", "expected a finite number"),
    ("-inf mm", "length", "expected a finite number"),
    ("1e999 mm", "length", "expected a finite number"),
    ("1e308 m", "length", "expected a finite number"),
    (3, "length", 'as in "3 mm"'),
    (True, "length", "no text"),
    (None, "length", "no text"),
    (["3 mm"], "length", "no text"),
]


@pytest.mark.parametrize(("text", "dimension", "value"), READ, ids=[t for t, _, _ in READ])
def test_read(text: str, dimension: str, value: float) -> None:
    assert math.isclose(quantity(text, dimension), value, rel_tol=1e-14)


@pytest.mark.parametrize(("text", "dimension", "words"), REFUSED, ids=[f"{t} as {d}" for t, d, _ in REFUSED])
def test_refused(text: object, dimension: str, words: str) -> None:
    with pytest.raises(BadInput) as bad:
        quantity(text, dimension)
    assert words in str(bad.value)


def test_every_printed_spelling_is_read_with_its_factor() -> None:
    printed = spellings()
    assert printed.keys() == DIMENSIONS.keys()
    for dimension, units in printed.items():
        for unit, factor in units:
            step = quantity(f"3 {unit}", dimension) - quantity(f"2 {unit}", dimension)
            assert math.isclose(step, factor, rel_tol=1e-12), unit


def test_the_unit_inside_has_factor_one() -> None:
    for dimension, (_, inside, _, _) in DIMENSIONS.items():
        if dimension != "relative":
            assert conversion(inside, dimension) == (1.0, 0.0)


def test_pint_is_not_imported_before_a_unit_is_read() -> None:
    import subprocess
    import sys

    code = "import sys, pullback.studies.units; sys.exit('pint' in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0

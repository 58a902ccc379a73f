"""Keys of study.toml that are absent, misspelt, reserved, of a wrong type or dimension, or out of range."""

import pytest
from small_study import SmallStudy

# key, the line to take out
ABSENT = [
    ("study.title", 'title = "Strip, invented"\n'),
    ("study.seed", "seed = 7\n"),
    ("part.length", 'length = "100 mm"\n'),
    ("part.outline", 'outline = "outline.csv"\n'),
    ("law.names", 'names = ["yeoh"]\n'),
    ("pull[1].piece", 'piece = "P1"\n'),
    ("pull[1].driven_by", 'driven_by = "travel"\n'),
    ("pull[1].readings", 'readings = "readings.csv"\n'),
    ("strength.criterion", 'criterion = "elongation"\n'),
    ("strength.scatter", 'scatter = "weibull"\n'),
    ("strength.coupons", 'coupons = "coupons.csv"\n'),
    ("demand[1].name", 'name = "hold"\n'),
    ("demand[1].force", 'force = "20 N"\n'),
    ("gauges.mark_reading", 'mark_reading = "0.1 mm"\n'),
    ("gauges.mark_placement", 'mark_placement = "0.1 mm"\n'),
    ("gauges.travel_reading", 'travel_reading = "0.05 mm"\n'),
    ("gauges.force_reading", 'force_reading = "0.02 N"\n'),
    ("gauges.force_scale", 'force_scale = "0.5 %"\n'),
    ("gauges.section_reading", 'section_reading = "1 %"\n'),
    ("gauges.mass_reading", 'mass_reading = "0.02 g"\n'),
    ("gauges.coupon_stress", 'coupon_stress = "3 %"\n'),
    ("part.density", 'density = "1100 kg/m^3"\n'),
    ("column volume", 'coupon_volume = "396 mm^3"\n'),
]

# what stands there, what is written instead, words of the fault
CHANGED = [
    # misspelt
    ("seed = 7", "sed = 7", 'line 3, study.sed: read the key "sed"; expected one of title, seed. Did you mean "seed"?'),
    ("[gauges]", "[gauge]", 'line 31, gauge: read the key "gauge"', 'Did you mean "gauges"?'),
    ("mark_reading =", "marks_reading =", "gauges.marks_reading: read the key", 'Did you mean "mark_reading"?'),
    ("spread =", "spred =", "part.area_variation.spred", 'Did you mean "spread"?'),
    ('["yeoh"]', '["yeo"]', 'law.names: read the law "yeo"', 'Did you mean "yeoh"?'),
    ("yeoh.c10", "yeoh.c1", 'law.prior.yeoh.c1: read the parameter "c1"', 'Did you mean "c10"?'),
    ("prior.yeoh.c10", "prior.ogden-1.mu1", 'law.prior.ogden-1: read the law "ogden-1"; expected one of yeoh'),
    ('"travel"', '"travl"', 'pull[1].driven_by: read "travl"', 'Did you mean "travel"?'),
    ("lognormal =", "lognorml =", 'law.prior.yeoh.c10: read the form "lognorml"', 'Did you mean "lognormal"?'),
    ('"elongation"', '"elongaton"', 'strength.criterion: read "elongaton"', 'Did you mean "elongation"?'),
    ("halfnormal =", "infer =", "part.area_variation.spread", "not yet read"),
    # wrong type
    ("seed = 7", 'seed = "7"', 'study.seed: read "7"; expected a whole number, without quotation marks'),
    ("seed = 7", "seed = true", "study.seed: read true; expected a whole number"),
    ("seed = 7", "seed = 7.5", "study.seed: read 7.5; expected a whole number"),
    ('title = "Strip, invented"', "title = 3", "study.title: read 3; expected text in quotation marks"),
    ('"100 mm"', "100", "line 9, part.length: read 100, a number without its unit", "Write it as text", '"100 mm"'),
    ('"100 mm"', '"100"', 'part.length: read "100", without a unit; expected a length'),
    ('"100 mm"', '["100 mm"]', "part.length: read ['100 mm'], no text; expected a length"),
    ('["yeoh"]', '"yeoh"', 'law.names: read "yeoh"; expected a list of one law, as in ["yeoh"]'),
    ("[[pull]]", "[pull]", "pull: read a table", "expected a section [[pull]], in double brackets"),
    ("[[demand]]", "[demand]", "demand: read a table", "in double brackets"),
    ("factor = 1.5", 'factor = "1.5"', 'demand[1].factor: read "1.5"; expected a pure number'),
    ("factor = 1.5", "factor = 1,5", "line 50: read `factor = 1,5`; expected TOML"),
    ('"2.20 g"', "2.20 g", "line 28: read `mass = 2.20 g`; expected TOML"),
    ("[0.90, 0.99]", "0.90", "statement.reliability: read 0.9; expected a list of shares"),
    ('["0.3 MPa", 2.0]', '["0.3 MPa"]', "law.prior.yeoh.c10: read lognormal = ", "expected a list of 2 values"),
    ('["0.3 MPa", 2.0]', '["0.3 MPa", "2 MPa"]', 'law.prior.yeoh.c10: read "2 MPa"; expected a pure number'),
    ('{ halfnormal = ["5 %"] }', "5", "part.area_variation.spread: read 5, a number without its unit"),
    ('laboratory = "our own"', "laboratory = [1]", "record.laboratory: read [1]; expected text"),
    (
        '"0.1 mm"',
        '{ expanded = "0.2 mm" }',
        'gauges.mark_reading: read "0.2 mm"; expected the expanded uncertainty and',
    ),
    ("prior.yeoh.c10 =", "prior.yeoh =", 'law.prior.yeoh.lognormal: read the parameter "lognormal"'),
    ('prior.yeoh.c10 = { lognormal = ["0.3 MPa", 2.0] }', "prior = 3", "law.prior: read 3; expected tables of"),
    (
        'prior.yeoh.c10 = { lognormal = ["0.3 MPa", 2.0] }',
        "prior.yeoh = 3",
        "law.prior.yeoh: read 3; expected tables of",
    ),
    ('{ lognormal = ["0.3 MPa", 2.0] }', '"0.3 MPa"', "law.prior.yeoh.c10", "an exact parameter is not yet read"),
    ("[[demand]]", "[demand.hold]", "demand: read a table { hold }; expected one or more sections [[demand]]"),
    ("[record]\n", "[other]\n", 'other: read the key "other"'),
    ("[study]", "record = 3\n[study]", "read `[record]`; expected TOML (cannot overwrite"),
    ("[record]\nlaboratory =", "[study.record]\nlaboratory =", 'study.record: read the key "record"'),
    ("temperature =", "record = 3\ntemperature =", "pull[1].record: read 3; expected a table of texts"),
    ('title = "Strip, invented"', 'title = " "', "study.title: read empty text; expected some text"),
    ("mass_reading =", "outliers = 1\nmass_reading =", "gauges.outliers: read 1; expected false"),
    (
        '"0.1 mm"',
        '{ expanded = ["0.2 mm", 2], resolution = "0.1 mm" }',
        "gauges.mark_reading: read a table { expanded, res",
    ),
    (
        '"0.1 mm"',
        '{ expandd = ["0.2 mm", 2] }',
        'gauges.mark_reading: read the form "expandd"',
        'Did you mean "expanded"?',
    ),
    (
        '{ halfnormal = ["5 %"] }',
        '{ varies = { halfnormal = ["5 %"] } }',
        "part.area_variation.spread: read varies; expected one value",
    ),
    (
        "coupon_volume",
        "prior = { modulus = 12 }\ncoupon_volume",
        "strength.prior.modulus: read 12; expected one distribution",
    ),
    ("coupon_volume", "prior = { modulu = 12 }\ncoupon_volume", "strength.prior.modulu", 'Did you mean "modulus"?'),
    # wrong dimension, wrong unit
    ('"100 mm"', '"100 N"', 'part.length: read "100 N"; expected a unit of length, not "N". Read are mm, cm, m, um'),
    ('"2.20 g"', '"2,20 g"', 'line 28, pull[1].mass: read "2,20 g"; expected a decimal point', 'Write "2.20 g"'),
    ('"2.20 g"', '"18,90 g"', 'read "18,90 g"', 'Write "18.90 g"'),
    ('lot = "2 %"', 'lot = "2 %/decade"', 'part.area_variation.lot: read "2 %/decade"', 'Write "2 %"'),
    ('"23 degC"', '"60 C"', 'pull[1].temperature: read "60 C"', 'Write "60 degC"'),
    ('"20 N"', '"60 lb"', 'demand[1].force: read "60 lb"; expected a unit of force', 'Write "60 lbf"'),
    ('"20 N"', '"20 MPa"', 'demand[1].force: read "20 MPa"; expected a unit of force'),
    ('"1100 kg/m^3"', '"1100 kg"', 'part.density: read "1100 kg"; expected a unit of density'),
    ('"0.3 MPa"', '"0.3 mm"', 'law.prior.yeoh.c10: read "0.3 mm"; expected a unit of stress'),
    ('force_scale = "0.5 %"', 'force_scale = "0.5 N"', 'gauges.force_scale: read "0.5 N"'),
    ('mark_placement = "0.1 mm"', 'mark_placement = "1 %"', 'gauges.mark_placement: read "1 %"; expected a standard'),
    # out of range
    ('"100 mm"', '"-100 mm"', 'part.length: read "-100 mm"; expected a value of more than 0'),
    ('"100 mm"', '"0 mm"', 'part.length: read "0 mm"; expected a value of more than 0'),
    ('"100 mm"', '"inf mm"', 'part.length: read "inf mm"; expected a finite number'),
    ('"100 mm"', '"1e999 mm"', 'part.length: read "1e999 mm"; expected a finite number'),
    ("seed = 7", "seed = -1", "study.seed: read -1; expected a whole number from 0"),
    ('lot = "2 %"', 'lot = "-2 %"', 'part.area_variation.lot: read "-2 %"; expected a value of at least 0'),
    ('lot = "2 %"', 'lot = "200 %"', 'part.area_variation.lot: read "200 %"', "at most 1"),
    ("factor = 1.5", "factor = 0", "demand[1].factor: read 0; expected a value of more than 0"),
    ("factor = 1.5", "factor = nan", "demand[1].factor: read nan; expected a finite number"),
    ("[0.90, 0.99]", "[0.90, 1.0]", "statement.reliability: read 1.0; expected a share between 0 and 1"),
    ("[0.90, 0.99]", "[0.90, 0.90]", "statement.reliability", "expected each share once"),
    ("[0.90, 0.99]", "[0.90]\nconfidence = 95", "statement.confidence: read 95; expected a share between 0 and 1"),
    ('["0.3 MPa", 2.0]', '["0.3 MPa", 0.9]', "law.prior.yeoh.c10: read 0.9; expected a geometric standard deviation"),
    ('mark_reading = "0.1 mm"', 'mark_reading = "0 mm"', 'gauges.mark_reading: read "0 mm"', "above zero"),
    ('force_reading = "0.02 N"', 'force_reading = "0 N"', 'gauges.force_reading: read "0 N"', "above zero"),
    ('section_reading = "1 %"', 'section_reading = "0 %"', "gauges.section_reading", "above zero"),
    ('mass_reading = "0.02 g"', 'mass_reading = "0 g"', "gauges.mass_reading", "above zero"),
    (
        'mass_reading = "0.02 g"',
        'mass_reading = { expanded = ["0.02 g", 0] }',
        "expected a coverage factor from 1 to 10",
    ),
    ('coupon_stress = "3 %"', 'coupon_stress = "0 %"', "gauges.coupon_stress: read 0 %; expected an error above zero"),
    ('"23 degC"', '"-300 degC"', 'pull[1].temperature: read "-300 degC"; expected a value of more than 0'),
    ('mass = "2.20 g"', 'mass = "2.20 g"\nmass_outside = "3 g"', "pull[1].mass_outside", "less than what was weighed"),
    (
        'force = "20 N"',
        'force = { normal = ["-20 N", "4 N"] }',
        'demand[1].force: read "-20 N"; expected a value above',
    ),
    ('force = "20 N"', 'force = { uniform = ["20 N", "10 N"] }', "expected a lower end below the upper one"),
    (
        'mass = "2.20 g"',
        'mass_outside = "1 g"',
        "pull[1].mass: read nothing; expected the mass that mass_outside is part of",
    ),
    ('force_scale = "0.5 %"', 'force_scale = "150 %"', 'gauges.force_scale: read "150 %"; expected at most 100 %'),
    ('"100 mm"', '"1e20 mm"', 'part.length: read "1e20 mm"; expected a finite number of usual size'),
    (
        "[statement]",
        "[sampler]\neffective_samples = 1\n[statement]",
        "sampler.effective_samples: read 1; expected a whole",
    ),
    ("density =", 'hardness = "55"\ndensity =', 'part.hardness: read "55"; expected a hardness', '"55 Shore A"'),
    ('force_reading = "0.02 N"', 'force_reading = "1 %"', "gauges.force_reading: read 1 %; expected an error in N"),
    # several
    ("[[demand]]", '[[demand]]\nname = "hold"\nforce = "3 N"\n[[demand]]', "demand[2].name", "expected each name once"),
]

# what stands there, what is put there, the reserved word
LATER = [
    ("[gauges]", '[[curve]]\nfile = "sheet.csv"\n[gauges]', "curve"),
    ("[gauges]", '[[service]]\nname = "hot"\n[gauges]', "service"),
    ("temperature =", 'spin = { speed = "3000 rpm" }\ntemperature =', "spin"),
    ("temperature =", 'bed = { stiffness = "0.02 N/mm^2" }\ntemperature =', "bed"),
    ("temperature =", "drum = { friction = 0.3 }\ntemperature =", "drum"),
    ("temperature =", 'fixture_compliance = "0.02 mm/N"\ntemperature =', "fixture_compliance"),
    ("temperature =", 'broke = { force = "141 N" }\ntemperature =', "broke"),
    ("temperature =", 'survived = "150 N"\ntemperature =', "survived"),
    ("temperature =", 'origin = "free"\ntemperature =', "free"),
    ("temperature =", 'length = "90 mm"\ntemperature =', "length"),
    ("density =", 'shape = "closed"\ndensity =', "closed"),
    ('"outline.csv"', '"ISO 37 type 2"\nthickness = "2 mm"', "ISO 37 type 2"),
    ("mass_reading =", "outliers = true\nmass_reading =", "outliers = true"),
    ('"0.1 mm"', '{ infer = "0.2 mm" }', "infer"),
    ('"elongation"', '"true stress"', "true stress"),
    ('"elongation"', '"energy density"', "energy density"),
    ('"elongation"', '"tearing"\nflaw_size = "50 um"', "tearing"),
    ('force = "20 N"', 'travel = "150 mm"', "travel"),
    ('force = "20 N"', 'least_tension = "12 N"\nat_travel = "60 mm"', "least_tension"),
    ("factor = 1.5", 'service = "hot"', "service"),
    ("[statement]", '[sampler]\nmove = "stretch"\n[statement]', "stretch"),
    ('["yeoh"]', '["gent"]', "gent"),
    ('["yeoh"]', '["mooney-rivlin"]', "mooney-rivlin"),
    ('["yeoh"]', '["arruda-boyce"]', "arruda-boyce"),
    ('["yeoh"]', '["lopez-pamies-2"]', "lopez-pamies-2"),
]


def says(text: str, *words: str) -> None:
    for word in words:
        assert word in text, f"{word!r} is not in:\n{text}"


@pytest.mark.parametrize(("key", "line"), ABSENT, ids=[k for k, _ in ABSENT])
def test_absent(small: SmallStudy, key: str, line: str) -> None:
    text = small.change("study.toml", line, "").faults()
    says(text, f"{key}: read nothing; expected")
    assert len(text.splitlines()) == 1


@pytest.mark.parametrize("section", ["study", "part", "law", "gauges", "strength"])
def test_section_absent(small: SmallStudy, section: str) -> None:
    text = small.text("study.toml")
    start = text.index(f"[{section}]")
    end = text.index("\n[", start + 1)
    if section == "part":
        end = text.index("\n[law]")
    small.write("study.toml", text[:start] + text[end + 1 :])
    says(small.faults(), section, "read nothing; expected")


@pytest.mark.parametrize("case", CHANGED, ids=[c[1] for c in CHANGED])
def test_changed(small: SmallStudy, case: tuple[str, ...]) -> None:
    old, new, *words = case
    says(small.change("study.toml", old, new).faults(), "study.toml, ", *words)


@pytest.mark.parametrize(("old", "new", "word"), LATER, ids=[c[2] for c in LATER])
def test_reserved_words_are_refused_by_name(small: SmallStudy, old: str, new: str, word: str) -> None:
    says(small.change("study.toml", old, new).faults(), "study.toml, line ", f"{word} is reserved, and not yet read")


def test_several_laws_and_several_pulls(small: SmallStudy) -> None:
    small.change("study.toml", '["yeoh"]', '["yeoh", "neo-hookean"]')
    text = small.text("study.toml")
    start, end = text.index("[[pull]]"), text.index("[gauges]")
    small.write("study.toml", text[:end] + text[start:end] + text[end:])
    says(
        small.faults(),
        "pull: read 2 pulls; expected one; several pulls are not yet read",
        "several to compare are not yet",
    )


def test_faults_are_gathered_with_their_lines(small: SmallStudy) -> None:
    small.change("study.toml", "seed = 7", "sed = 7").change("study.toml", '"100 mm"', '"100 N"')
    small.change("study.toml", '"0.02 g"', '"0.02 mm"')
    text = small.faults()
    assert len(text.splitlines()) == 4
    says(text, "line 1, study.seed", "line 3, study.sed", "line 9, part.length", "line 38, gauges.mass_reading")


def test_line_of_the_second_of_several_entries(small: SmallStudy) -> None:
    small.change("study.toml", "[statement]", '[[demand]]\nname = "pull-over"\nforce = "3 kg"\n[statement]')
    says(small.faults(), 'study.toml, line 54, demand[2].force: read "3 kg"')


def test_gauge_of_the_pull_is_checked_too(small: SmallStudy) -> None:
    small.change("study.toml", "temperature =", 'gauges = { mark_readin = "0.1 mm" }\ntemperature =')
    says(small.faults(), "line 29, pull[1].gauges.mark_readin", 'Did you mean "mark_reading"?')


def test_prior_of_lognormal_strengths(small: SmallStudy) -> None:
    small.change("study.toml", '"weibull"', '"lognormal"\nprior = { modulus = { normal = [10.0, 2.0] } }')
    says(small.faults(), "strength.prior", "not yet read")


@pytest.mark.parametrize("name", ["pull", "demand"])
def test_no_pull_and_no_demand(small: SmallStudy, name: str) -> None:
    text = small.text("study.toml")
    start = text.index(f"[[{name}]]")
    end = text.index("\n[", start + 1)
    small.write("study.toml", f"{name} = []\n" + text[:start] + text[end + 1 :])
    says(small.faults(), f"study.toml, line 1, {name}: read none; expected ")


def test_record_must_be_a_table(small: SmallStudy) -> None:
    text = small.text("study.toml").replace('[record]\nlaboratory = "our own"\n', "")
    says(
        small.write("study.toml", "record = 3\n" + text).faults(),
        "study.toml, line 1, record: read 3; expected a table",
    )

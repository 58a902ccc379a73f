"""Files that are absent, empty, cut, too large, from outside, or in a wrong encoding."""

from pathlib import Path

import pytest
from small_study import SmallStudy

from pullback.studies.faults import BadInput
from pullback.studies.read import read_study

FILES = ["study.toml", "outline.csv", "marks.csv", "readings.csv", "sections.csv", "coupons.csv"]
TABLES = FILES[1:]


def says(text: str, *words: str) -> None:
    for word in words:
        assert word in text, f"{word!r} is not in:\n{text}"


def test_small_study_has_no_fault(small: SmallStudy) -> None:
    assert small.read().title == "Strip, invented"


def test_folder_absent(tmp_path: Path) -> None:
    with pytest.raises(BadInput, match=r"nowhere: read no such file or folder; expected a folder with a study.toml"):
        read_study(tmp_path / "nowhere")


@pytest.mark.parametrize("name", FILES)
def test_absent(small: SmallStudy, name: str) -> None:
    (small.folder / name).unlink()
    says(small.faults(), f"{name}: read no such file; expected a file in the study's folder")


def test_absent_names_the_nearest_file(small: SmallStudy) -> None:
    small.change("study.toml", 'marks = "marks.csv"', 'marks = "mark.csv"')
    says(small.faults(), "mark.csv: read no such file", 'Did you mean "marks.csv"?')


@pytest.mark.parametrize("content", [b"", b" \n\n", b"\xef\xbb\xbf"])
@pytest.mark.parametrize("name", FILES)
def test_empty(small: SmallStudy, name: str, content: bytes) -> None:
    says(small.write(name, content).faults(), f"{name}: read an empty file")


@pytest.mark.parametrize("name", TABLES)
def test_headings_without_rows(small: SmallStudy, name: str) -> None:
    small.write(name, small.text(name).splitlines()[0] + "\n")
    says(small.faults(), f"{name}: read headings without rows; expected at least one row")


def test_only_comments(small: SmallStudy) -> None:
    says(small.write("marks.csv", "# to be filled in\n").faults(), "marks.csv: read no line but comments")


@pytest.mark.parametrize("name", TABLES)
def test_table_cut_within_a_row(small: SmallStudy, name: str) -> None:
    text = small.text(name)
    small.write(name, text[: text.rindex(",")])
    line = text.count("\n")
    says(small.faults(), f"{name}, line {line}: read ", "one for each heading. Is the file cut?")


def test_study_cut_within_a_line(small: SmallStudy) -> None:
    text = small.text("study.toml")
    small.write("study.toml", text[: text.index("100 mm") + 3])
    says(small.faults(), 'study.toml, line 9: read `length = "100`; expected TOML')


def test_study_cut_between_sections(small: SmallStudy) -> None:
    text = small.text("study.toml")
    small.write("study.toml", text[: text.index("[strength]")])
    says(small.faults(), "study.toml, demand: read nothing; expected one or more sections [[demand]]")


@pytest.mark.parametrize("name", FILES)
def test_latin_1(small: SmallStudy, name: str) -> None:
    small.write(name, "# Prüfung\n".encode("latin-1") + small.text(name).encode())
    says(small.faults(), f"{name}, line 1: read the byte 0xfc, which is not UTF-8; expected text in UTF-8. Save it as")


@pytest.mark.parametrize("name", FILES)
def test_utf_16(small: SmallStudy, name: str) -> None:
    small.write(name, small.text(name).encode("utf-16"))
    says(small.faults(), f"{name}: read text in UTF-16; expected text in UTF-8")


@pytest.mark.parametrize("name", FILES)
def test_zero_byte(small: SmallStudy, name: str) -> None:
    lines = small.text(name).count("\n")
    small.write(name, small.text(name).encode() + b"\0\n")
    says(small.faults(), f"{name}, line {lines + 1}: read a zero byte; expected text in UTF-8")


@pytest.mark.parametrize("name", ["../marks.csv", "/etc/hostname", "a/../../marks.csv"])
def test_outside_of_the_folder(small: SmallStudy, name: str) -> None:
    small.change("study.toml", '"marks.csv"', f'"{name}"')
    says(small.faults(), f'read "{name}"; expected the path of a file below the study\'s folder')


def test_absolute_path_even_inside(small: SmallStudy) -> None:
    small.change("study.toml", '"marks.csv"', f'"{small.folder / "marks.csv"}"')
    says(small.faults(), "expected the path of a file below the study's folder")


def test_link_to_outside(small: SmallStudy, tmp_path_factory: pytest.TempPathFactory) -> None:
    other = tmp_path_factory.mktemp("other") / "marks.csv"
    other.write_text(small.text("marks.csv"))
    (small.folder / "marks.csv").unlink()
    (small.folder / "marks.csv").symlink_to(other)
    says(small.faults(), "expected the path of a file below the study's folder")


def test_path_with_a_control_character(small: SmallStudy) -> None:
    small.change("study.toml", '"marks.csv"', '"marks\\u0000.csv"')
    says(small.faults(), "expected the path of a file below the study's folder")


def test_a_folder_for_a_file(small: SmallStudy) -> None:
    (small.folder / "marks.csv").unlink()
    (small.folder / "marks.csv").mkdir()
    says(small.faults(), "marks.csv: read a folder; expected a file")


def test_study_too_large(small: SmallStudy) -> None:
    small.write("study.toml", small.text("study.toml") + "#" * 1024 * 1024)
    says(small.faults(), "study.toml: read 1.0 MiB; expected a file of at most 1 MiB")


def test_table_too_large(small: SmallStudy) -> None:
    with (small.folder / "marks.csv").open("r+b") as file:
        file.truncate(65 * 1024 * 1024)
    says(small.faults(), "marks.csv: read 65.0 MiB; expected a file of at most 64 MiB")


def test_workbook_is_not_yet_read(small: SmallStudy) -> None:
    small.change("study.toml", '"marks.csv"', '"marks.xlsx#P1"')
    says(small.faults(), "pull[1].marks", "marks.xlsx#P1 is reserved, and not yet read. Save the sheet as CSV")


@pytest.mark.parametrize("text", ["a = " + "[" * 5000, "a = " + "9" * 5000])
def test_toml_that_breaks_the_parser(small: SmallStudy, text: str) -> None:
    says(small.write("study.toml", text).faults(), "study.toml: expected TOML that is not nested too deeply")


def test_all_faulty_tables_are_told_of_at_once(small: SmallStudy) -> None:
    for name in TABLES:
        small.write(name, b"")
    assert len(small.faults().splitlines()) == len(TABLES)


def test_a_file_that_may_not_be_read(small: SmallStudy, monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(self: Path) -> bytes:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "read_bytes", refuse)
    says(small.faults(), "study.toml: read permission denied; expected a file that can be read")

"""The command line: help, what is refused, what is not yet there."""

from __future__ import annotations

from pathlib import Path

import pytest

from pullback.studies.commands.group import COMMANDS, LATER, entry


def test_help_names_every_command(capsys: pytest.CaptureFixture[str]) -> None:
    assert entry(["--help"]) == 0
    said = capsys.readouterr().out
    assert all(name in said for name in COMMANDS)


@pytest.mark.parametrize("name", list(LATER))
def test_later_commands_are_refused_by_name(name: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert entry([name, "x"]) == 2
    assert f"{name} is not yet there" in capsys.readouterr().err


def test_resume_is_not_yet_there(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert entry(["run", str(tmp_path), "--resume"]) == 2
    assert "not yet" in capsys.readouterr().err


def test_a_study_that_is_not_there(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    for command in ("check", "run"):
        assert entry([command, str(tmp_path / "nowhere")]) == 2
        said = capsys.readouterr().err
        assert "nowhere" in said and "expected" in said and "Traceback" not in said


def test_out_that_is_a_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "out").write_text("x", encoding="utf-8")
    assert entry(["run", str(tmp_path), "--out", str(tmp_path / "out")]) == 2
    assert "read a file, expected a folder" in capsys.readouterr().err


def test_an_unknown_option(capsys: pytest.CaptureFixture[str]) -> None:
    assert entry(["run", "x", "--fast"]) == 2
    assert "--fast" in capsys.readouterr().err


def test_check_says_what_is_assumed_and_determined(capsys: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    assert entry(["new", str(tmp_path / "strap"), "--from", "battery-strap"]) == 0
    assert entry(["check", str(tmp_path / "strap")]) == 0
    said = capsys.readouterr().out
    assert "assumed: " in said and "left out: " in said
    rows = {line.split()[0]: line for line in said.splitlines() if line.startswith("  ")}
    assert "left mostly to its prior" not in rows["c10"]
    assert "left mostly to its prior" in rows["force_scale"]
    assert not (tmp_path / "strap" / "results").exists()


def test_check_prints_the_units(capsys: pytest.CaptureFixture[str]) -> None:
    assert entry(["check", "--units"]) == 0
    said = capsys.readouterr().out
    assert "lbf (4.448" in said and "MPa (1)" in said


def test_new_names_and_refuses(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert entry(["new", "--list"]) == 0
    assert "battery-strap" in capsys.readouterr().out
    assert entry(["new", str(tmp_path / "a"), "--from", "batery-strap"]) == 2
    assert "Did you mean battery-strap?" in capsys.readouterr().err
    (tmp_path / "full").mkdir()
    (tmp_path / "full" / "file").write_text("x", encoding="utf-8")
    assert entry(["new", str(tmp_path / "full"), "--from", "battery-strap"]) == 2
    assert "expected a new or empty folder" in capsys.readouterr().err

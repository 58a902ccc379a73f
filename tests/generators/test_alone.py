"""The invented world shares nothing with the package it is used to test."""

import ast
from pathlib import Path

import pytest

HERE = Path(__file__).parent


def imported(source: str) -> set[str]:
    """First names of all modules imported, absolutely or not, anywhere in the source."""
    found = set()
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Import):
            found |= {alias.name.split(".")[0] for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            found.add((node.module or "").split(".")[0])
        elif isinstance(node, ast.Call) and getattr(node.func, "id", getattr(node.func, "attr", "")) in (
            "__import__",
            "import_module",
        ):
            found.add("dynamic")
    return found


@pytest.mark.parametrize("path", [p for p in HERE.glob("*.py") if not p.name.startswith("test_")], ids=lambda p: p.name)
def test_generator_imports_nothing_of_the_package(path):
    allowed = {"__future__", "generators", "numpy", "scipy"}
    standard = {"argparse", "collections", "concurrent", "csv", "dataclasses", "itertools", "json", "os", "pathlib",
                "subprocess", "sys", "time", "typing"}  # fmt: skip
    assert imported(path.read_text(encoding="utf-8")) <= allowed | standard


def test_an_import_inside_a_function_is_seen():
    assert "pullback" in imported("def f():\n    from pullback.forward import solve\n")

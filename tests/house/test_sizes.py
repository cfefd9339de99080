"""Files and functions stay small, and every name says what is inside."""

import ast
import shutil
import statistics
import subprocess
import sys
from pathlib import Path

import pytest

from tests.house.tree import ROOT, files, name_of

LONGEST_FILE = 450
LONGEST_BODY = 60
EMPTY_NAMES = ("utils", "util", "misc", "helpers", "helper", "manager", "managers", "common", "core", "tools")


def bodies(source: str) -> dict[str, int]:
    """Return the number of lines in the body of each function, its docstring not counted."""
    functions = [
        node for node in ast.walk(ast.parse(source)) if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef)
    ]
    return {f"{function.name}, line {function.lineno}": _length(function) for function in functions}


def _length(function: ast.FunctionDef | ast.AsyncFunctionDef) -> int:
    body = function.body[1:] if ast.get_docstring(function) is not None else function.body
    return (body[-1].end_lineno or 0) - body[0].lineno + 1 if body else 0


def _sources() -> dict[str, str]:
    return {name_of(file): file.read_text(encoding="utf-8") for file in files("*.py")}


def test_files_are_short() -> None:
    """A file that grows past the limit holds more than one thing: give each its own."""
    lengths = {name: len(source.splitlines()) for name, source in _sources().items()}
    long = [
        f"{name} has {length} lines; split it by what it holds."
        for name, length in lengths.items()
        if length > LONGEST_FILE
    ]
    assert not long, "\n".join(long)


def test_function_bodies_are_short(capsys: pytest.CaptureFixture[str]) -> None:
    """No body is longer than a screen; the median of the package is shown."""
    measured = {
        f"{name}: {where}": size for name, source in _sources().items() for where, size in bodies(source).items()
    }
    package = [size for name, size in measured.items() if name.startswith("tuner/")]
    with capsys.disabled():
        sys.stdout.write(
            f"\nmedian function body of the package: {statistics.median(package):g} lines of {len(package)} functions\n"
        )
    long = [
        f"{where} has {size} lines; give its parts names." for where, size in measured.items() if size > LONGEST_BODY
    ]
    assert not long, "\n".join(long)


def test_names_say_what_is_inside() -> None:
    """No file or folder has a name that would fit anything."""
    parts = {Path(name_of(file)).with_suffix("") for file in files("*.py")}
    empty = sorted({part for path in parts for part in path.parts if part in EMPTY_NAMES})
    assert not empty, f"Name these after what they hold: {', '.join(empty)}."


def test_the_top_level_holds_what_is_agreed() -> None:
    """Besides dot-files the top level hands on these names and no others; what a person delivers there is theirs."""
    agreed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "tuner", "resources", "sample_plants", "tests"}
    there = {path.name for path in ROOT.iterdir()}
    assert agreed - there == set(), "These are missing."
    assert tops_in_git() - agreed == set(), "Put it in the folder where its kind belongs."


def tops_in_git() -> set[str]:
    """Return what git tracks at the top level, dot-files left out; nothing in a copy without its history."""
    if not (ROOT / ".git").exists() or not (git := shutil.which("git")):
        return set()
    listed = subprocess.run([git, "ls-files", "-z"], cwd=ROOT, capture_output=True, text=True, check=False).stdout
    return {name.partition("/")[0] for name in listed.split("\0") if name and not name.startswith(".")}


def test_a_body_is_counted_without_its_docstring() -> None:
    """Signature and docstring do not count, everything after them does."""
    source = (
        'def f(\n    a,\n):\n    """Say.\n\n    More.\n    """\n    b = a\n\n    return b\n\ndef g():\n    """Say."""\n'
    )
    assert bodies(source) == {"f, line 1": 3, "g, line 12": 0}

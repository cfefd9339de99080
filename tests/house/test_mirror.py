"""The tests mirror the package, and each says in a line what it holds."""

import ast

import pytest

from tests.house.tree import ROOT, files, name_of

EXEMPT = ("__init__", "__main__")


def home_of(module: str) -> str:
    """Return the path of the test file of a module given by its path, both from the root of the checkout."""
    folder, _, name = module.removeprefix("tuner/").rpartition("/")
    return "/".join(filter(None, ("tests", folder, f"test_{name}")))


def undescribed(source: str) -> list[str]:
    """Return the test functions whose docstring is missing or longer than a line."""
    functions = [node for node in ast.walk(ast.parse(source)) if isinstance(node, ast.FunctionDef)]
    tests = [function for function in functions if function.name.startswith("test_")]
    return [test.name for test in tests if len((ast.get_docstring(test) or "").splitlines()) != 1]


def does_something(source: str) -> bool:
    """Tell whether a module has a function at all; one that only declares has nothing to try."""
    return any(isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef) for node in ast.walk(ast.parse(source)))


def test_every_module_has_its_test_file() -> None:
    """What tests a module is found without a search: same folder, same name."""
    package = [file for file in files("*.py") if ROOT / "tuner" in file.parents and file.stem not in EXEMPT]
    modules = [name_of(file) for file in package if does_something(file.read_text(encoding="utf-8"))]
    missing = [
        f"{module} has no {home_of(module)}; write it." for module in modules if not (ROOT / home_of(module)).exists()
    ]
    assert not missing, "\n".join(missing)


def test_every_test_says_what_it_holds() -> None:
    """The docstring of a test is one line: what is promised, not how it is tried."""
    tests = {name_of(file): file.read_text(encoding="utf-8") for file in files("test_*.py")}
    silent = [
        f"{name}: {test} needs a docstring of one line."
        for name, source in tests.items()
        for test in undescribed(source)
    ]
    assert not silent, "\n".join(silent)


@pytest.mark.parametrize(
    ("module", "home"),
    [
        ("tuner/model/plant.py", "tests/model/test_plant.py"),
        ("tuner/window/plots/view.py", "tests/window/plots/test_view.py"),
        ("tuner/errors.py", "tests/test_errors.py"),
    ],
)
def test_the_home_of_a_module(module: str, home: str) -> None:
    """Rooms, rooms in rooms and single files each have one place for their tests."""
    assert home_of(module) == home


def test_the_search_finds_a_silent_test() -> None:
    """A test without a docstring and one with several lines are named; other functions are not looked at."""
    silent, long = "def test_a():\n    pass\n", 'def test_b():\n    """Say.\n\n    More."""\n'
    described, other = 'def test_c():\n    """Say."""\n', "def d():\n    pass\n"
    assert undescribed(silent + long + described + other) == ["test_a", "test_b"]

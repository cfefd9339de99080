"""Every import of the package keeps to the order of the rooms, and the rule itself finds each kind of breach."""

from pathlib import Path

import pytest

from tests.house.imports import breaches, window_modules

ROOT = Path(__file__).parents[2]


def _sources() -> dict[str, str]:
    """Return the text of every module of the package by its dotted name, a package's under that of its ``__init__``."""
    files = sorted((ROOT / "tuner").rglob("*.py"))
    return {".".join(file.relative_to(ROOT).with_suffix("").parts): file.read_text(encoding="utf-8") for file in files}


def test_the_package_keeps_to_the_rule() -> None:
    """No module imports from a room below it or passes by the one door of a library."""
    found = [breach for module, source in _sources().items() for breach in breaches(module, source)]
    assert not found, "\n".join(found)


def test_the_command_line_knows_one_module_of_the_window() -> None:
    """All of cli opens the window through one module."""
    doors = [window_modules(module, source) for module, source in _sources().items() if ".cli." in module]
    assert len(set().union(*doors)) <= 1, f"Open the window through one module, not through {doors}."


@pytest.mark.parametrize(
    ("module", "source"),
    [
        ("tuner.judge.verdict", "from tuner.measure.step import overshoot\nfrom tuner.judge.limits import x"),
        (
            "tuner.window.plots",
            "import pyqtgraph\nfrom PySide6.QtWidgets import QWidget\nfrom tuner.session import undo",
        ),
        ("tuner.kernels.lanes", "import numba\nimport numpy as np\nfrom tuner.law.pid import step"),
        ("tuner.simulate.algebra", "def f():\n    import control"),
        ("tuner.suggest.search", "def f():\n    from scipy.signal import lfilter"),
        ("tuner.cli.main", "def f():\n    from tuner.window.app import open_window"),
        ("tuner.__init__", "def __getattr__(name):\n    from tuner.assess import assess"),
        ("tuner.cli.main", "from tuner import __version__\nfrom tuner.cli import printing\nfrom . import printing"),
        ("tuner.__main__", "def f():\n    from tuner.bootstrap import enter\n    from tuner.cli.main import main"),
        ("tuner.measure.margins", "from typing import TYPE_CHECKING\nif TYPE_CHECKING:\n    import scipy.signal"),
    ],
)
def test_an_allowed_import_passes(module: str, source: str) -> None:
    """What the order of the rooms and the doors allow is no breach."""
    assert breaches(module, source) == []


@pytest.mark.parametrize(
    ("module", "source", "said"),
    [
        ("tuner.model.plant", "from tuner.judge import verdict", "a room below it"),
        ("tuner.model.plant", "def f():\n    from tuner import judge", "a room below it"),
        ("tuner.model.plant", "from ..judge import verdict", "a room below it"),
        ("tuner.model.plant", "if TYPE_CHECKING:\n    from tuner.judge import verdict", "a room below it"),
        ("tuner.errors", "from tuner.places import cache", "a room below it"),
        ("tuner.footing.map", "from numba import njit", "one door is kernels"),
        ("tuner.footing.map", "importlib.import_module('numba')", "one door is kernels"),
        ("tuner.deliver.proof", "def f():\n    import control", "one door is simulate"),
        ("tuner.session.undo", "from PySide6.QtCore import QObject", "one door is window"),
        ("tuner.model.sheet", "import tomlkit", "one door is files"),
        ("tuner.window.app", "from rich import print", "one door is cli"),
        ("tuner.simulate.algebra", "import control as ct", "slow to load"),
        ("tuner.measure.step", "from scipy import signal", "slow to load"),
        ("tuner.measure.step", "import scipy.signal", "slow to load"),
        ("tuner.deliver.report", "from matplotlib import pyplot", "slow to load"),
        ("tuner.law.pid", "from tuner.errors import Fault", "nothing of ours"),
        ("tuner.law.pid", "import numpy", "the standard library"),
        ("tuner.kernels.lanes", "from tuner.model.plant import Plant", "may import law and places"),
        ("tuner.kernels.lanes", "import scipy", "the standard library"),
        ("tuner.bootstrap.making", "from tuner.places import cache", "nothing of ours"),
        ("tuner.bootstrap.making", "import platformdirs", "one door is places"),
        ("tuner.cli.main", "from tuner.bootstrap import enter", "the two commands alone"),
        ("tuner.cli.main", "from tuner.window.app import open_window", "loads the window at its start"),
        ("tuner.window.app", "from tuner.cli.main import main", "the window imports from cli"),
        ("tuner.__init__", "from tuner.assess import assess", "inside a function"),
        ("tuner.judge.verdict", "import pandas", "no library of this project"),
        ("tuner.tools.odds", "", "has no rank"),
    ],
)
def test_a_forbidden_import_is_named_with_its_cure(module: str, source: str, said: str) -> None:
    """Each kind of breach gives one sentence that names the module and what to do instead."""
    (breach,) = breaches(module, source)
    assert breach.startswith(module)
    assert said in breach

"""The parts of making an environment that need no machine; tests/bootstrap/test_commands.py tries the whole."""

import ast
from pathlib import Path

import pytest

from tuner.bootstrap import making
from tuner.bootstrap.folder import Folder
from tuner.bootstrap.making import Wish, has_distributions, make
from tuner.bootstrap.steps import SetUpError

ROOT = Path(__file__).parents[2]


@pytest.mark.parametrize(
    ("lines", "has_all"),
    [
        (["numpy>=2.1", "PySide6-Essentials==6.11.3; python_version < '3.12'"], True),
        (["numpy>=2.1", "no-such-package"], False),
        ([], True),
    ],
)
def test_a_python_with_every_package_is_recognised(lines: list[str], has_all: bool) -> None:
    """A requirement line counts by its name, with its bounds and conditions left aside."""
    assert has_distributions(lines) is has_all


def test_a_place_that_cannot_be_written_to_is_told(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Where neither the checkout nor the cache takes a folder, the sentence names the folder and the reason."""
    (tmp_path / "a file").touch()
    monkeypatch.setattr(making, "choose", lambda _: Folder(tmp_path / "a file" / ".venv"))
    with pytest.raises(SetUpError, match=r"^The environment cannot be made in .*a file.\.venv: .*\.$"):
        make(tmp_path, Wish(testing=False, window=False))


@pytest.mark.parametrize(
    "file",
    [
        ROOT / "tuner" / "__main__.py",
        ROOT / "tests" / "__main__.py",
        *sorted((ROOT / "tuner" / "bootstrap").glob("*.py")),
    ],
    ids=lambda file: "/".join(file.parts[-2:]),
)
def test_an_old_python_can_read_the_files(file: Path) -> None:
    """Python 3.6 gets as far as the sentence that it is too old: it must be able to parse what says so."""
    ast.parse(file.read_text(encoding="utf-8"), feature_version=(3, 6))

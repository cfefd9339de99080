"""The state of an environment's folder, and where it may lie."""

import os
import sys
from pathlib import Path

import pytest

from tuner.bootstrap.folder import BEING_MADE, Folder, candidates, checksum, choose, is_inside

PROJECT = '[project]\ndependencies = ["numpy>=2"]\n[project.optional-dependencies]\ntest = ["pytest>=8"]\n'


@pytest.fixture
def root(tmp_path: Path) -> Path:
    """Return a checkout with a project file and nothing else."""
    (tmp_path / "pyproject.toml").write_text(PROJECT)
    return tmp_path


@pytest.fixture
def folder(root: Path) -> Folder:
    """Return an environment beside the checkout's files, whose Python is a link to this one."""
    folder = Folder(root / ".venv")
    folder.python.parent.mkdir(parents=True)
    folder.python.symlink_to(sys.executable)
    return folder


def test_an_environment_without_a_state_is_not_ready(root: Path, folder: Folder) -> None:
    """A folder that only holds a Python is no complete environment."""
    assert folder.state == ""
    assert not folder.is_ready(root, testing=False)


def test_an_environment_being_made_is_not_ready(root: Path, folder: Folder) -> None:
    """The mark that is written first does not count as complete, nor as something to add to."""
    (folder.path / "pyvenv.cfg").touch()
    assert folder.can_be_added_to
    folder.state = BEING_MADE
    assert not folder.is_ready(root, testing=False)
    assert not folder.can_be_added_to


def test_what_is_written_down_is_what_is_ready(root: Path, folder: Folder) -> None:
    """Complete for the program is not complete for the tests, which ask for more."""
    folder.mark_ready(root, ["numpy>=2"], lacks_window=False)
    assert folder.is_ready(root, testing=False)
    assert not folder.is_ready(root, testing=True)
    folder.mark_ready(root, ["numpy>=2", "pytest>=8"], lacks_window=True)
    assert folder.is_ready(root, testing=True)
    assert folder.lacks_window


def test_another_checkout_or_python_is_another_environment(root: Path, folder: Folder, tmp_path: Path) -> None:
    """An environment moved elsewhere, or whose Python now leads to another one, is not ready."""
    folder.mark_ready(root, ["numpy>=2"], lacks_window=False)
    other = tmp_path / "other"
    other.mkdir()
    (other / "pyproject.toml").write_text(PROJECT)
    assert not folder.is_ready(other, testing=False)
    folder.python.unlink()
    folder.python.symlink_to("/bin/sh")
    assert not folder.is_ready(root, testing=False)


def test_requirements_count_when_the_project_file_has_changed(root: Path, folder: Folder) -> None:
    """A changed file whose requirements are all there is ready; one with a new requirement is not."""
    folder.mark_ready(root, ["numpy>=2"], lacks_window=False)
    before = checksum(root)
    (root / "pyproject.toml").write_text(PROJECT + "# a remark\n")
    assert checksum(root) != before
    assert folder.is_ready(root, testing=False)
    (root / "pyproject.toml").write_text(PROJECT.replace("numpy>=2", "numpy>=3"))
    assert not folder.is_ready(root, testing=False)


def test_the_folder_lies_in_the_checkout_or_else_in_the_cache(root: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A checkout that can be written to keeps its environment; each other one has a folder of its own in the cache."""
    beside, cached = candidates(root)
    assert choose(root).path == beside.path == root / ".venv"
    monkeypatch.setattr(os, "access", lambda *_: False)
    assert choose(root).path == cached.path
    assert cached.path != list(candidates(root / "other"))[1].path


def test_this_process_knows_its_environment(tmp_path: Path) -> None:
    """The folder of the running Python is the one it is inside, under whatever name."""
    (tmp_path / "link").symlink_to(sys.prefix)
    assert is_inside(tmp_path / "link")
    assert not is_inside(tmp_path)

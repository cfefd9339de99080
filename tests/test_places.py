"""The folders of the program and of the person who uses it."""

import os
import sys
from pathlib import Path

import pytest

from tuner import places
from tuner.bootstrap.folder import user_cache


def test_the_folders_of_a_checkout_lie_beside_the_package() -> None:
    """Run from a checkout, resources and sample plants are those of its top level."""
    root = Path(places.__file__).parents[1]
    assert places.resources() == root / "resources"
    assert places.sample_plants() == root / "sample_plants"


def test_the_folders_of_an_installation_lie_in_the_package(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Installed, the wheel has laid them inside the package."""
    monkeypatch.setattr(places, "_PACKAGE", tmp_path)
    for name in ("resources", "sample_plants"):
        (tmp_path / name).mkdir()
    assert places.resources() == tmp_path / "resources"
    assert places.sample_plants() == tmp_path / "sample_plants"


@pytest.mark.skipif(sys.platform != "linux", reason="the variables that move these folders are Linux's")
def test_the_folders_of_a_person_follow_the_desktop(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Cache and settings lie where the desktop's variables say, and are not made by asking."""
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path / "cache"))
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    assert places.cache() == tmp_path / "cache" / "trimwright"
    assert places.settings() == tmp_path / "config" / "trimwright"
    assert list(tmp_path.iterdir()) == []


def test_the_environment_is_kept_in_the_same_cache() -> None:
    """What is made before any library is there knows the same cache folder as the program."""
    assert user_cache() == places.cache()


def test_compiled_kernels_go_to_the_cache(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Where nothing is said, compiled code is kept in the user's cache, in a folder that is there."""
    monkeypatch.setattr(places, "cache", lambda: tmp_path / "cache")
    monkeypatch.delenv("NUMBA_CACHE_DIR", raising=False)
    places.keep_compiled_kernels()
    assert os.environ["NUMBA_CACHE_DIR"] == str(tmp_path / "cache" / "kernels")
    assert (tmp_path / "cache" / "kernels").is_dir()


def test_a_wish_for_the_compiled_kernels_is_kept(monkeypatch: pytest.MonkeyPatch) -> None:
    """Whoever has set the variable keeps the folder."""
    monkeypatch.setenv("NUMBA_CACHE_DIR", "elsewhere")
    places.keep_compiled_kernels()
    assert os.environ["NUMBA_CACHE_DIR"] == "elsewhere"


def test_without_a_place_to_write_compiled_kernels_go_to_a_temporary_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A cache folder that cannot be made is replaced by a temporary one that can be written to."""
    (tmp_path / "a file").touch()
    monkeypatch.setattr(places, "cache", lambda: tmp_path / "a file")
    monkeypatch.delenv("NUMBA_CACHE_DIR", raising=False)
    monkeypatch.setattr("tempfile.tempdir", str(tmp_path))
    places.keep_compiled_kernels()
    kept = Path(os.environ["NUMBA_CACHE_DIR"])
    assert kept.is_dir()
    assert kept.parent == tmp_path

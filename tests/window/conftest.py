"""Fixtures of the window's tests: a home of their own, a theme that is not the desktop's."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from tuner.window.theme import Theme


@pytest.fixture(autouse=True)
def own_home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Keep the settings and the cache of a test away from those of the person who runs it."""
    for variable in ("XDG_CONFIG_HOME", "XDG_CACHE_HOME"):
        monkeypatch.setenv(variable, str(tmp_path / "home"))
    return tmp_path / "home"


@pytest.fixture
def theme(qtbot: QtBot) -> Iterator[Theme]:
    """Return the light theme."""
    del qtbot
    yield Theme("light")

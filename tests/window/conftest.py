"""Fixtures of the window's tests: a home of their own, a theme that is not the desktop's."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.window.theme import Theme


@pytest.fixture(autouse=True)
def own_home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Keep the settings and the cache of a test away from those of the person who runs it."""
    for variable in ("XDG_CONFIG_HOME", "XDG_CACHE_HOME"):
        monkeypatch.setenv(variable, str(tmp_path / "home"))
    return tmp_path / "home"


@pytest.fixture(autouse=True)
def _same_look(qapp: QApplication) -> Iterator[None]:
    """Give the application back the look it had, whatever a test put on."""
    font, colours, sheet = qapp.font(), qapp.palette(), qapp.styleSheet()
    yield
    if qapp.styleSheet() != sheet:
        qapp.setStyleSheet(sheet)
        qapp.setPalette(colours)
        qapp.setFont(font)


@pytest.fixture
def theme(qtbot: QtBot) -> Theme:
    """Return the light theme."""
    del qtbot
    return Theme("light")

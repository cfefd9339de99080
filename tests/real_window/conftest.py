"""A real window on a real loop, of the kind that a person would see."""

from collections.abc import Iterator
from pathlib import Path

import pytest
from pytestqt.qtbot import QtBot

from tests.window.windows import Answers
from tuner.places import sample_plants
from tuner.window.app import built, opened
from tuner.window.main_window import MainWindow

FIRST_ANSWER = 180_000
"""Milliseconds for the first answer, which on a fresh machine waits for the compiler."""


@pytest.fixture
def asking(tmp_path: Path) -> Answers:
    """Return somebody who saves to a folder of the test and gives up what is unsaved."""
    return Answers(unsaved="discard", save=tmp_path / "saved.toml")


@pytest.fixture
def window(qtbot: QtBot, asking: Answers, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[MainWindow]:
    """Return the window on the built-in loop, once its first verdict is shown."""
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "home"))
    monkeypatch.chdir(tmp_path)
    from PySide6.QtWidgets import QApplication

    application = QApplication.instance()
    assert isinstance(application, QApplication)
    made, wiring = built(application, opened(sample_plants() / "heater.toml"), asking)
    made.resize(1600, 1000)
    with qtbot.waitActive(made, timeout=20_000):
        made.show()
        made.activateWindow()
    made.start()
    qtbot.waitUntil(lambda: made.shown is not None and made.shown.whole, timeout=FIRST_ANSWER)
    yield made
    made.close()
    del wiring
    made.deleteLater()
    application.setStyleSheet("")

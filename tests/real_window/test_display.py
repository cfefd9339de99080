"""The display of the real-window tests is one on which a window is placed, found by its name, and closed."""

import os
import subprocess
from contextlib import suppress

from PySide6.QtWidgets import QWidget
from pytestqt import exceptions
from pytestqt.qtbot import QtBot


def test_a_window_is_managed_and_can_be_closed(qtbot: QtBot) -> None:
    """A window gets a frame from the window manager, a tool finds it by its title, and the keyboard closes it."""
    assert os.environ["QT_QPA_PLATFORM"] == "xcb"
    window = QWidget()
    qtbot.addWidget(window)
    window.setWindowTitle("display of the tests")
    window.resize(400, 300)
    with qtbot.waitActive(window):
        window.show()
    qtbot.waitUntil(lambda: window.frameGeometry() != window.geometry())
    found = _xdotool("search", "--onlyvisible", "--name", "^display of the tests$")
    assert len(found.split()) == 1
    for _ in range(3):  # a window manager that is still busy may lose a key
        _xdotool("key", "--clearmodifiers", "alt+F4")
        with suppress(exceptions.TimeoutError):
            qtbot.waitUntil(lambda: not window.isVisible())
            break
    assert not window.isVisible()


def _xdotool(*command: str) -> str:
    return subprocess.run(["xdotool", *command], capture_output=True, text=True, check=True, timeout=20).stdout

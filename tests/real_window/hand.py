"""A hand on mouse and keyboard: real events through the X server, none made up inside the program."""

import subprocess
from collections.abc import Callable, Iterable

from PySide6.QtCore import QPoint
from PySide6.QtWidgets import QApplication, QWidget

STEPS = 24
"""Moves of one drag."""


def xdotool(*words: str | int) -> str:
    """Run one command of the tool and return what it prints."""
    command = ["xdotool", *(str(word) for word in words)]
    return subprocess.run(command, capture_output=True, text=True, check=True, timeout=20).stdout


def click(widget: QWidget) -> None:
    """Press and release the left button in the middle of a widget."""
    place = _global(widget, widget.rect().center())
    xdotool("mousemove", *place)
    xdotool("click", 1)
    QApplication.processEvents()


def drag(widget: QWidget, start: QPoint, end: QPoint, *, between: Callable[[], None] | None = None) -> None:
    """Take hold at one place of a widget and let go at another, in many small moves, between which events are handled.

    `between` is called after every move.
    """
    xdotool("mousemove", *_global(widget, start))
    xdotool("mousedown", 1)
    try:
        for place in _places(start, end):
            xdotool("mousemove", *_global(widget, place))
            QApplication.processEvents()
            if between is not None:
                between()
    finally:
        xdotool("mouseup", 1)
        QApplication.processEvents()


def press(keys: str) -> None:
    """Press keys such as ``ctrl+z``."""
    xdotool("key", "--clearmodifiers", keys)
    QApplication.processEvents()


def _places(start: QPoint, end: QPoint) -> Iterable[QPoint]:
    return [start + (end - start) * (step / STEPS) for step in range(1, STEPS + 1)]


def _global(widget: QWidget, place: QPoint) -> tuple[int, int]:
    at = widget.mapToGlobal(place)
    return at.x(), at.y()

"""Plots as pictures: into a file or onto the clipboard, at twice the size of the screen."""

from pathlib import Path
from typing import Protocol

from PySide6.QtCore import QPoint
from PySide6.QtGui import QGuiApplication, QImage, QPainter
from PySide6.QtWidgets import QWidget

from tuner.errors import TrimwrightError

SCALE = 2.0


class Pictured(Protocol):
    """What a picture can be had of."""

    @property
    def name(self) -> str:
        """What it is called."""
        ...

    @property
    def widget(self) -> QWidget:
        """What is in the picture."""
        ...


def picture(widget: QWidget) -> QImage:
    """Return a widget as a picture, with `SCALE` pixels for each of the screen's."""
    image = QImage((widget.size() * SCALE), QImage.Format.Format_RGB32)
    image.setDevicePixelRatio(SCALE)
    image.fill(widget.palette().color(widget.backgroundRole()))
    painter = QPainter(image)
    widget.render(painter, QPoint(0, 0))
    painter.end()
    return image


def save_picture(widget: QWidget, path: Path) -> None:
    """Write a widget as a PNG file.

    Raises
    ------
    TrimwrightError
        When the file cannot be written.
    """
    if not picture(widget).save(str(path), "PNG"):  # type: ignore[call-overload]  # the stubs want bytes, Qt wants text
        raise TrimwrightError(f"{path}: the picture cannot be written there")


def copy_picture(widget: QWidget) -> None:
    """Put a widget onto the clipboard as a picture."""
    QGuiApplication.clipboard().setImage(picture(widget))

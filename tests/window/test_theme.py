"""The look follows the desktop or stays as chosen, at once and everywhere."""

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication, QPalette
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from tuner.window.palette import palette, sizes
from tuner.window.theme import Theme, typeface


def test_a_choice_holds_at_once(theme: Theme, qtbot: QtBot) -> None:
    """Choosing dark changes colours and says so; choosing it again says nothing."""
    with qtbot.waitSignal(theme.changed):
        theme.choose("dark")
    assert theme.colour("page").name() == palette("dark").colours["page"]
    with qtbot.assertNotEmitted(theme.changed):
        theme.choose("dark")


def test_the_desktop_is_followed(qtbot: QtBot, monkeypatch: pytest.MonkeyPatch) -> None:
    """When the desktop turns dark, a theme that follows it does so while it runs; a chosen one stays."""
    theme, fixed = Theme("desktop"), Theme("light")
    monkeypatch.setattr("tuner.window.theme.desktop_shade", lambda: "dark")
    with qtbot.waitSignal(theme.changed):
        QGuiApplication.styleHints().colorSchemeChanged.emit(Qt.ColorScheme.Dark)
    assert theme.palette.shade == "dark"
    assert fixed.palette.shade == "light"


def test_the_application_is_dressed(theme: Theme, qtbot: QtBot) -> None:
    """Palette, font and style sheet of the application are those of the theme."""
    del qtbot
    application = QApplication.instance()
    assert isinstance(application, QApplication)
    theme.dress(application)
    assert application.palette().color(QPalette.ColorRole.Window).name() == palette("light").colours["page"]
    assert application.font().pixelSize() == sizes().body
    assert palette("light").colours["line"] in application.styleSheet()
    application.setStyleSheet("")


def test_the_typeface_comes_with_the_program(theme: Theme) -> None:
    """The first family is found, and its figures are of one width, so that numbers do not dance."""
    from PySide6.QtGui import QFontInfo, QFontMetricsF

    font = theme.font("body")
    assert QFontInfo(font).family() == "Inter"
    widths = {QFontMetricsF(font).horizontalAdvance(figure) for figure in "0123456789"}
    assert len(widths) == 1


def test_three_sizes(theme: Theme) -> None:
    """Small, body and title are those of the theme file."""
    found = [theme.font(size).pixelSize() for size in ("small", "body", "title")]
    assert found == [sizes().small, sizes().body, sizes().title]
    assert typeface("body", strong=True).weight() > typeface("body").weight()

"""The usual cautions, said once, where a loop is about to be trusted."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QLabel, QPushButton
from pytestqt.qtbot import QtBot

from tuner import __version__
from tuner.window.cautions import ABOUT, CAUTION, AboutDialog
from tuner.window.theme import Theme


def test_the_caution_says_what_stays_in_force() -> None:
    """No safety function, interlocks, trips, codes, practice, watched, hand on manual; and no longer than that."""
    for words in ("no safety function", "interlocks and trips", "codes and licensed practice", "watched", "on manual"):
        assert words in CAUTION
    assert len(CAUTION) < 250


def test_the_dialog_says_what_and_which_and_the_caution(qtbot: QtBot, theme: Theme) -> None:
    """Name and version, what the program does, and the caution once, all of it in sight."""
    dialog = AboutDialog(theme)
    qtbot.addWidget(dialog)
    dialog.show()
    labels = dialog.findChildren(QLabel)
    assert [label.text() for label in labels] == [f"Trimwright {__version__}", ABOUT, CAUTION]
    for label in labels:
        assert dialog.rect().contains(label.geometry())
        assert label.height() >= label.heightForWidth(label.width())


def test_the_dialog_is_closed_by_button_and_key(qtbot: QtBot, theme: Theme) -> None:
    """Its button closes it, and so does Escape."""
    dialog = AboutDialog(theme)
    qtbot.addWidget(dialog)
    dialog.show()
    (button,) = dialog.findChildren(QPushButton)
    QTest.mouseClick(button, Qt.MouseButton.LeftButton)
    assert not dialog.isVisible()
    dialog.show()
    QTest.keyClick(dialog, Qt.Key.Key_Escape)
    assert not dialog.isVisible()

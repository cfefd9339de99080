"""Hands that type and click, for the tests of the editors."""

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QComboBox, QLineEdit, QPlainTextEdit


def replace_text(line: QLineEdit | QPlainTextEdit, text: str) -> None:
    """Select everything and type a text over it."""
    line.setFocus()
    line.selectAll()
    if text:
        QTest.keyClicks(line, text)
    else:
        QTest.keyClick(line, Qt.Key.Key_Delete)


def enter(line: QLineEdit | QPlainTextEdit, text: str) -> None:
    """Type a text over everything and take it."""
    replace_text(line, text)
    QTest.keyClick(line, Qt.Key.Key_Return, Qt.KeyboardModifier.ControlModifier)


def choose(box: QComboBox, word: str) -> None:
    """Choose a word of a box as a hand does."""
    index = box.findText(word)
    assert index >= 0, f"{word!r} is not offered"
    box.setCurrentIndex(index)
    box.activated.emit(index)

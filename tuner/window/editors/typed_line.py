"""A line to type into, which keeps what was typed and says what is wrong with it."""

from collections.abc import Callable
from typing import Generic, TypeVar

from PySide6.QtCore import QEvent, Qt
from PySide6.QtGui import QFocusEvent, QHelpEvent, QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QLineEdit, QToolTip

from tuner.window.editors.intake import Intake, Words
from tuner.window.theme import Theme

Value = TypeVar("Value")

_BESIDE_TEXT = 18
"""Pixels of a line that its text cannot have: frame, padding and cursor."""


class TypedLine(QLineEdit, Generic[Value]):
    """A line whose text stands for a value: Enter takes it, Escape brings the last one back.

    Parameters
    ----------
    value, words, take
        As `Intake` has them.
    live : bool
        Whether it is taken after a pause in the typing, too.
    """

    def __init__(
        self, theme: Theme, value: Value, words: Words[Value], take: Callable[[Value], None], *, live: bool = True
    ) -> None:
        super().__init__()
        self._theme = theme
        self.intake = Intake(self, value, words, take)
        self.intake.setParent(self)
        self.intake.faulted.connect(self._on_faulted)
        self.textEdited.connect(lambda: self.intake.on_typed(live=live))

    def typed(self) -> str:
        """Return the text."""
        return self.text()

    def write(self, text: str) -> None:
        """Replace the text, its beginning in sight."""
        self.setText(text)
        self.setCursorPosition(0)

    def width_of_text(self) -> int:
        """Return the width at which the text is seen whole, pixels."""
        return self.fontMetrics().horizontalAdvance(self.text()) + _BESIDE_TEXT

    def event(self, event: QEvent) -> bool:
        """Say the whole text on hovering where it does not fit."""
        if isinstance(event, QHelpEvent) and self.width_of_text() > self.width():
            QToolTip.showText(event.globalPos(), self.text(), self)
            return True
        return super().event(event)

    def _on_faulted(self, sentence: str) -> None:
        self.setAccessibleDescription(sentence)
        self.update()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Take on Enter, take back on Escape."""
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.intake.leave()
            self.selectAll()
        elif event.key() == Qt.Key.Key_Escape and self.intake.pending:
            self.intake.restore()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Take what was typed when the line is left; one that goes out of sight was not left by the hand."""
        super().focusOutEvent(event)
        if self.isVisible() and event.reason() != Qt.FocusReason.PopupFocusReason:
            self.intake.leave()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Underline what is wrong."""
        super().paintEvent(event)
        if self.intake.fault:
            painter = QPainter(self)
            painter.fillRect(1, self.height() - 2, self.width() - 2, 2, self._theme.colour("lost"))
            painter.end()

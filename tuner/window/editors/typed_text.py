"""A few lines to type into, with the place marked where what was typed goes wrong."""

from collections.abc import Callable
from typing import Generic, TypeVar

from PySide6.QtCore import QSize, Qt
from PySide6.QtGui import QFocusEvent, QKeyEvent, QPainter, QPaintEvent, QTextCharFormat, QTextCursor
from PySide6.QtWidgets import QPlainTextEdit, QTextEdit

from tuner.errors import FormulaError, SheetError, TrimwrightError
from tuner.window.editors.intake import Intake, Words
from tuner.window.theme import Theme

Value = TypeVar("Value")


class TypedText(QPlainTextEdit, Generic[Value]):
    """Text that stands for a value; like `TypedLine`, of several lines.

    Parameters
    ----------
    value, words, take
        As `Intake` has them.
    lines : int
        Lines in sight.
    """

    def __init__(
        self, theme: Theme, value: Value, words: Words[Value], take: Callable[[Value], None], *, lines: int = 3
    ) -> None:
        super().__init__()
        self._theme, self._lines = theme, lines
        self.takes_enter = False
        self._writing = False
        self.setTabChangesFocus(True)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.intake = Intake(self, value, words, take)
        self.intake.setParent(self)
        self.intake.faulted.connect(self._on_faulted)
        self.textChanged.connect(self._on_changed)
        self.setFixedHeight(self.sizeHint().height())

    def take_rows(self) -> None:
        """Let Enter begin a new line, and lines be as long as they are."""
        self.takes_enter = True
        self.setLineWrapMode(QPlainTextEdit.LineWrapMode.NoWrap)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAsNeeded)

    def typed(self) -> str:
        """Return the text."""
        return self.toPlainText()

    def write(self, text: str) -> None:
        """Replace the text."""
        self._writing = True
        self.setPlainText(text)
        self._writing = False

    def fault_position(self) -> int | None:
        """Return the index of the character where what was typed goes wrong, None when no one character is to blame."""
        return _position(self.intake.fault)

    def marked_characters(self) -> list[int]:
        """Return the indices of the characters marked as faulty."""
        return [selection.cursor.selectionStart() for selection in self.extraSelections()]

    def sizeHint(self) -> QSize:
        """Return the size that shows the lines."""
        return QSize(240, self._lines * self.fontMetrics().lineSpacing() + 16)

    def _on_changed(self) -> None:
        if not self._writing:
            self.intake.on_typed(live=True)

    def _on_faulted(self, sentence: str) -> None:
        self.setAccessibleDescription(sentence)
        self.setExtraSelections(self._marked())
        self.viewport().update()

    def _marked(self) -> list[QTextEdit.ExtraSelection]:
        """Return the mark under the faulty character; at the end of the text, under the last one."""
        position = self.fault_position()
        if position is None or not self.typed():
            return []
        cursor = QTextCursor(self.document())
        start = min(position, len(self.typed()) - 1)
        cursor.setPosition(start)
        cursor.setPosition(start + 1, QTextCursor.MoveMode.KeepAnchor)
        look = QTextCharFormat()
        look.setUnderlineStyle(QTextCharFormat.UnderlineStyle.WaveUnderline)
        look.setUnderlineColor(self._theme.colour("lost"))
        look.setForeground(self._theme.colour("lost_word"))
        mark = QTextEdit.ExtraSelection()
        mark.cursor, mark.format = cursor, look
        return [mark]

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Take on Enter where it begins no new line, take back on Escape."""
        enter = event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter)
        if enter and (not self.takes_enter or event.modifiers() & Qt.KeyboardModifier.ControlModifier):
            self.intake.leave()
        elif event.key() == Qt.Key.Key_Escape and self.intake.pending:
            self.intake.restore()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Take what was typed when the text is left; one that goes out of sight was not left by the hand."""
        super().focusOutEvent(event)
        if self.isVisible() and event.reason() != Qt.FocusReason.PopupFocusReason:
            self.intake.leave()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Underline the whole where no one character is to blame."""
        super().paintEvent(event)
        if self.intake.fault and self.fault_position() is None:
            painter = QPainter(self.viewport())
            ground = self.viewport().rect()
            painter.fillRect(0, ground.height() - 2, ground.width(), 2, self._theme.colour("lost"))
            painter.end()


def _position(fault: TrimwrightError | None) -> int | None:
    if isinstance(fault, FormulaError):
        return fault.position
    if isinstance(fault, SheetError):
        return next((one.position for one in fault.faults if one.position is not None), None)
    return None

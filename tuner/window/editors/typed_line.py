"""A line to type into, which keeps what was typed and says what is wrong with it."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Generic, TypeVar

from PySide6.QtCore import Qt, QTimer, Signal
from PySide6.QtGui import QFocusEvent, QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QLineEdit

from tuner.errors import TrimwrightError
from tuner.window.theme import Theme

PAUSE = 300
"""Milliseconds without a key after which what was typed is taken."""

Value = TypeVar("Value")


@dataclass(frozen=True, slots=True)
class Words(Generic[Value]):
    """How values are read from text, with a `TrimwrightError` where that fails, and written as text."""

    read: Callable[[str], Value]
    write: Callable[[Value], str]


class TypedLine(QLineEdit, Generic[Value]):
    """A line whose text stands for a value.

    What can be read is taken on Enter, on leaving, and, when `live`, after a short pause; Escape brings the last value
    back. What cannot be read stays as typed, underlined, until it is put right.

    Parameters
    ----------
    value : object
        What is shown first.
    words : Words
        Turn a text into a value and back.
    take : callable
        Is given each value; may refuse it with a `TrimwrightError`.
    """

    faulted = Signal(str)
    """The sentence on what is wrong; empty once nothing is."""
    left = Signal()
    """Enter was pressed, or the line was left."""

    def __init__(
        self,
        theme: Theme,
        value: Value,
        words: Words[Value],
        take: Callable[[Value], None],
        *,
        live: bool = True,
    ) -> None:
        super().__init__()
        self._theme, self._read, self._write, self._take = theme, words.read, words.write, take
        self._value = value
        self.fault = ""
        self.setText(self._write(value))
        self._pause = QTimer(self, singleShot=True, interval=PAUSE)
        self._pause.timeout.connect(self._on_pause)
        self.textEdited.connect(lambda: self._pause.start() if live else None)

    def show_value(self, value: Value, *, anew: bool = False) -> None:
        """Show a value; text that stands for it already, or was typed since it was shown, is left as it is.

        `anew` shows it whatever was typed: another sheet was opened.
        """
        if value == self._value and not anew and (self.fault or self.hasFocus()):
            return
        if value == self._value and self.text() == self._write(value):
            return
        self._value = value
        self._restore()

    def commit(self) -> bool:
        """Take what is typed; tell whether it could be."""
        self._pause.stop()
        if not self.isModified() and not self.fault:
            return True
        try:
            value = self._read(self.text())
            if value != self._value:
                self._offer(value)
        except TrimwrightError as refusal:
            self._set_fault(str(refusal))
            return False
        self._set_fault("")
        return True

    def _offer(self, value: Value) -> None:
        """Hand a value on; it counts as shown already, so that its echo leaves the text alone."""
        before, self._value = self._value, value
        try:
            self._take(value)
        except TrimwrightError:
            self._value = before
            raise

    def _restore(self) -> None:
        self._pause.stop()
        self.setText(self._write(self._value))
        self.setCursorPosition(0)
        self._set_fault("")

    def _on_pause(self) -> None:
        self.commit()

    def _set_fault(self, sentence: str) -> None:
        if sentence == self.fault:
            return
        self.fault = sentence
        self.setAccessibleDescription(sentence or self.toolTip())
        self.faulted.emit(sentence)
        self.update()

    def _leave(self) -> None:
        if self.commit():
            self.setText(self._write(self._value))
        self.left.emit()

    # Qt ---------------------------------------------------------------------------------------------------------

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Take on Enter, take back on Escape."""
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self._leave()
            self.selectAll()
        elif event.key() == Qt.Key.Key_Escape and (self.isModified() or self.fault):
            self._restore()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Take what was typed when the line is left."""
        super().focusOutEvent(event)
        if event.reason() != Qt.FocusReason.PopupFocusReason:
            self._leave()

    def paintEvent(self, event: QPaintEvent) -> None:
        """Underline what is wrong."""
        super().paintEvent(event)
        if self.fault:
            painter = QPainter(self)
            painter.fillRect(1, self.height() - 2, self.width() - 2, 2, self._theme.colour("lost"))
            painter.end()

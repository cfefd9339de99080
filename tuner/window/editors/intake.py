"""What is being typed in one place: when it is taken, what it stands for, and what is wrong with it."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Generic, Protocol, TypeVar

from PySide6.QtCore import QObject, QTimer, Signal

from tuner.errors import TrimwrightError
from tuner.session.checks import sentence

PAUSE = 300
"""Milliseconds without a key after which what was typed is taken."""

Value = TypeVar("Value")


@dataclass(frozen=True, slots=True)
class Words(Generic[Value]):
    """How values are read from text, with a `TrimwrightError` where that fails, and written as text."""

    read: Callable[[str], Value]
    write: Callable[[Value], str]


class Typist(Protocol):
    """The widget that is typed in."""

    def typed(self) -> str:
        """Return its text."""

    def write(self, text: str) -> None:
        """Replace its text."""

    def isVisible(self) -> bool:  # Qt's name
        """Tell whether it is in sight."""

    def hasFocus(self) -> bool:  # Qt's name
        """Tell whether it is being typed in."""


class Intake(QObject, Generic[Value]):
    """Takes text as a value on Enter, on leaving and after a pause; text that cannot be read stays until it is right.

    Parameters
    ----------
    typist : Typist
        The widget typed in.
    value : object
        What is shown first.
    words : Words
        Turn a text into a value and back.
    take : callable
        Is given each new value; may refuse it with a `TrimwrightError`.
    """

    faulted = Signal(str)
    """The sentence on what is wrong; empty once nothing is."""
    left = Signal()
    """Enter was pressed, or the place was left."""

    def __init__(self, typist: Typist, value: Value, words: Words[Value], take: Callable[[Value], None]) -> None:
        super().__init__()
        self._typist, self._words, self._take = typist, words, take
        self._value, self._touched = value, False
        self.path = ""
        self.fault: TrimwrightError | None = None
        self._pause = QTimer(self)
        self._pause.setSingleShot(True)
        self._pause.setInterval(PAUSE)
        self._pause.timeout.connect(self._on_pause)
        typist.write(words.write(value))

    @property
    def value(self) -> Value:
        """What is shown, or was taken last."""
        return self._value

    @property
    def sentence(self) -> str:
        """What is wrong with what was typed, empty when nothing is."""
        return sentence(self.fault, self.path) if self.fault else ""

    @property
    def pending(self) -> bool:
        """Whether something was typed that was not taken."""
        return self._touched or self.fault is not None

    def best(self) -> Value:
        """Return the value of what is typed where it can be read, though it was not taken; else the last one."""
        if not self.pending:
            return self._value
        try:
            return self._words.read(self._typist.typed())
        except TrimwrightError:
            return self._value

    def on_typed(self, *, live: bool) -> None:
        """Note that a key changed the text."""
        self._touched = True
        if live:
            self._pause.start()

    def show_value(self, value: Value, *, anew: bool = False) -> None:
        """Show a value; text typed since the same value was shown is left as it is.

        `anew` shows it whatever was typed: another sheet was opened.
        """
        if value == self._value and not anew and (self.pending or self._typist.hasFocus()):
            return
        if value == self._value and self._typist.typed() == self._words.write(value):
            return
        self._value = value
        self.restore()

    def restore(self) -> None:
        """Bring the text of the last value back."""
        self._pause.stop()
        self._touched = False
        self._typist.write(self._words.write(self._value))
        self._set_fault(None)

    def commit(self) -> bool:
        """Take what is typed; tell whether it could be."""
        self._pause.stop()
        if not self.pending:
            return True
        try:
            value = self._words.read(self._typist.typed())
            if value != self._value:
                self._offer(value)
        except TrimwrightError as refusal:
            self._set_fault(refusal)
            return False
        self._touched = False
        self._set_fault(None)
        return True

    def leave(self) -> None:
        """Take what is typed and show it tidily; then the change is whole."""
        if self.commit() and self._typist.typed() != self._words.write(self._value):
            self._typist.write(self._words.write(self._value))
        self.left.emit()

    def _on_pause(self) -> None:
        if self._typist.isVisible():
            self.commit()

    def _offer(self, value: Value) -> None:
        """Hand a value on; it counts as shown already, so that its echo leaves the text alone."""
        before, self._value = self._value, value
        self._touched = True
        try:
            self._take(value)
        except TrimwrightError:
            self._value = before
            raise

    def _set_fault(self, fault: TrimwrightError | None) -> None:
        before, self.fault = self.sentence, fault
        if fault is not None or before:
            self.faulted.emit(self.sentence)

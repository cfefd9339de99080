"""A few words beside one another, one of them chosen."""

from collections.abc import Callable, Sequence

from PySide6.QtCore import QEvent, QObject, Qt
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QHBoxLayout, QPushButton, QWidget

from tuner.window.theme import Theme

_LOOK = """
QPushButton {{ border: 1px solid {line}; border-left-width: {left}px; border-radius: 0; padding: 2px 8px;
    background: {field}; color: {quiet}; }}
QPushButton:hover {{ background: {hover}; }}
QPushButton:checked {{ background: {nominal_word}; color: {on_accent}; border-color: {nominal_word}; }}
QPushButton:focus {{ border-color: {nominal}; }}
QPushButton:checked:focus {{ border-color: {ink}; }}
"""

_STEPS = {Qt.Key.Key_Right: 1, Qt.Key.Key_Left: -1}


class Segments(QWidget):
    """A small segmented control; it shows a choice when told to, and only says what the hand chose."""

    def __init__(
        self, words: Sequence[str], theme: Theme, choose: Callable[[str], None], parent: QWidget | None = None
    ) -> None:
        super().__init__(parent)
        self._theme, self._choose = theme, choose
        self._chosen = ""
        self.buttons = {word: QPushButton(word) for word in words}
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(0)
        for word, button in self.buttons.items():
            button.setCheckable(True)
            button.clicked.connect(lambda _checked=False, word=word: self._on_clicked(word))
            button.installEventFilter(self)
            row.addWidget(button)
        row.addStretch(1)
        theme.changed.connect(self._dress)
        self._dress()

    def show_choice(self, word: str) -> None:
        """Show which word is chosen."""
        self._chosen = word
        for other, button in self.buttons.items():
            button.setChecked(other == word)
            button.setFocusPolicy(Qt.FocusPolicy.StrongFocus if other == word else Qt.FocusPolicy.ClickFocus)

    def setAccessibleName(self, name: str) -> None:
        """Take a name for assistive technology, said before each word."""
        super().setAccessibleName(name)
        for word, button in self.buttons.items():
            button.setAccessibleName(f"{name}: {word}")

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Choose the neighbour by the arrows, where a button would only move the focus."""
        step = _STEPS.get(Qt.Key(event.key()), 0) if isinstance(event, QKeyEvent) else 0
        if not step or self._chosen not in self.buttons:
            return super().eventFilter(watched, event)
        if event.type() == QEvent.Type.KeyPress:
            words = list(self.buttons)
            self._on_clicked(words[(words.index(self._chosen) + step) % len(words)])
            self.buttons[self._chosen].setFocus(Qt.FocusReason.OtherFocusReason)
        return True

    def _on_clicked(self, word: str) -> None:
        self.show_choice(self._chosen)
        if word != self._chosen:
            self._choose(word)

    def _dress(self) -> None:
        for index, button in enumerate(self.buttons.values()):
            button.setStyleSheet(_LOOK.format(**self._theme.palette.colours, left=0 if index else 1))

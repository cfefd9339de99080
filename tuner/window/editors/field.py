"""A field: a label, something to set a value with, its unit, and a sentence underneath when it is wrong."""

from collections.abc import Callable
from typing import Protocol

from PySide6.QtCore import QEvent, QTimer
from PySide6.QtWidgets import QApplication, QGridLayout, QLabel, QScrollArea, QSizePolicy, QVBoxLayout, QWidget

from tuner.errors import TrimwrightError
from tuner.session.checks import sentence
from tuner.window.elided import ElidedLabel
from tuner.window.theme import Theme

LABEL_WIDTH, UNIT_WIDTH = 108, 52

_ROUNDS = 3
"""Times that a page is laid out before it is seen: for what it needs, and for a scroll bar that comes of it."""


class FaultLine(QLabel):
    """Says under a control what is wrong with what was typed there; takes no room while nothing is."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.setWordWrap(True)
        self.setFont(theme.font("small"))
        self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Minimum)
        self.hide()
        self._laid_out = QTimer(self, singleShot=True, interval=0)
        self._laid_out.timeout.connect(self._come_in_sight)
        theme.changed.connect(self._dress)
        self._dress()

    def say(self, words: str) -> None:
        """Say a sentence, or nothing."""
        begins_with_key = "." in words.partition(" ")[0]
        self.setText(words if begins_with_key else words[:1].upper() + words[1:])
        self.setVisible(bool(words))
        if words:
            self._laid_out.start()

    def attempt(self, change: Callable[[], None], path: str = "") -> bool:
        """Make a change and tell whether it was made; say why it was refused, leaving out the `path` it concerns."""
        try:
            change()
        except TrimwrightError as refusal:
            self.say(sentence(refusal, path))
            return False
        self.say("")
        return True

    def _come_in_sight(self) -> None:
        """Scroll the page so far that the sentence is read, once it is laid out."""
        above = self.parentWidget()
        while above is not None and not isinstance(above, QScrollArea):
            above = above.parentWidget()
        if above is not None and self.isVisible():
            above.ensureWidgetVisible(self, 0, 4)

    def _dress(self) -> None:
        self.setStyleSheet(f"color: {self._theme.palette.colours['lost_word']};")


class Note(QLabel):
    """A quiet sentence."""

    def __init__(self, theme: Theme, text: str = "") -> None:
        super().__init__(text)
        self.setWordWrap(True)
        self.setFont(theme.font("small"))
        self.setProperty("voice", "quiet")
        self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Minimum)
        self.setVisible(bool(text))

    def say(self, text: str) -> None:
        """Say another sentence, or nothing."""
        self.setText(text)
        self.setVisible(bool(text))


def heading(theme: Theme, text: str) -> QLabel:
    """Return the heading of a group of fields."""
    label = QLabel(text)
    label.setFont(theme.font("body", strong=True))
    label.setContentsMargins(0, 8, 0, 0)
    return label


def unit_label() -> ElidedLabel:
    """Return the place of a unit behind a control."""
    label = ElidedLabel(stretch=False)
    label.setProperty("voice", "quiet")
    label.setFixedWidth(UNIT_WIDTH)
    return label


class Field(QWidget):
    """One labelled control of a page.

    Parameters
    ----------
    label : str
        Before the control; empty lets the control have the whole width.
    sentence : str
        What it is, shown on hovering.
    control : QWidget
        What sets the value.
    above : bool
        Whether the label stands above the control, which then has the whole width.
    """

    def __init__(self, theme: Theme, label: str, sentence: str, control: QWidget, *, above: bool = False) -> None:
        super().__init__()
        self.control = control
        self.unit = unit_label()
        self.fault = FaultLine(theme)
        name = QLabel(label)
        name.setFixedWidth(LABEL_WIDTH)
        name.setBuddy(control)
        grid = QGridLayout(self)
        grid.setContentsMargins(0, 0, 0, 0)
        grid.setHorizontalSpacing(4)
        grid.setVerticalSpacing(2)
        grid.addWidget(name, 0, 0)
        if above:
            grid.addWidget(control, 1, 0, 1, 3)
        else:
            grid.addWidget(control, 0, 1)
            grid.addWidget(self.unit, 0, 2)
        grid.addWidget(self.fault, 2, 0 if above else 1, 1, 3 if above else 2)
        grid.setColumnStretch(1, 1)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Fixed)
        self.setToolTip(sentence)
        control.setAccessibleName(label)


class Part(Protocol):
    """Something on a page that shows what the document holds."""

    def refresh(self, *, anew: bool) -> None:
        """Show what the document holds; whatever was typed goes when `anew`."""


class Page(QWidget):
    """The page of one block: parts under one another, each showing what the document holds."""

    def __init__(self) -> None:
        super().__init__()
        self._parts: list[Part] = []
        self.column = QVBoxLayout(self)
        self.column.setContentsMargins(8, 4, 8, 8)
        self.column.setSpacing(4)
        self.column.addStretch(1)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Maximum)

    def add(self, widget: QWidget, part: Part | None = None) -> None:
        """Put a widget under the last one, and the part, if it is one, on the round of refreshing."""
        self.column.insertWidget(self.column.count() - 1, widget)
        if part is not None:
            self._parts.append(part)

    def refresh(self, *, anew: bool) -> None:
        """Show what the document holds."""
        for part in self._parts:
            part.refresh(anew=anew)

    def settle(self) -> None:
        """Lay everything out at once, so that nothing is seen half laid out."""
        for _ in range(_ROUNDS):
            before = self.size()
            self._lay_out()
            if self.size() == before:
                return

    def _lay_out(self) -> None:
        """Lay out the inner parts first, then the page, and let what scrolls it hear of its size."""
        for inner in reversed(self.findChildren(QWidget)):
            layout = inner.layout()
            if layout is not None and not inner.isHidden():
                layout.activate()
        self.column.activate()
        if (around := self.parentWidget()) is not None:
            QApplication.sendEvent(around, QEvent(QEvent.Type.LayoutRequest))

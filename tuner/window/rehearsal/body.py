"""Where everything on the page of the rehearsal stands."""

from collections.abc import Sequence
from typing import Final

from PySide6.QtCore import Qt
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QHBoxLayout, QLabel, QScrollArea, QVBoxLayout, QWidget

from tuner.rehearse.wording import CAUTION
from tuner.window.elided import ElidedLabel
from tuner.window.rehearsal.bar import Bar
from tuner.window.seen import Seen
from tuner.window.theme import Theme

_COLUMN: Final = 256

_WIDE: Final = 880
"""Pixels at which everything has room in one row."""


class Body(Seen):
    """The widget of the page: a row on top, the chart beside a column for the hand, and words underneath.

    Parameters
    ----------
    bar, chart : Bar, QWidget
        The row and the chart.
    column : sequence of QWidget
        What stands in the column, from the top.
    words : tuple of QLabel
        Three lines; the caution stands behind the last one.
    """

    def __init__(
        self, theme: Theme, bar: Bar, chart: QWidget, column: Sequence[QWidget], words: tuple[QLabel, QLabel, QLabel]
    ) -> None:
        super().__init__()
        self._bar = bar
        self._wide: bool | None = None
        row = QHBoxLayout()
        row.setSpacing(0)
        row.addWidget(chart, 1)
        row.addWidget(self._column(column))
        whole = QVBoxLayout(self)
        whole.setContentsMargins(0, 0, 0, 0)
        whole.setSpacing(0)
        whole.addWidget(bar)
        whole.addLayout(row, 1)
        whole.addLayout(_under(theme, words))

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Put record and demonstration into the row where it is wide enough, else below in the column."""
        super().resizeEvent(event)
        wide = event.size().width() >= _WIDE
        if wide != self._wide:
            self._wide = wide
            if wide:
                self._bar.take_apart()
            else:
                self._shelf.addWidget(self._bar.apart)

    def _column(self, parts: Sequence[QWidget]) -> QScrollArea:
        inside = QWidget()
        column = QVBoxLayout(inside)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(4)
        for part in parts:
            column.addWidget(part)
        self._shelf = QVBoxLayout()
        self._shelf.setContentsMargins(8, 4, 8, 8)
        column.addLayout(self._shelf)
        column.addStretch(1)
        area = QScrollArea()
        area.setWidgetResizable(True)
        area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        area.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        area.setFixedWidth(_COLUMN)
        area.setWidget(inside)
        return area


def _under(theme: Theme, words: tuple[QLabel, QLabel, QLabel]) -> QVBoxLayout:
    """Return the lines of words, the caution said once in the last of them."""
    caution = ElidedLabel(CAUTION, Qt.AlignmentFlag.AlignRight)
    caution.setProperty("voice", "quiet")
    caution.setFont(theme.font("small"))
    last = QHBoxLayout()
    last.setSpacing(12)
    last.addWidget(words[-1], 1)
    last.addWidget(caution, 1)
    column = QVBoxLayout()
    column.setContentsMargins(8, 0, 8, 4)
    column.setSpacing(2)
    for line in words[:-1]:
        column.addWidget(line)
    column.addLayout(last)
    return column

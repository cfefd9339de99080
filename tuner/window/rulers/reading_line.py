"""The line under the rulers: what holds at the place that is looked at, and else what the patterns mean."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from PySide6.QtCore import QPointF, QSize, Qt
from PySide6.QtGui import QFontMetrics, QPainter, QPaintEvent, QResizeEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, WORDS
from tuner.window.rulers.strip import class_strip
from tuner.window.theme import Theme

HEIGHT = 24
_SWATCH = (20, 10)
_GAP, _FAR, _INDENT = 6, 20, 12

ROLES = {FIRM: "firm_word", SOFT: "soft_word", LOST: "lost_word", UNKNOWN: "quiet"}
"""The colour of a class in words."""


@dataclass(frozen=True, slots=True)
class Piece:
    """Some words of the line: the swatch of a class before them, their colour, whether they are set in strong type."""

    text: str
    swatch: int | None = None
    role: str = "quiet"
    strong: bool = False
    gap: int = _GAP


CLASSES = (
    Piece("firm: the whole family meets every limit", FIRM, gap=_FAR),
    Piece("soft: stable, but a limit is missed", SOFT, gap=_FAR),
    Piece("lost: unstable for some plant", LOST, gap=_FAR),
)
LEGEND = (*CLASSES, Piece("Alt and an arrow key go to the next edge"))


class ReadingLine(QWidget):
    """One line of words that never asks for more room than it has; what does not fit is said in its tip."""

    def __init__(self, theme: Theme, parent: QWidget | None = None, *, legend: Sequence[Piece] = LEGEND) -> None:
        super().__init__(parent)
        self._theme, self._legend = theme, legend
        self._pieces: tuple[Piece, ...] = ()
        self.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Fixed)
        theme.changed.connect(self.update)
        self.show_legend()

    def show_legend(self) -> None:
        """Say what the patterns mean."""
        self._show(self._legend)

    def show_note(self, sentence: str) -> None:
        """Say why the rulers are grey."""
        self._show([Piece(sentence, UNKNOWN)])

    def show_place(self, place: str, grade: int, sentence: str) -> None:
        """Say what holds at a place of a ruler: the place and its value, the class, and why."""
        word = WORDS[grade] if grade != UNKNOWN else "not known yet"
        self._show([Piece(place, grade, "ink", strong=True), Piece(word, role=ROLES[grade]), Piece(sentence)])

    def text(self) -> str:
        """Return all the words."""
        return "  ".join(piece.text for piece in self._pieces if piece.text)

    def sizeHint(self) -> QSize:
        """Ask for the height of a line."""
        return QSize(200, HEIGHT)

    def minimumSizeHint(self) -> QSize:
        """Ask for the height of a line and for no width."""
        return QSize(0, HEIGHT)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Give or take the tip as the room changes."""
        super().resizeEvent(event)
        self._tip()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the words as far as there is room."""
        painter = QPainter(self)
        x = _INDENT
        for piece in self._pieces:
            x = self._paint(painter, piece, x)

    def _show(self, pieces: Sequence[Piece]) -> None:
        shown = tuple(piece for piece in pieces if piece.text)
        if shown != self._pieces:
            self._pieces = shown
            self.setAccessibleName(self.text())
            self._tip()
            self.update()

    def _paint(self, painter: QPainter, piece: Piece, x: int) -> int:
        """Paint a piece and return where the next one begins."""
        middle = self.height() / 2.0
        if piece.swatch is not None:
            width, height = _SWATCH
            if x + width < self.width():
                picture = class_strip(np.array([piece.swatch]), width, height, self._theme)
                painter.drawImage(QPointF(x, middle - height / 2.0), picture)
            x += width + _GAP
        painter.setFont(self._theme.font("small", strong=piece.strong))
        painter.setPen(self._theme.colour(piece.role))
        metrics = painter.fontMetrics()
        text = metrics.elidedText(piece.text, Qt.TextElideMode.ElideRight, max(self.width() - x, 0))
        painter.drawText(QPointF(x, middle + (metrics.ascent() - metrics.descent()) / 2.0), text)
        return x + metrics.horizontalAdvance(piece.text) + piece.gap

    def _tip(self) -> None:
        self.setToolTip(self.text() if self._wished_width() > self.width() else "")

    def _wished_width(self) -> int:
        return _INDENT + sum(self._width(piece) + piece.gap for piece in self._pieces)

    def _width(self, piece: Piece) -> int:
        metrics = QFontMetrics(self._theme.font("small", strong=piece.strong))
        return metrics.horizontalAdvance(piece.text) + (0 if piece.swatch is None else _SWATCH[0] + _GAP)

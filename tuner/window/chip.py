"""One limit of the ribbon: measure, value against limit, the plant that is worst, and what earlier tunings came to."""

from dataclasses import dataclass
from typing import Literal

from PySide6.QtCore import QRectF, QSize, Qt, Signal
from PySide6.QtGui import QColor, QFontMetrics, QKeyEvent, QMouseEvent, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QSizePolicy, QWidget

from tuner.judge.assessment import LimitResult
from tuner.judge.overlay import at_plant
from tuner.judge.wording import minus, number, quantity, told_apart, unit_of
from tuner.model.loop import Loop
from tuner.model.measures import BY_NAME
from tuner.window.earlier import EarlierWords
from tuner.window.signs import Sign, draw_sign
from tuner.window.theme import Theme

Standing = Literal["met", "missed", "unstable", "waiting", "failed"]

ROLE: dict[Standing, str] = {
    "met": "firm_word",
    "missed": "lost_word",
    "unstable": "lost_word",
    "waiting": "quiet",
    "failed": "lost_word",
}
SIGN: dict[Standing, Sign] = {
    "met": "tick",
    "missed": "cross",
    "unstable": "runaway",
    "waiting": "ring",
    "failed": "cross",
}
_GAP, _SIGN_SIZE = 4, 12
_WIDEST_PLANT = 184
_TYPICAL = "found 0.000 s"
"""For which room is kept before it is known."""
_PALE = 0.45
"""How much of a chip shows that is not true of the present tuning any more."""


@dataclass(frozen=True, slots=True)
class ChipWords:
    """What one chip says."""

    measure: str
    value: str
    limit: str
    plant: str
    standing: Standing
    is_looked_at: bool = False
    earlier: tuple[EarlierWords, ...] = ()

    def sentence(self) -> str:
        """Return all of it for a screen reader."""
        looked_at = ", looked at" if self.is_looked_at else ""
        before = "".join(f", {one.short}" for one in self.earlier)
        return f"{self.measure} {self.value}, limit {self.limit}, {self.standing}, {self.plant}{looked_at}{before}"


def chip_words(result: LimitResult, loop: Loop, *, stable: bool) -> ChipWords:
    """Return the words of a limit's chip; with an unstable loop a measure that does not exist is named unstable."""
    facts, unit = BY_NAME[result.measure], unit_of(result.measure, loop)
    sign = "≥" if facts.at_least else "≤"
    size = abs(result.value) if facts.by_size and result.value is not None else result.value
    value = _figures(size, result.limit, unit) if size is not None else "none" if result.met else "—"
    standing: Standing = "met" if result.met else "unstable" if result.value is None and not stable else "missed"
    limit = f"{sign} {quantity(result.limit, unit)}"
    return ChipWords(facts.label, value, limit, at_plant(result.plant).strip(), standing)


def _figures(value: float, limit: float, unit: str) -> str:
    """Return a value with three figures, more where they are needed to tell it from its limit."""
    digits = 3 if number(value, 3) != number(limit, 3) else min(told_apart(value, limit), 6)
    return minus(quantity(value, unit, digits)).replace("inf", "∞")


def _rounded(width: int) -> int:
    """Return a width that small changes of words do not change."""
    return -(-width // 16) * 16 + 2 * _GAP


class Chip(QWidget):
    """One limit: measure, value against limit, and the plant that is worst; pressed, it asks for that plant."""

    chosen = Signal()

    def __init__(self, words: ChipWords, tip: str, theme: Theme) -> None:
        super().__init__()
        self._theme, self.words = theme, words
        self._width = self._beside = 0
        self.is_late = self.is_roomy = False
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setSizePolicy(QSizePolicy.Policy.Fixed, QSizePolicy.Policy.Fixed)
        self.show_words(words, tip)

    def show_words(self, words: ChipWords, tip: str) -> None:
        """Show another result."""
        if words.measure != self.words.measure:
            self._width = self._beside = 0
        self.words = words
        self.setToolTip(tip)
        self.setAccessibleName(words.sentence())
        self.setAccessibleDescription(tip)
        self.update()

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Ask for the plant."""
        if event.button() == Qt.MouseButton.LeftButton:
            self.chosen.emit()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Ask for the plant by the space bar or the return key."""
        if event.key() in (Qt.Key.Key_Space, Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.chosen.emit()
        else:
            super().keyPressEvent(event)

    def sizeHint(self) -> QSize:
        """Return a width that holds the widest words so far, so that nothing jumps while a value changes."""
        small, strong = self._metrics()
        return QSize(self.width_with(roomy=self.is_roomy), 2 * small.height() + strong.height() + 2 * _GAP)

    def width_with(self, *, roomy: bool) -> int:
        """Return how wide the chip is, with or without room for a value as found beside the present one."""
        small, strong = self._metrics()
        first = small.horizontalAdvance(f"{self.words.measure}  {self.words.standing}") + _SIGN_SIZE + 2 * _GAP
        second = max(strong.horizontalAdvance("0.000"), strong.horizontalAdvance(self.words.value))
        second += small.horizontalAdvance(self.words.limit) + 2 * _GAP
        third = min(small.horizontalAdvance(self.words.plant), _WIDEST_PLANT)
        self._width = max(self._width, _rounded(max(first, second, third, 112)))
        before = small.horizontalAdvance("  ".join(one.short for one in self.words.earlier) or _TYPICAL)
        self._beside = max(self._beside, before)
        return max(self._width, _rounded(second + 2 * _GAP + self._beside)) if roomy else self._width

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the sign and three lines."""
        painter = QPainter(self)
        painter.setOpacity(_PALE if self.is_late else 1.0)
        small, strong = self._metrics()
        left, top = _GAP, _GAP
        role = self._theme.colour(ROLE[self.words.standing])
        self._paint_edge(painter, role)
        draw_sign(painter, SIGN[self.words.standing], QRectF(left, top + 1, _SIGN_SIZE, _SIGN_SIZE), role)
        x = self._write(painter, left + _SIGN_SIZE + _GAP, top + small.ascent(), self.words.measure, "quiet")
        self._write(painter, x + 2 * _GAP, top + small.ascent(), self.words.standing, ROLE[self.words.standing])
        middle = top + small.height() + strong.ascent()
        painter.setFont(self._theme.font("body", strong=True))
        painter.setPen(self._theme.colour("ink" if self.words.standing == "met" else "lost_word"))
        painter.drawText(left, middle, self.words.value)
        x = left + strong.horizontalAdvance(self.words.value) + 2 * _GAP
        x = self._write(painter, x, middle, self.words.limit, "quiet")
        self._write(painter, x + 2 * _GAP, middle, self._earlier(small, self.width() - x - 3 * _GAP), "kept_word")
        bottom = top + small.height() + strong.height() + small.ascent()
        plant = small.elidedText(self.words.plant, Qt.TextElideMode.ElideRight, self.width() - 2 * _GAP)
        self._write(painter, left, bottom, plant, "nominal_word" if self.words.is_looked_at else "quiet")

    def _earlier(self, metrics: QFontMetrics, room: int) -> str:
        """Return as many earlier values as there is room for: a chip grows for its own value alone."""
        said = ""
        for one in self.words.earlier:
            longer = f"{said}  {one.short}" if said else one.short
            if metrics.horizontalAdvance(longer) > room:
                break
            said = longer
        return said

    def _paint_edge(self, painter: QPainter, role: QColor) -> None:
        """Paint a bar at the left of what is not met, and a line around what has the focus."""
        if self.hasFocus():
            painter.setPen(QPen(self._theme.colour("nominal"), 1.0))
            painter.drawRect(self.rect().adjusted(0, 0, -1, -1))
        if self.words.standing != "met":
            painter.fillRect(0, 2 * _GAP + _SIGN_SIZE, 2, self.height() - 3 * _GAP - _SIGN_SIZE, role)

    def _write(self, painter: QPainter, x: int, baseline: int, text: str, role: str) -> int:
        """Write small words; return where they end."""
        painter.setFont(self._theme.font("small"))
        painter.setPen(self._theme.colour(role))
        painter.drawText(x, baseline, text)
        return x + painter.fontMetrics().horizontalAdvance(text)

    def _metrics(self) -> tuple[QFontMetrics, QFontMetrics]:
        return QFontMetrics(self._theme.font("small")), QFontMetrics(self._theme.font("body", strong=True))

"""The verdict over everything: the loop's title, the verdict in words, and one chip for each limit."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import partial
from typing import Literal

from PySide6.QtCore import QObject, QRectF, QSize, Qt, Signal
from PySide6.QtGui import (
    QColor,
    QFontMetrics,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPen,
    QResizeEvent,
)
from PySide6.QtWidgets import QHBoxLayout, QScrollArea, QSizePolicy, QVBoxLayout, QWidget

from tuner.judge.assessment import Assessment, LimitResult
from tuner.judge.overlay import at_plant
from tuner.judge.wording import minus, number, quantity, told_apart, unit_of
from tuner.model.family import NOMINAL
from tuner.model.loop import Loop
from tuner.model.measures import BY_NAME
from tuner.window.elided import ElidedLabel, RoleLabel
from tuner.window.flow import FlowLayout
from tuner.window.shown import Shown
from tuner.window.signs import Sign, draw_sign
from tuner.window.theme import Theme

Standing = Literal["met", "missed", "unstable", "waiting", "failed"]

_ROLE: dict[Standing, str] = {
    "met": "firm_word",
    "missed": "lost_word",
    "unstable": "lost_word",
    "waiting": "quiet",
    "failed": "lost_word",
}
_SIGN: dict[Standing, Sign] = {
    "met": "tick",
    "missed": "cross",
    "unstable": "runaway",
    "waiting": "ring",
    "failed": "cross",
}
_GAP, _SIGN_SIZE = 4, 12
_WIDEST_PLANT = 184
_PALE = 0.45
"""How much of a chip shows that is not true of the present tuning any more."""
_ROWS = 2
"""Rows of chips that are shown before the ribbon scrolls."""


@dataclass(frozen=True, slots=True)
class ChipWords:
    """What one chip says."""

    measure: str
    value: str
    limit: str
    plant: str
    standing: Standing
    is_looked_at: bool = False

    def sentence(self) -> str:
        """Return all of it for a screen reader."""
        looked_at = ", looked at" if self.is_looked_at else ""
        return f"{self.measure} {self.value}, limit {self.limit}, {self.standing}, {self.plant}{looked_at}"


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


class Chip(QWidget):
    """One limit: measure, value against limit, and the plant that is worst; pressed, it asks for that plant."""

    chosen = Signal()

    def __init__(self, words: ChipWords, tip: str, theme: Theme) -> None:
        super().__init__()
        self._theme, self._width, self.words = theme, 0, words
        self.is_late = False
        self.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        self.setSizePolicy(QSizePolicy.Policy.Fixed, QSizePolicy.Policy.Fixed)
        self.show_words(words, tip)

    def show_words(self, words: ChipWords, tip: str) -> None:
        """Show another result."""
        if words.measure != self.words.measure:
            self._width = 0
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
        first = small.horizontalAdvance(f"{self.words.measure}  {self.words.standing}") + _SIGN_SIZE + 2 * _GAP
        second = max(strong.horizontalAdvance("0.000"), strong.horizontalAdvance(self.words.value))
        second += small.horizontalAdvance(self.words.limit) + 2 * _GAP
        third = min(small.horizontalAdvance(self.words.plant), _WIDEST_PLANT)
        width = -(-max(first, second, third, 112) // 16) * 16 + 2 * _GAP
        self._width = max(self._width, width)
        return QSize(self._width, 2 * small.height() + strong.height() + 2 * _GAP)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the sign and three lines."""
        painter = QPainter(self)
        painter.setOpacity(_PALE if self.is_late else 1.0)
        small, strong = self._metrics()
        left, top = _GAP, _GAP
        role = self._theme.colour(_ROLE[self.words.standing])
        self._paint_edge(painter, role)
        draw_sign(painter, _SIGN[self.words.standing], QRectF(left, top + 1, _SIGN_SIZE, _SIGN_SIZE), role)
        x = self._write(painter, left + _SIGN_SIZE + _GAP, top + small.ascent(), self.words.measure, "quiet")
        self._write(painter, x + 2 * _GAP, top + small.ascent(), self.words.standing, _ROLE[self.words.standing])
        middle = top + small.height() + strong.ascent()
        painter.setFont(self._theme.font("body", strong=True))
        painter.setPen(self._theme.colour("ink" if self.words.standing == "met" else "lost_word"))
        painter.drawText(left, middle, self.words.value)
        x = left + strong.horizontalAdvance(self.words.value) + 2 * _GAP
        self._write(painter, x, middle, self.words.limit, "quiet")
        bottom = top + small.height() + strong.height() + small.ascent()
        plant = small.elidedText(self.words.plant, Qt.TextElideMode.ElideRight, self.width() - 2 * _GAP)
        self._write(painter, left, bottom, plant, "nominal_word" if self.words.is_looked_at else "quiet")

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


class VerdictSign(QWidget):
    """The sign of the verdict, as large as the title."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.standing: Standing = "waiting"
        self.setFixedSize(20, 20)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the sign."""
        frame = QRectF(self.rect()).adjusted(2, 2, -2, -2)
        draw_sign(QPainter(self), _SIGN[self.standing], frame, self._theme.colour(_ROLE[self.standing]))


class Ribbon(QObject):
    """The strip across the top; `show` takes an answer, `fail` a sentence on why there is none."""

    plant_wanted = Signal(str)
    """The name of a plant of the family that is to be looked at."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self.chips: list[Chip] = []
        self._plants: list[str] = []
        self._looked_at = ""
        self.title, self.verdict, self.detail = ElidedLabel(), RoleLabel(theme, stretch=False), RoleLabel(theme)
        self._sign = VerdictSign(theme)
        self._flow_host, self._scroll = QWidget(), QScrollArea()
        self._flow = FlowLayout(self._flow_host, spacing=8)
        self.widget = self._arranged()
        theme.changed.connect(self.dress)
        self.dress()
        self._say("waiting", "assessing…", "")

    def show(self, shown: Shown) -> None:
        """Show the verdict and the limits of an assessment of the whole family."""
        assessment = shown.assessment
        self._say(assessment.verdict, *verdict_words(assessment))
        self._set_late(late=False)
        self._show_chips(shown)

    def wait(self) -> None:
        """Say that the verdict is awaited; the chips, paler until then, are those of an earlier tuning."""
        self._say("waiting", "assessing…", "the numbers are those of an earlier tuning" if self.chips else "")
        self._set_late(late=True)

    def _set_late(self, *, late: bool) -> None:
        for chip in self.chips:
            chip.is_late = late
            chip.update()

    def fail(self, sentence: str) -> None:
        """Say why the present sheet cannot be computed; the chips are those of the last one that could."""
        self._say("failed", "not computed", sentence)

    def focus(self) -> None:
        """Give the keyboard to the first limit."""
        if self.chips:
            self.chips[0].setFocus(Qt.FocusReason.ShortcutFocusReason)

    def dress(self) -> None:
        """Take over the look."""
        self.title.setFont(self._theme.font("title", strong=True))
        self.verdict.setFont(self._theme.font("body", strong=True))
        self.verdict.dress()
        self.detail.dress()
        self._sign.update()
        for chip in self.chips:
            chip.update()

    def _say(self, standing: Standing, verdict: str, detail: str) -> None:
        self._sign.standing = standing
        self.verdict.setText(verdict)
        self.detail.setText(detail)
        self.verdict.set_role(_ROLE[standing])
        self.detail.set_role("lost_word" if standing in ("failed", "unstable") else "quiet")
        self.widget.setAccessibleName(f"Verdict: {verdict}. {detail}")
        self._sign.update()

    def _show_chips(self, shown: Shown) -> None:
        results = shown.assessment.limits
        self._plants, self._looked_at = [result.plant for result in results], shown.looked_at
        stable = shown.assessment.verdict != "unstable"
        sizes = [chip.sizeHint() for chip in self.chips]
        while len(self.chips) > len(results):
            self._flow.drop(self.chips.pop())
        for index, result in enumerate(results):
            drift = shown.assessment.drift_of(result.plant)
            words = chip_words(replace(result, plant=drift), shown.sheet.loop, stable=stable)
            words = replace(words, is_looked_at=bool(shown.looked_at) and result.plant == shown.looked_at)
            tip = _tip(result, shown)
            if index < len(self.chips):
                self.chips[index].show_words(words, tip)
            else:
                self.chips.append(Chip(words, tip, self._theme))
                self.chips[-1].chosen.connect(partial(self._look, index))
                self._flow.addWidget(self.chips[-1])
        if sizes != [chip.sizeHint() for chip in self.chips]:
            for chip in self.chips:
                chip.updateGeometry()  # the layout remembers what each asked for
            self._flow.invalidate()
            self._flow.activate()
            self._fit()

    def _look(self, index: int) -> None:
        """Ask for the worst plant of a limit to be looked at."""
        plant = self._plants[index]
        self.plant_wanted.emit(NOMINAL if plant == self._looked_at else plant)

    def _arranged(self) -> QWidget:
        words = QVBoxLayout()
        words.setSpacing(0)
        words.setContentsMargins(0, 0, 0, 0)
        row = QHBoxLayout()
        row.setSpacing(8)
        row.addWidget(self._sign)
        row.addWidget(self.verdict)
        row.addStretch(1)
        words.addWidget(self.title)
        words.addLayout(row)
        words.addStretch(1)
        left = QWidget()
        left.setLayout(words)
        left.setFixedWidth(272)
        self._scroll.setWidget(self._flow_host)
        self._scroll.setWidgetResizable(True)
        self._scroll.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self._scroll.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        widget = RibbonWidget(self._fit)
        line = QHBoxLayout()
        line.setSpacing(8)
        line.addWidget(left)
        line.addWidget(self._scroll, 1)
        column = QVBoxLayout(widget)
        column.setContentsMargins(12, 4, 8, 4)
        column.setSpacing(0)
        column.addLayout(line)
        column.addWidget(self.detail)
        return widget

    def _fit(self) -> None:
        """Give the chips the height of the rows they need, at most `_ROWS`; beyond that they scroll."""
        tallest = max((chip.sizeHint().height() for chip in self.chips), default=52)
        needed = self._flow.heightForWidth(max(self._scroll.viewport().width(), 1))
        self._scroll.setFixedHeight(max(min(needed, _ROWS * tallest + 4 * (_ROWS - 1)), tallest))


class RibbonWidget(QWidget):
    """A strip that says when its size changed."""

    def __init__(self, resized: Callable[[], None]) -> None:
        super().__init__()
        self._resized = resized

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Say so."""
        super().resizeEvent(event)
        self._resized()


def verdict_words(assessment: Assessment) -> tuple[str, str]:
    """Return the verdict in a few words, and what it holds for or why it is not better."""
    size, limits = assessment.family_size, assessment.limits
    family = "the nominal plant alone, no spread given" if size == 1 else f"the whole family of {size} plants"
    if assessment.verdict == "unstable":
        sentence = assessment.instability.sentence if assessment.instability else "The loop runs away."
        return "Unstable", sentence
    if not limits:
        return "Stable, no limits set", f"for {family}"
    if assessment.verdict == "met":
        return ("The limit is met" if len(limits) == 1 else f"All {len(limits)} limits met"), f"for {family}"
    missed = sum(not limit.met for limit in limits)
    return f"{missed} of {len(limits)} limits missed", f"over {family}"


def _pressing(result: LimitResult, shown: Shown) -> str:
    """Return what pressing a chip does."""
    if result.plant == NOMINAL:
        return "press to look at the nominal plant"
    return "press to look at the nominal plant again" if result.plant == shown.looked_at else "press to look at it"


def _tip(result: LimitResult, shown: Shown) -> str:
    """Return the definition of a measure, its worst plant, and why it does not exist if it does not."""
    facts = BY_NAME[result.measure]
    lines = [f"{facts.label}: {facts.sentence}", f"Worst{at_plant(result.plant)}; {_pressing(result, shown)}."]
    if result.value is None:
        lines += [f"Not there: {reason}." for reason in _reasons(result, shown)]
    nominal = shown.assessment.nominal.measures.get(result.measure)
    lines.append(f"Nominal plant: {quantity(nominal, unit_of(result.measure, shown.sheet.loop))}.")
    return "\n".join(lines)


def _reasons(result: LimitResult, shown: Shown) -> list[str]:
    members = [member for member in shown.assessment.members if member.name == result.plant]
    return [member.reasons[result.measure] for member in members if result.measure in member.reasons][:1]

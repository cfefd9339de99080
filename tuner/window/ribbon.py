"""The verdict over everything: the loop's title, the verdict in words, and one chip for each limit."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from functools import partial

from PySide6.QtCore import QObject, QRectF, Qt, Signal
from PySide6.QtGui import (
    QPainter,
    QPaintEvent,
    QResizeEvent,
)
from PySide6.QtWidgets import QHBoxLayout, QScrollArea, QVBoxLayout, QWidget

from tuner.judge.assessment import Assessment, LimitResult
from tuner.judge.overlay import at_plant
from tuner.judge.wording import quantity, unit_of
from tuner.model.family import NOMINAL
from tuner.model.measures import BY_NAME
from tuner.window.chip import ROLE, SIGN, Chip, Standing, chip_words
from tuner.window.earlier import Earlier, earlier_words
from tuner.window.elided import ElidedLabel, RoleLabel
from tuner.window.flow import FlowLayout
from tuner.window.shown import Shown
from tuner.window.signs import draw_sign
from tuner.window.theme import Theme

_ROWS = 2
"""Rows of chips that are shown before the ribbon scrolls."""
_GAP = 8
"""Pixels between two chips."""


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
        draw_sign(QPainter(self), SIGN[self.standing], frame, self._theme.colour(ROLE[self.standing]))


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
        self._shown: Shown | None = None
        self._earlier: tuple[Earlier, ...] = ()
        self.title, self.verdict, self.detail = ElidedLabel(), RoleLabel(theme, stretch=False), RoleLabel(theme)
        self._sign = VerdictSign(theme)
        self._flow_host, self._scroll = QWidget(), QScrollArea()
        self._flow = FlowLayout(self._flow_host, spacing=_GAP)
        self.widget = self._arranged()
        theme.changed.connect(self.dress)
        self.dress()
        self._say("waiting", "assessing…", "")

    def show(self, shown: Shown) -> None:
        """Show the verdict and the limits of an assessment of the whole family."""
        assessment = shown.assessment
        self._say(assessment.verdict, *verdict_words(assessment))
        self._set_late(late=False)
        self._shown = shown
        self._show_chips(shown)

    def show_earlier(self, earlier: tuple[Earlier, ...]) -> None:
        """Show what earlier tunings came to, quietly beside what the present one does."""
        self._earlier = earlier
        if self._shown is not None:
            self._show_chips(self._shown)

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
        self.verdict.set_role(ROLE[standing])
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
            before = earlier_words(self._earlier, result.measure, shown.sheet.loop)
            is_looked_at = bool(shown.looked_at) and result.plant == shown.looked_at
            words = replace(words, is_looked_at=is_looked_at, earlier=before)
            tip = "\n".join((_tip(result, shown), *(one.whole for one in before)))
            if index < len(self.chips):
                self.chips[index].show_words(words, tip)
            else:
                self.chips.append(Chip(words, tip, self._theme))
                self.chips[-1].chosen.connect(partial(self._look, index))
                self._flow.addWidget(self.chips[-1])
        if sizes != [chip.sizeHint() for chip in self.chips]:
            self._lay_out()
        self._fit()

    def _lay_out(self) -> None:
        """Place the chips anew: the layout remembers what each asked for."""
        for chip in self.chips:
            chip.updateGeometry()
        self._flow.invalidate()
        self._flow.activate()

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
        self._give_room()
        tallest = max((chip.sizeHint().height() for chip in self.chips), default=52)
        needed = self._flow.heightForWidth(self._room())
        self._scroll.setFixedHeight(max(min(needed, _ROWS * tallest + 4 * (_ROWS - 1)), tallest))

    def _give_room(self) -> None:
        """Keep room in the chips for the values of earlier tunings, unless that takes another row."""
        has_found = self._shown is not None and self._shown.sheet.controller.as_found is not None
        is_wanted = has_found or bool(self._earlier)
        plain, wide = (rows([chip.width_with(roomy=it) for chip in self.chips], self._room()) for it in (False, True))
        roomy = is_wanted and wide <= plain
        if any(chip.is_roomy != roomy for chip in self.chips):
            for chip in self.chips:
                chip.is_roomy = roomy
            self._lay_out()

    def _room(self) -> int:
        return max(self._scroll.viewport().width(), 1)


class RibbonWidget(QWidget):
    """A strip that says when its size changed."""

    def __init__(self, resized: Callable[[], None]) -> None:
        super().__init__()
        self._resized = resized

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Say so."""
        super().resizeEvent(event)
        self._resized()


def rows(widths: Sequence[int], room: int) -> int:
    """Return how many rows chips of some widths take."""
    count, x = 1, 0
    for width in widths:
        if x and x + width > room:
            count, x = count + 1, 0
        x += width + _GAP
    return count


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

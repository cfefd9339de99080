"""The panel of all rulers of the controller, in one column, two or three."""

from dataclasses import dataclass
from functools import partial

from PySide6.QtCore import Signal
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QGridLayout, QLabel, QSizePolicy, QWidget

from tuner.footing.classes import Track, is_of_block
from tuner.model.parameters import GAIN_KEYS, Parameter
from tuner.model.sheet import Sheet
from tuner.session.document import Document
from tuner.session.rulers import rulers_of
from tuner.window.rulers.form_switch import FormSwitch
from tuner.window.rulers.painting import Painting, Reading
from tuner.window.rulers.reading_line import ReadingLine
from tuner.window.rulers.ruler import SYMBOL_WIDTH, Ruler
from tuner.window.tab_order import order_tabs, stops
from tuner.window.theme import Theme

TWO_COLUMNS = 960
"""Width, pixels, from which the gains and the other rulers stand side by side."""

THREE_COLUMNS = 1400
"""Width, pixels, from which the rulers of blocks beside the law stand in a column of their own."""


@dataclass(frozen=True, slots=True)
class Place:
    """A value on a ruler; None is an absent one."""

    name: str
    value: float | None


class RulerPanel(QWidget):
    """The rulers of the present form of the gains; `dragging_started` and `dragging_finished` tell of the hand.

    Attributes
    ----------
    line : ReadingLine
        Says what holds where mouse or keys are; whoever shows the panel puts it where it stays in sight.
    """

    dragging_started = Signal()
    dragging_finished = Signal()
    place_changed = Signal()
    """Mouse or keys look at another place, or at none."""

    def __init__(self, document: Document, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document, self._theme = document, theme
        self._generation = document.generation
        self._parameters: tuple[Parameter, ...] = ()
        self._columns = 0
        self.rulers: dict[str, Ruler] = {}
        self._pointed: Place | None = None
        self._reading: Reading | None = None
        self._why_grey = ""
        self.form = FormSwitch(document, theme, self)
        self.line = ReadingLine(theme)
        self._grid = QGridLayout(self)
        self._grid.setContentsMargins(8, 4, 8, 4)
        self._grid.setHorizontalSpacing(24)
        self._grid.setVerticalSpacing(4)
        self._fault = QLabel(self)
        self._fault.hide()
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Fixed)
        theme.changed.connect(self._dress)
        self._dress()
        self.refresh()
        self.destroyed.connect(document.listen(self.refresh))

    def refresh(self) -> None:
        """Show what the document holds; another form of the gains brings other rulers."""
        if self._parameters != rulers_of(self._document.sheet.controller):
            self._change_rulers()
        anew = self._generation != self._document.generation
        self._generation = self._document.generation
        for ruler in self.rulers.values():
            if anew:
                ruler.forget_typing()
            ruler.refresh()
        self.form.refresh()

    def tracks(self) -> tuple[Track, ...]:
        """Return what there is to find out along all rulers."""
        return tuple(ruler.track() for ruler in self.rulers.values())

    def paint(self, painting: Painting, late_for: Sheet | None = None) -> None:
        """Paint every ruler by what was found out about it, paler where that is untrue of a sheet it is late for."""
        for name, ruler in self.rulers.items():
            faded = name in painting.stale or (late_for is not None and not painting.holds(name, late_for))
            ruler.show_footing(painting.tracks.get(name), faded=faded)
        self.explain_grey("")

    def unpaint(self, sentence: str = "") -> None:
        """Leave all rulers grey, and say why."""
        for ruler in self.rulers.values():
            ruler.show_footing(None)
        self.explain_grey(sentence)

    def explain_grey(self, sentence: str) -> None:
        """Say why the rulers that are grey are so."""
        self._why_grey = sentence
        self._say_reading()

    @property
    def place(self) -> Place | None:
        """The place looked at: where the mouse points, else where the ruler stands that keys or hand are at."""
        if self._pointed is not None and self._pointed.name in self.rulers:
            return self._pointed
        with_focus = (name for name, ruler in self.rulers.items() if ruler.slider.hasFocus())
        name = next(with_focus, None)
        return None if name is None else Place(name, self._document.sheet.controller.value(name))

    def show_reading(self, reading: Reading | None) -> None:
        """Say why the footing is what it is at the place looked at; until that is known, what it is."""
        self._reading = reading
        self._say_reading()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Lay the rulers in columns, as the width has it."""
        super().resizeEvent(event)
        self._lay_out()

    def fault_in_sight(self) -> str:
        """Return what is said to be wrong with what was typed, empty when nothing is."""
        return "" if self._fault.isHidden() else self._fault.text()

    # Inside -----------------------------------------------------------------------------------------------------

    def _change_rulers(self) -> None:
        """Make the rulers of the present form and blocks; those that were there before stay."""
        self._parameters = rulers_of(self._document.sheet.controller)
        before, self.rulers = self.rulers, {}
        for parameter in self._parameters:
            known = before.pop(parameter.key, None)
            self.rulers[parameter.key] = known or self._new(parameter)
        for ruler in before.values():
            ruler.deleteLater()
            ruler.hide()
        self._fault.hide()
        self._columns = 0
        self._lay_out()

    def _new(self, parameter: Parameter) -> Ruler:
        ruler = Ruler(self._document, parameter, self._theme, self)
        ruler.grasped.connect(self.dragging_started)
        ruler.let_go.connect(self.dragging_finished)
        ruler.faulted.connect(self._say)
        ruler.slider.pointed.connect(partial(self._point, parameter.key))
        for signal in (ruler.slider.left, ruler.slider.focused, ruler.grasped):
            signal.connect(self._point_nowhere)
        ruler.setVisible(True)
        return ruler

    def _point(self, name: str, value: float | None) -> None:
        self._pointed = Place(name, value)
        self.place_changed.emit()

    def _point_nowhere(self) -> None:
        self._pointed = None
        self.place_changed.emit()

    def _say_reading(self) -> None:
        place, reading = self.place, self._reading
        if place is None:
            if self._why_grey:
                self.line.show_note(self._why_grey)
            else:
                self.line.show_legend()
            return
        ruler = self.rulers[place.name]
        grade = ruler.grade_at(place.value) if reading is None else reading.grade
        sentence = self._why_grey if reading is None else reading.sentence
        self.line.show_place(ruler.in_words(place.value), grade, sentence)

    def _lay_out(self) -> None:
        columns = self._columns_now()
        if len(columns) == self._columns:
            return
        self._columns = len(columns)
        for part in (self.form, *self.rulers.values()):
            self._grid.removeWidget(part)
        for place, column in enumerate(columns):
            for row, part in enumerate(column):
                self._grid.addWidget(part, row, place)
        for place in range(3):
            self._grid.setColumnStretch(place, 1 if place < len(columns) else 0)
        first, *_ = stops(self._grid)
        order_tabs(first, self._grid)

    def _columns_now(self) -> list[list[QWidget]]:
        """Return what stands in each column: gains, what else the law has, and the blocks, as the width has it."""
        keys = GAIN_KEYS[self._document.sheet.controller.form]
        gains: list[QWidget] = [self.form, *(self.rulers[key] for key in keys)]
        others: list[QWidget] = [one for key, one in self.rulers.items() if key not in keys and not is_of_block(key)]
        blocks: list[QWidget] = [ruler for key, ruler in self.rulers.items() if is_of_block(key)]
        if self.width() < TWO_COLUMNS:
            return [[*gains, *others, *blocks]]
        if not blocks or self.width() < THREE_COLUMNS:
            half = len(blocks) // 2
            return [[*gains, *blocks[:half]], [*others, *blocks[half:]]]
        return [gains, others, blocks]

    def _say(self, name: str, sentence: str) -> None:
        """Say under the box what is wrong with what was typed, over whatever is there, so that nothing moves."""
        self._fault.setVisible(bool(sentence))
        if not sentence:
            return
        ruler = self.rulers[name]
        self._fault.setText(sentence)
        self._fault.adjustSize()
        corner = ruler.below_box(self)
        top = (
            corner.y() if corner.y() + self._fault.height() <= self.height() else corner.y() - 28 - self._fault.height()
        )
        self._fault.move(max(corner.x() - self._fault.width(), 0), top)
        self._fault.raise_()

    def _dress(self) -> None:
        colours = self._theme.palette.colours
        self._fault.setStyleSheet(
            f"background: {colours['field']}; color: {colours['lost_word']}; "
            f"border: 1px solid {colours['lost']}; padding: 4px;"
        )
        self.form.setContentsMargins(SYMBOL_WIDTH + 4, 0, 0, 0)
        self.form.sentence.setStyleSheet(f"color: {colours['lost_word']};")

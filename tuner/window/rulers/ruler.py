"""One ruler: symbol, slider, a box to type the value, unit."""

from functools import partial

from PySide6.QtCore import QPoint, Qt, Signal
from PySide6.QtGui import QContextMenuEvent
from PySide6.QtWidgets import QHBoxLayout, QLabel, QMenu, QWidget

from tuner.footing.classes import UNKNOWN, PaintedTrack, Track, is_of_block
from tuner.model.parameters import Parameter
from tuner.model.units import unit_in
from tuner.session import typed
from tuner.session.document import Document
from tuner.session.ruler_range import notches
from tuner.session.typed import Bounds, TypedError
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.rulers.edges import class_of, in_words
from tuner.window.rulers.slider import RulerSlider
from tuner.window.theme import Theme

SYMBOL_WIDTH, BLOCK_WIDTH, BOX_WIDTH, UNIT_WIDTH = 32, 96, 84, 84
OFF = "off"
"""What the box shows for a value that is absent."""


class Ruler(QWidget):
    """The ruler of one parameter of the controller; everything it says comes from the table of parameters."""

    grasped = Signal()
    let_go = Signal()
    faulted = Signal(str, str)
    """The name of the parameter, and what is wrong with what was typed for it, empty when nothing is."""

    def __init__(self, document: Document, parameter: Parameter, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document, self.parameter, self._theme = document, parameter, theme
        self._jumped = False
        self.painted: PaintedTrack | None = None
        self.slider = RulerSlider(theme)
        self.box = TypedLine(theme, self._value(), Words(self._read, _written), self._change, live=False)
        self.unit = QLabel()
        self._lay_out()
        self._connect()
        self.refresh()

    def refresh(self) -> None:
        """Show what the document holds."""
        value = self._value()
        self.slider.show_value(self._document.range_of(self.parameter), self._document.marks(self.parameter.key), value)
        self.box.intake.show_value(value)
        self.unit.setText(self._unit_now())
        self._describe()

    def forget_typing(self) -> None:
        """Show the document's value whatever was typed: another sheet was opened."""
        self.box.intake.show_value(self._value(), anew=True)

    def track(self) -> Track:
        """Return what there is to find out along this ruler."""
        return Track(self.parameter.key, notches(self._document.range_of(self.parameter)))

    def show_footing(self, track: PaintedTrack | None, *, faded: bool = False) -> None:
        """Paint the track, paler where it is out of date; grey when nobody computed any classes."""
        self.painted = track
        self.slider.show_footing(track, faded=faded)
        self._describe()

    def grade_at(self, value: float | None) -> int:
        """Return the class at a value, as far as it is painted."""
        return UNKNOWN if self.painted is None else class_of(self.painted, value)

    def in_words(self, value: float | None) -> str:
        """Return the name, a value and its unit: "kp 4.2 %/degC"."""
        unit = "" if value is None else self._unit_now()
        return " ".join(filter(None, (self.parameter.key, _written(value), unit)))

    def menu(self) -> QMenu:
        """Return the menu of a right click."""
        menu = QMenu(self)
        for mark in self.slider.marks:
            if mark.kind != "kept":
                label = f"Reset to {_written(mark.value)} ({mark.label})"
                menu.addAction(label, partial(self._change, mark.value))
        menu.addAction("Type a value", self._begin_typing)
        span = self._document.range_of(self.parameter)
        if span.has_off:
            menu.addAction("Off", partial(self._change, span.off))
        return menu

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """Offer reset, typing and off."""
        menu = self.menu()
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        menu.popup(event.globalPos())

    def below_box(self, ground: QWidget) -> QPoint:
        """Return the place under the right end of the box, on another widget, where a fault is said."""
        return self.box.mapTo(ground, self.box.rect().bottomRight())

    # Inside -----------------------------------------------------------------------------------------------------

    def _lay_out(self) -> None:
        symbol = QLabel(_as_symbol(self.parameter))
        symbol.setFixedWidth(BLOCK_WIDTH if is_of_block(self.parameter.key) else SYMBOL_WIDTH)
        symbol.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self.box.setFixedWidth(BOX_WIDTH)
        self.box.setAlignment(Qt.AlignmentFlag.AlignRight)
        self.unit.setMinimumWidth(UNIT_WIDTH)
        self.unit.setProperty("voice", "quiet")
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(4)
        for part, stretch in ((symbol, 0), (self.slider, 1), (self.box, 0), (self.unit, 0)):
            row.addWidget(part, stretch)
        self.setToolTip(f"{self.parameter.key}: {self.parameter.sentence}")
        self.slider.setAccessibleName(f"{self.parameter.key} ruler")
        self.box.setAccessibleName(f"{self.parameter.key} value")

    def _connect(self) -> None:
        self.slider.grasped.connect(self._on_grasped)
        self.slider.wanted.connect(self._on_wanted)
        self.slider.let_go.connect(self._on_let_go)
        self.slider.reset_wanted.connect(self._on_reset_wanted)
        self.box.intake.faulted.connect(self._on_faulted)

    def _describe(self) -> None:
        """Say value, unit and how far the footing reaches to assistive technology."""
        value = self._value()
        words = f"{_written(value)} {self._unit_now()}. {self.parameter.sentence}"
        if self.painted is not None:
            span = self._document.range_of(self.parameter)
            words += f" Footing: {in_words(self.painted, span, value)}."
        self.slider.setAccessibleDescription(words)

    def _value(self) -> float | None:
        controller = self._document.sheet.controller
        return controller.value(self.parameter.key)

    def _unit_now(self) -> str:
        loop = self._document.sheet.loop
        return unit_in(self.parameter.unit, loop)

    def _read(self, text: str) -> float | None:
        name = self.parameter.key
        span = self._document.range_of(self.parameter)
        if span.has_off and text.strip().lower() in (OFF, *([""] if span.off is None else [])):
            return span.off
        if text.strip()[:1] in ("-", "\u2212") and self.parameter.minimum == 0.0:
            raise TypedError(
                f'{name} is never negative; for a plant whose output falls with the effort, choose the action "direct"'
            )
        return typed.number(text, Bounds.of(self.parameter), self._unit_now())

    def _change(self, value: float | None) -> None:
        self._document.change_value(self.parameter.key, value)

    def _begin_typing(self) -> None:
        self.box.setFocus(Qt.FocusReason.OtherFocusReason)
        self.box.selectAll()

    def _on_grasped(self) -> None:
        self._jumped = False
        self.grasped.emit()

    def _on_wanted(self, value: float | None) -> None:
        self._jumped = True
        self._document.change_value(self.parameter.key, value, merge_key=f"hand on {self.parameter.key}")

    def _on_faulted(self, sentence: str) -> None:
        self.faulted.emit(self.parameter.key, sentence)

    def _on_let_go(self) -> None:
        self._document.release()
        self.let_go.emit()

    def _on_reset_wanted(self) -> None:
        """Reset; the jump of the first click of a double click is taken back, so that the reset is one step."""
        if self._jumped and self.slider.pressed_twice:
            self._document.undo()
        self._document.reset(self.parameter.key)


def _written(value: float | None) -> str:
    return OFF if value is None else typed.shown(value)


def _as_symbol(parameter: Parameter) -> str:
    """Write a symbol with its letters after the first as an index, after the block that it belongs to."""
    symbol = parameter.symbol
    written = f"<i>{symbol[:1]}</i><sub>{symbol[1:]}</sub>" if len(symbol) > 1 else f"<i>{symbol}</i>"
    block, dot, _ = parameter.key.partition(".")
    return f"{_SHORT.get(block, block)} {written}" if dot else written


_SHORT = {
    "reference_filter": "ref. filter",
    "disturbance_feedforward": "disturbance",
    "measurement_filter": "meas. filter",
    "lead_lag": "lead-lag",
}
"""Blocks as the narrow place before a ruler names them."""

"""A number to type, with a button to either side that steps it, and its unit."""

from collections.abc import Callable
from math import log10

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QHBoxLayout, QToolButton, QWidget

from tuner.session import typed
from tuner.session.typed import ANY, Bounds
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.elided import ElidedLabel
from tuner.window.theme import Theme

SPEEDS = (0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0)

_DIGITS = 10
_LINE, _UNIT = 64, 40


class SteppedLine(QWidget):
    """A number that the hand types or steps; it shows what it is told and says what the hand wants.

    Parameters
    ----------
    name : str
        For assistive technology.
    bounds : Bounds
        What may be typed.
    step : callable
        Returns the next value from the present one, in a direction of +1 or -1.
    """

    wanted = Signal(float)
    faulted = Signal(str)
    """What is wrong with what was typed; empty once nothing is."""

    def __init__(
        self, theme: Theme, name: str, bounds: Bounds = ANY, step: Callable[[float, int], float] | None = None
    ) -> None:
        super().__init__()
        self._step = step
        self._bounds, self._unit = bounds, ""
        words: Words[float] = Words(self._read, typed.shown)
        self.line: TypedLine[float] = TypedLine(theme, 0.0, words, self._take, live=False)
        self.line.setAccessibleName(name)
        self.line.setFixedWidth(_LINE)
        self.line.intake.faulted.connect(self.faulted)
        self.less, self.more = self._button("\u2212", f"{name} down", -1), self._button("+", f"{name} up", 1)
        self.unit = ElidedLabel(stretch=False)
        self.unit.setProperty("voice", "quiet")
        self.unit.setFixedWidth(_UNIT)
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(4)
        for part in (self.less, self.line, self.more, self.unit):
            row.addWidget(part)
        row.addStretch(1)
        for button in (self.less, self.more):
            button.setVisible(step is not None)

    @property
    def value(self) -> float:
        """What is shown."""
        return self.line.intake.value

    def show_value(self, value: float, unit: str = "", *, anew: bool = False) -> None:
        """Show a number and its unit; what is being typed stays unless `anew`."""
        self._unit = unit
        self.unit.setText(unit)
        self.line.intake.show_value(_tidy(value), anew=anew)

    def set_bounds(self, bounds: Bounds) -> None:
        """Take other bounds."""
        self._bounds = bounds

    def _read(self, text: str) -> float:
        return typed.number(text, self._bounds, self._unit)

    def _take(self, value: float) -> None:
        self.wanted.emit(value)

    def _button(self, sign: str, name: str, direction: int) -> QToolButton:
        button = QToolButton()
        button.setText(sign)
        button.setAutoRepeat(True)
        button.setAccessibleName(name)
        button.setToolTip(name)
        button.setFocusPolicy(Qt.FocusPolicy.TabFocus)
        button.clicked.connect(lambda _checked=False: self._on_step(direction))
        return button

    def _on_step(self, direction: int) -> None:
        if self._step is None:
            return
        value = _tidy(self._step(self.line.intake.best(), direction))
        if self._bounds.holds(value) and value != self.value:
            self.line.intake.show_value(value, anew=True)
            self.wanted.emit(value)


def next_speed(speed: float, direction: int) -> float:
    """Return the next speed on the logarithmic scale from 0.1 to 100."""
    faster = [one for one in SPEEDS if log10(one) > log10(speed) + 1e-6]
    slower = [one for one in SPEEDS if log10(one) < log10(speed) - 1e-6]
    return (faster or [SPEEDS[-1]])[0] if direction > 0 else (slower or [SPEEDS[0]])[-1]


def _tidy(value: float) -> float:
    """Return a number without the crumbs of binary sums."""
    return float(f"{value:.{_DIGITS}g}")

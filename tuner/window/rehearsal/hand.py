"""The column beside the chart: reference, disturbance, mode, effort by hand, noise."""

from typing import TYPE_CHECKING

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QCheckBox, QGridLayout, QHBoxLayout, QLabel, QPushButton, QSlider, QVBoxLayout, QWidget

from tuner.model.demonstration import Deed, SetDisturbance, SetEffort, SetMode, SetNoise, SetReference
from tuner.model.sheet import Sheet
from tuner.session.typed import ANY, NOT_NEGATIVE, Bounds
from tuner.window.editors.field import FaultLine, heading
from tuner.window.editors.segments import Segments
from tuner.window.rehearsal.stepped_line import SteppedLine
from tuner.window.theme import Theme

if TYPE_CHECKING:
    from tuner.rehearse.rehearsal import Rehearsal

_NOTCHES = 1000
_MANUAL, _AUTOMATIC = "Manual", "Automatic"


class Hand(QWidget):
    """The column; it shows a rehearsal and says what the hand wants done."""

    wanted = Signal(object)
    """A `Deed`."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self._reference_step = self._disturbance_step = 1.0
        self._low, self._high = 0.0, 100.0
        self.reference = SteppedLine(theme, "reference", ANY, self._stepped_reference)
        self.over = SteppedLine(theme, "time of the ramp, 0 for a step", NOT_NEGATIVE)
        self.amount = SteppedLine(theme, "size of the disturbance", ANY, self._stepped_disturbance)
        self.push = QPushButton("While held")
        self.latch = QCheckBox("Stays on")
        self.mode = Segments([_AUTOMATIC, _MANUAL], theme, self._on_mode)
        self.effort = SteppedLine(theme, "effort by hand", ANY, lambda value, way: value + way * self._effort_step())
        self.slider = QSlider(Qt.Orientation.Horizontal)
        self.noise = QCheckBox("Noise of the sensor")
        self.fault = FaultLine(theme)
        self._name()
        self._arrange()
        self._connect()

    # What is shown ----------------------------------------------------------------------------------------------

    def show_sheet(self, sheet: Sheet) -> None:
        """Take the units and sizes of another loop."""
        loop, trial = sheet.loop, sheet.trial
        self._reference_step, self._disturbance_step = abs(trial.reference) or 1.0, abs(trial.disturbance) or 1.0
        signal = loop.manipulated
        reach = 5.0 * self._disturbance_step
        self._low = signal.resting - reach if signal.low is None else signal.low
        self._high = signal.resting + reach if signal.high is None else signal.high
        self.effort.set_bounds(Bounds(signal.low, signal.high))
        self.reference.show_value(loop.controlled.resting, loop.controlled.unit, anew=True)
        self.over.show_value(0.0, loop.time_unit, anew=True)
        self.amount.show_value(trial.disturbance or 1.0, signal.unit, anew=True)
        self.latch.setChecked(False)
        self.noise.setEnabled(sheet.sensor.noise > 0.0)
        self.noise.setToolTip("" if sheet.sensor.noise else "The sheet's sensor has no noise.")

    def show_rehearsal(self, rehearsal: "Rehearsal | None") -> None:
        """Show what holds now."""
        self.setEnabled(rehearsal is not None)
        if rehearsal is None:
            return
        loop = rehearsal.sheet.loop
        manual = rehearsal.mode == "manual"
        self.reference.show_value(rehearsal.reference, loop.controlled.unit)
        self.mode.show_choice(_MANUAL if manual else _AUTOMATIC)
        self.noise.setChecked(rehearsal.noise)
        if not self.push.isDown():
            self.latch.setChecked(rehearsal.disturbance != 0.0)
        self.effort.setEnabled(manual)
        self.slider.setEnabled(manual)

    def show_effort(self, rehearsal: "Rehearsal") -> None:
        """Follow the effort while the law sets it, so that the hand takes it over where it is."""
        if rehearsal.mode == "manual" and (self.slider.isSliderDown() or self.effort.line.hasFocus()):
            return
        aim = rehearsal.by_hand if rehearsal.mode == "manual" else rehearsal.effort
        self.effort.show_value(float(f"{aim:.4g}"), rehearsal.sheet.loop.manipulated.unit)
        self.slider.blockSignals(True)
        self.slider.setValue(round((aim - self._low) / (self._high - self._low) * _NOTCHES))
        self.slider.blockSignals(False)

    # The hand ---------------------------------------------------------------------------------------------------

    def _stepped_reference(self, value: float, way: int) -> float:
        return value + way * self._reference_step

    def _stepped_disturbance(self, value: float, way: int) -> float:
        return value + way * self._disturbance_step / 5.0

    def _effort_step(self) -> float:
        return (self._high - self._low) / 100.0

    def _on_reference(self, value: float) -> None:
        self.wanted.emit(SetReference(value, self.over.value))

    def _on_size(self, _value: float) -> None:
        if self.latch.isChecked() or self.push.isDown():
            self._disturb()

    def _disturb(self) -> None:
        on = self.latch.isChecked() or self.push.isDown()
        self.wanted.emit(SetDisturbance(self.amount.value if on else 0.0))

    def _on_mode(self, word: str) -> None:
        self.wanted.emit(SetMode("manual" if word == _MANUAL else "automatic"))

    def _on_slider(self, notch: int) -> None:
        value = self._low + notch / _NOTCHES * (self._high - self._low)
        value = float(f"{value:.4g}")
        self.effort.show_value(value, self.effort.unit.text(), anew=True)
        self._do(SetEffort(value))

    def _do(self, deed: Deed) -> None:
        self.wanted.emit(deed)

    # Making -----------------------------------------------------------------------------------------------------

    def _name(self) -> None:
        self.push.setAccessibleName("disturbance while held")
        self.push.setToolTip("The disturbance acts while this is held down, by mouse or by the space bar.")
        self.latch.setAccessibleName("disturbance stays on")
        self.mode.setAccessibleName("mode")
        self.slider.setAccessibleName("effort by hand, slider")
        self.slider.setRange(0, _NOTCHES)
        self.slider.setPageStep(_NOTCHES // 20)
        self.slider.setSingleStep(_NOTCHES // 100)

    def _arrange(self) -> None:
        column = QVBoxLayout(self)
        column.setContentsMargins(8, 0, 8, 4)
        column.setSpacing(4)
        column.addWidget(heading(self._theme, "Reference"))
        column.addLayout(_rows(("To", self.reference), ("Over", self.over)))
        column.addWidget(heading(self._theme, "Disturbance"))
        column.addLayout(_rows(("Size", self.amount)))
        column.addLayout(_row(self.push, self.latch))
        column.addWidget(heading(self._theme, "Mode"))
        column.addWidget(self.mode)
        column.addLayout(_rows(("Effort", self.effort)))
        column.addWidget(self.slider)
        column.addWidget(self.noise)
        column.addWidget(self.fault)

    def _connect(self) -> None:
        self.reference.wanted.connect(self._on_reference)
        self.amount.wanted.connect(self._on_size)
        self.push.pressed.connect(self._disturb)
        self.push.released.connect(self._disturb)
        self.latch.clicked.connect(lambda _checked=False: self._disturb())
        self.effort.wanted.connect(lambda value: self._do(SetEffort(value)))
        self.slider.valueChanged.connect(self._on_slider)
        self.noise.clicked.connect(lambda checked: self._do(SetNoise(checked)))
        for line in (self.reference, self.over, self.amount, self.effort):
            line.faulted.connect(self.fault.say)


def _rows(*parts: tuple[str, SteppedLine]) -> QGridLayout:
    """Return labels with their lines, one under the other."""
    grid = QGridLayout()
    grid.setHorizontalSpacing(4)
    grid.setVerticalSpacing(4)
    for index, (words, line) in enumerate(parts):
        label = QLabel(words)
        label.setProperty("voice", "quiet")
        label.setFixedWidth(40)
        label.setBuddy(line.line)
        grid.addWidget(label, index, 0)
        grid.addWidget(line, index, 1)
    return grid


def _row(*parts: QWidget) -> QHBoxLayout:
    row = QHBoxLayout()
    row.setSpacing(8)
    for part in parts:
        row.addWidget(part)
    row.addStretch(1)
    return row

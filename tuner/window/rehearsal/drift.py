"""Which plant is rehearsed: the nominal one, a worst one, or one of one's own within the spread."""

from PySide6.QtCore import Qt, Signal
from PySide6.QtWidgets import QGridLayout, QLabel, QSlider, QVBoxLayout, QWidget

from tuner.judge.assessment import Assessment
from tuner.model.demonstration import SetPlant
from tuner.model.drifts import parameters_of
from tuner.model.family import ACTUATOR_LAG, NOMINAL, SENSOR_LAG, family_of
from tuner.model.measures import BY_NAME
from tuner.model.plant import PlantParameter
from tuner.model.sheet import Sheet
from tuner.window.editors.chooser import Chooser
from tuner.window.editors.field import heading
from tuner.window.elided import ElidedLabel
from tuner.window.theme import Theme

_NOTCHES = 100
_OWN = "By hand"

Values = tuple[tuple[str, float], ...]


class Drift(QWidget):
    """A chooser of plants over a slider for each parameter that drifts."""

    wanted = Signal(object)
    """A `SetPlant`."""

    def __init__(self, theme: Theme) -> None:
        super().__init__()
        self._theme = theme
        self._plants: dict[str, Values] = {}
        self.chooser = Chooser(theme, "plant")
        self.chooser.setMinimumContentsLength(8)
        self.sliders: dict[str, QSlider] = {}
        self._spreads: dict[str, tuple[float, float, float, str]] = {}
        self._said: dict[str, ElidedLabel] = {}
        self._grid = QGridLayout()
        self._grid.setHorizontalSpacing(8)
        self._grid.setVerticalSpacing(4)
        column = QVBoxLayout(self)
        column.setContentsMargins(8, 0, 8, 8)
        column.setSpacing(4)
        column.addWidget(heading(theme, "Plant"))
        column.addWidget(self.chooser)
        column.addLayout(self._grid)
        self.chooser.activated.connect(self._on_chosen)

    def show_sheet(self, sheet: Sheet) -> None:
        """Offer a slider for each parameter of another loop that drifts."""
        self._spreads = {}
        for parameter in drifting(sheet):
            assert parameter.spread is not None  # noqa: S101 - only those that drift
            self._spreads[parameter.name] = (
                parameter.spread.low, parameter.spread.high, parameter.value, parameter.unit,
            )  # fmt: skip
        self._lay_sliders()
        self._plants = {"Nominal": ()}
        self._fill()
        self.setVisible(bool(self._spreads))

    def show_worst(self, sheet: Sheet, assessment: Assessment) -> None:
        """Offer the plants that are worst for a limit."""
        members = {member.name: member for member in family_of(sheet)}
        self._plants = {"Nominal": ()}
        for limit in assessment.limits:
            member = members.get(limit.plant)
            if member is not None and member.name != NOMINAL:
                words = f"Worst {BY_NAME[limit.measure].label}: {assessment.drift_of(limit.plant)}"
                self._plants[words] = tuple((name, member.values[name]) for name in self._spreads)
        self._fill()

    def show_values(self, values: dict[str, float]) -> None:
        """Show the plant as it is now."""
        for name, slider in self.sliders.items():
            slider.blockSignals(True)
            slider.setValue(self._notch(name, values[name]))
            slider.blockSignals(False)
            unit = self._spreads[name][3]
            self._said[name].setText(f"{values[name]:.4g} {unit}".rstrip())
        own = tuple((name, values[name]) for name in self._spreads)
        nominal = tuple((name, self._spreads[name][2]) for name in self._spreads)
        word = next((word for word, plant in self._plants.items() if (plant or nominal) == own), _OWN)
        self.chooser.setCurrentIndex(self.chooser.findText(word))

    def _fill(self) -> None:
        chosen = self.chooser.currentText()
        self.chooser.clear()
        self.chooser.addItems([*self._plants, _OWN])
        for index in range(self.chooser.count()):
            self.chooser.setItemData(index, self.chooser.itemText(index), Qt.ItemDataRole.ToolTipRole)
        self.chooser.setCurrentIndex(max(self.chooser.findText(chosen), 0))

    def _lay_sliders(self) -> None:
        for part in (*self.sliders.values(), *self._said.values(), *self.findChildren(QLabel, "drift")):
            part.setParent(None)
            part.deleteLater()
        self.sliders, self._said = {}, {}
        for row, name in enumerate(self._spreads):
            label, slider, said = QLabel(name), QSlider(Qt.Orientation.Horizontal), ElidedLabel(stretch=False)
            label.setObjectName("drift")
            label.setProperty("voice", "quiet")
            label.setBuddy(slider)
            slider.setRange(0, _NOTCHES)
            slider.setPageStep(_NOTCHES // 10)
            slider.setAccessibleName(f"plant: {name}")
            slider.valueChanged.connect(lambda notch, name=name: self._on_slider(name, notch))
            said.setFixedWidth(88)
            for column, part in enumerate((label, slider, said)):
                self._grid.addWidget(part, row, column)
            self.sliders[name], self._said[name] = slider, said

    def _notch(self, name: str, value: float) -> int:
        low, high, _, _ = self._spreads[name]
        return round((value - low) / (high - low) * _NOTCHES)

    def _on_slider(self, name: str, notch: int) -> None:
        low, high, nominal, _ = self._spreads[name]
        value = low + notch / _NOTCHES * (high - low)
        # The nominal value is found again although it may lie between two notches.
        value = nominal if notch == self._notch(name, nominal) else float(f"{value:.6g}")
        self.wanted.emit(SetPlant(((name, value),)))

    def _on_chosen(self, _index: int) -> None:
        word = self.chooser.currentText()
        if word in self._plants:
            self.wanted.emit(SetPlant(self._plants[word]))


def drifting(sheet: Sheet) -> tuple[PlantParameter, ...]:
    """Return what drifts in a loop: parameters of its plant, and the lags of actuator and sensor."""
    known = family_of(sheet, 1)[0].values
    lags = [
        PlantParameter(name, known[name], sheet.loop.time_unit, block.spread)
        for name, block in ((ACTUATOR_LAG, sheet.actuator), (SENSOR_LAG, sheet.sensor))
        if name in known
    ]
    return tuple(
        one
        for one in (*parameters_of(sheet.plant), *lags)
        if one.spread is not None and one.spread.low < one.spread.high
    )

"""The named numbers of a plant: value, unit and spread of each; those the formula does not use now are faded."""

from collections.abc import Callable
from dataclasses import replace

from PySide6.QtWidgets import QGraphicsOpacityEffect, QGridLayout, QLabel, QSizePolicy, QVBoxLayout, QWidget

from tuner.model.plant import PlantParameter, Spread
from tuner.session import typed
from tuner.session.document import Document
from tuner.window.editors.field import FaultLine
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.elided import ElidedLabel
from tuner.window.theme import Theme

NAME_WIDTH, VALUE_WIDTH, UNIT_WIDTH, SPREAD_WIDTH = 84, 64, 60, 60
FADED = 0.5


class ParameterRow(QWidget):
    """One named number; `sentence` says what it is where the plant is a physical model."""

    def __init__(self, document: Document, theme: Theme, parameter: PlantParameter, sentence: str = "") -> None:
        super().__init__()
        self._document, self._parameter = document, parameter
        self.name = ElidedLabel(parameter.name)
        self.value = TypedLine(theme, parameter.value, Words(self._read_value, typed.shown), self._take_value)
        self.unit: TypedLine[str] = TypedLine(theme, parameter.unit, Words(str.strip, str), self._take_unit)
        self.spread = TypedLine(
            theme, parameter.spread, Words(self._read_spread, typed.shown_spread), self._take_spread
        )
        self.fault = FaultLine(theme)
        self._fading = QGraphicsOpacityEffect(self)
        self._fading.setOpacity(FADED)
        self._fading.setEnabled(False)
        self.setGraphicsEffect(self._fading)
        self._lay_out()
        self.setToolTip(sentence or f"{parameter.name}: a parameter of the formula.")

    def show_parameter(self, parameter: PlantParameter, *, used: bool, anew: bool) -> None:
        """Show the parameter, faded when the formula does not use it."""
        self._parameter = parameter
        self.value.intake.show_value(parameter.value, anew=anew)
        self.unit.intake.show_value(parameter.unit, anew=anew)
        self.spread.intake.show_value(parameter.spread, anew=anew)
        self._fading.setEnabled(not used)
        self.name.setToolTip("" if used else f"{parameter.name}: not in the formula now; its numbers are kept.")

    @property
    def is_faded(self) -> bool:
        """Whether the row is shown as one that the formula does not use."""
        return self._fading.isEnabled()

    def _lay_out(self) -> None:
        grid = QGridLayout(self)
        grid.setContentsMargins(0, 0, 0, 0)
        grid.setHorizontalSpacing(4)
        grid.setVerticalSpacing(2)
        widths = (
            (self.name, NAME_WIDTH),
            (self.value, VALUE_WIDTH),
            (self.unit, UNIT_WIDTH),
            (self.spread, SPREAD_WIDTH),
        )
        for column, (part, width) in enumerate(widths):
            if column:
                part.setFixedWidth(width)
            grid.addWidget(part, 0, column)
        grid.setColumnStretch(0, 1)
        grid.addWidget(self.fault, 1, 1, 1, 3)
        for what, line in (("value", self.value), ("unit", self.unit), ("spread", self.spread)):
            line.setAccessibleName(f"{what} of {self._parameter.name}")
            line.intake.path = f"plant.parameters.{self._parameter.name}"
            line.intake.faulted.connect(self._say)
            line.intake.left.connect(self._document.release)
        self.spread.setPlaceholderText("none")
        self.spread.setToolTip('How far it may drift: "20 %" to either side, or "3 to 6"; empty: it does not drift.')

    def _say(self, _sentence: str) -> None:
        lines = (self.value, self.unit, self.spread)
        self.fault.say(next((line.intake.sentence for line in lines if line.intake.sentence), ""))

    def _read_value(self, text: str) -> float:
        return typed.number(text, unit=self._parameter.unit)

    def _read_spread(self, text: str) -> Spread | None:
        return typed.spread(text, self._parameter.value)

    def _take_value(self, value: float) -> None:
        from tuner.session.plants import with_value

        self._change(with_value(self._parameter, value), "value")

    def _take_unit(self, unit: str) -> None:
        self._change(replace(self._parameter, unit=unit), "unit")

    def _take_spread(self, spread: Spread | None) -> None:
        self._change(replace(self._parameter, spread=spread), "spread")

    def _change(self, parameter: PlantParameter, what: str) -> None:
        self._document.change_parameter(parameter, label=f"Set the {what} of {parameter.name}")


class ParameterTable(QWidget):
    """Rows for the parameters that a plant has; their names come from the formula."""

    def __init__(self, document: Document, theme: Theme, sentences: Callable[[], dict[str, str]] = dict) -> None:
        super().__init__()
        self._document, self._theme, self._sentences = document, theme, sentences
        self.rows: dict[str, ParameterRow] = {}
        self._head = _head(theme)
        self._column = QVBoxLayout(self)
        self._column.setContentsMargins(0, 4, 0, 0)
        self._column.setSpacing(4)
        self._column.addWidget(self._head)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Fixed)

    def refresh(self, *, anew: bool) -> None:
        """Show the parameters that the document holds."""
        used = self._document.sheet.plant.parameters
        shown = {parameter.name: parameter for parameter in (*used, *self._document.spare_parameters)}
        if anew or list(shown) != list(self.rows):
            self._change_rows(shown, anew=anew)
        names = {parameter.name for parameter in used}
        for name, parameter in shown.items():
            self.rows[name].show_parameter(parameter, used=name in names, anew=anew)
        self._head.setVisible(bool(shown))

    def _change_rows(self, shown: dict[str, PlantParameter], *, anew: bool) -> None:
        before, self.rows = self.rows, {}
        sentences = self._sentences()
        for place, (name, parameter) in enumerate(shown.items(), start=1):
            keep = name in before and not anew
            row = (
                before.pop(name)
                if keep
                else ParameterRow(self._document, self._theme, parameter, sentences.get(name, ""))
            )
            self.rows[name] = row
            self._column.insertWidget(place, row)
        for row in before.values():
            row.hide()
            row.deleteLater()


def _head(theme: Theme) -> QWidget:
    head = QWidget()
    grid = QGridLayout(head)
    grid.setContentsMargins(0, 0, 0, 0)
    grid.setHorizontalSpacing(4)
    widths = (NAME_WIDTH, VALUE_WIDTH, UNIT_WIDTH, SPREAD_WIDTH)
    for column, (word, width) in enumerate(zip(("name", "value", "unit", "spread"), widths, strict=True)):
        label = QLabel(word)
        label.setFont(theme.font("small"))
        label.setProperty("voice", "quiet")
        if column:
            label.setFixedWidth(width)
        grid.addWidget(label, 0, column)
    grid.setColumnStretch(0, 1)
    return head

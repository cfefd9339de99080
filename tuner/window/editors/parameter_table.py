"""The named numbers of a plant: value, unit and spread of each; those the formula does not use now are faded."""

from collections.abc import Callable
from dataclasses import replace

from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import (
    QGraphicsOpacityEffect,
    QGridLayout,
    QHBoxLayout,
    QLabel,
    QSizePolicy,
    QVBoxLayout,
    QWidget,
)

from tuner.model.plant import PlantParameter, Spread
from tuner.session import typed
from tuner.session.document import Document
from tuner.window.editors.columns import GAP, Columns, Widths, columns_for
from tuner.window.editors.field import FaultLine
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.elided import ElidedLabel
from tuner.window.theme import Theme

LEAST_BOX = 56
"""Pixels of a box that holds little or nothing."""

FADED = 0.5


class TableRow(QWidget):
    """A name with three things beside it, or below it."""

    def __init__(self, name: QWidget, value: QWidget, unit: QWidget, spread: QWidget) -> None:
        super().__init__()
        self._parts = (name, value, unit, spread)
        self._columns: Columns | None = None
        self._grid = QGridLayout()
        self._grid.setHorizontalSpacing(GAP)
        self._grid.setVerticalSpacing(2)
        self.column = QVBoxLayout(self)
        self.column.setContentsMargins(0, 0, 0, 0)
        self.column.setSpacing(2)
        self.column.addLayout(self._grid)
        for part in self._parts:
            part.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Fixed)

    def take_columns(self, columns: Columns) -> None:
        """Stand in these columns."""
        if columns == self._columns:
            return
        self._columns = columns
        name, *boxes = self._parts
        for part in self._parts:
            self._grid.removeWidget(part)
        row = 1 if columns.stacked else 0
        self._grid.addWidget(name, 0, row, 1, len(boxes) if columns.stacked else 1)
        for column, box in enumerate(boxes, start=1):
            self._grid.addWidget(box, row, column)
        widths = columns.widths
        for column, width in enumerate((widths.name, widths.value, widths.unit, widths.spread)):
            self._grid.setColumnStretch(column, width)
        self._grid.setContentsMargins(0, row * GAP, 0, 0)


class Head(TableRow):
    """The words above the columns."""

    def __init__(self, theme: Theme) -> None:
        labels = [QLabel(word) for word in ("name", "value", "unit", "spread")]
        super().__init__(*labels)
        self._name = labels[0]
        for label in labels:
            label.setFont(theme.font("small"))
            label.setProperty("voice", "quiet")

    def take_columns(self, columns: Columns) -> None:
        """Stand in these columns; names above their boxes need no word."""
        super().take_columns(columns)
        self._name.setVisible(not columns.stacked)


class ParameterRow(TableRow):
    """One named number; `sentence` says what it is where the plant is a physical model."""

    def __init__(self, document: Document, theme: Theme, parameter: PlantParameter, sentence: str = "") -> None:
        self._document, self._parameter = document, parameter
        self.name = ElidedLabel(parameter.name, stretch=False)
        self.meaning = ElidedLabel(sentence)
        self.value = TypedLine(theme, parameter.value, Words(self._read_value, typed.shown), self._take_value)
        self.unit: TypedLine[str] = TypedLine(theme, parameter.unit, Words(str.strip, str), self._take_unit)
        self.spread = TypedLine(
            theme, parameter.spread, Words(self._read_spread, typed.shown_spread), self._take_spread
        )
        self.fault = FaultLine(theme)
        super().__init__(self._title(theme), self.value, self.unit, self.spread)
        self.column.addWidget(self.fault)
        self._connect()
        self._fading = QGraphicsOpacityEffect(self)
        self._fading.setOpacity(FADED)
        self._fading.setEnabled(False)
        self.setGraphicsEffect(self._fading)
        self.setToolTip(sentence or f"{parameter.name}: a parameter of the formula.")

    def show_parameter(self, parameter: PlantParameter, *, used: bool, anew: bool) -> None:
        """Show the parameter, faded when the formula does not use it."""
        self._parameter = parameter
        self.value.intake.show_value(parameter.value, anew=anew)
        self.unit.intake.show_value(parameter.unit, anew=anew)
        self.spread.intake.show_value(parameter.spread, anew=anew)
        self._fading.setEnabled(not used)
        self.name.setToolTip("" if used else f"{parameter.name}: not in the formula now; its numbers are kept.")

    def take_columns(self, columns: Columns) -> None:
        """Stand in these columns; where the name has a line of its own, its meaning is on it."""
        super().take_columns(columns)
        self.meaning.setVisible(columns.stacked)

    def needs(self) -> Widths:
        """Return the widths that show the row whole, pixels."""
        boxes = (max(line.width_of_text(), LEAST_BOX) for line in (self.value, self.unit, self.spread))
        return Widths(self.name.sizeHint().width(), *boxes)

    @property
    def is_faded(self) -> bool:
        """Whether the row is shown as one that the formula does not use."""
        return self._fading.isEnabled()

    def _title(self, theme: Theme) -> QWidget:
        """Return the name with its meaning behind it."""
        self.meaning.setFont(theme.font("small"))
        self.meaning.setProperty("voice", "quiet")
        title = QWidget()
        line = QHBoxLayout(title)
        line.setContentsMargins(0, 0, 0, 0)
        line.setSpacing(2 * GAP)
        line.addWidget(self.name)
        line.addWidget(self.meaning, 1)
        return title

    def _connect(self) -> None:
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
        self.head = Head(theme)
        self._column = QVBoxLayout(self)
        self._column.setContentsMargins(0, 4, 0, 0)
        self._column.setSpacing(4)
        self._column.addWidget(self.head)
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
        self._lay_out()
        self.head.setVisible(bool(shown))
        for row in self.rows.values():
            row.setVisible(True)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Share another width among the columns."""
        super().resizeEvent(event)
        self._lay_out()

    def _lay_out(self) -> None:
        if not self.rows:
            return
        columns = columns_for([row.needs() for row in self.rows.values()], self.width())
        for row in (self.head, *self.rows.values()):
            row.take_columns(columns)

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

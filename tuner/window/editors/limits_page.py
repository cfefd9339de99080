"""The page of the limits: a bound on any of the measures, with its definition and how the family stands to it."""

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QGridLayout, QLabel, QSizePolicy, QToolButton, QVBoxLayout, QWidget

from tuner.judge.assessment import Assessment, LimitResult
from tuner.model.measures import BY_NAME, MEASURES, Measure
from tuner.session import typed
from tuner.session.document import Document
from tuner.session.fields import unit_of, with_limit, without_limit
from tuner.session.typed import NOT_NEGATIVE
from tuner.window.editors.chooser import Chooser
from tuner.window.editors.field import FaultLine, Note, Page, unit_label
from tuner.window.editors.intake import Words
from tuner.window.editors.typed_line import TypedLine
from tuner.window.theme import Theme

FIRST_LIMIT = 1.0
"""The limit that a new line begins with while the measure's value is not known."""


class LimitRow(QWidget):
    """One line of the acceptance sheet."""

    def __init__(self, document: Document, theme: Theme, measure: Measure, limit: float) -> None:
        super().__init__()
        self._document, self._measure = document, measure
        self.line = TypedLine(theme, limit, Words(self._read, typed.shown), self._take)
        self.line.setAccessibleName(f"limit of {measure.label}")
        self.line.intake.path = f"limits.{measure.name}"
        self.line.intake.left.connect(document.release)
        self.fault = FaultLine(theme)
        self.line.intake.faulted.connect(self.fault.say)
        self.unit = unit_label()
        self.remove = QToolButton()
        self.remove.setText("\u00d7")
        self.remove.setAccessibleName(f"remove the limit of {measure.label}")
        self.remove.setToolTip(f"Remove the limit of {measure.label}")
        self.remove.clicked.connect(self._remove)
        self.sense = QLabel("at least" if measure.at_least else "at most")
        self.standing = Note(theme)
        self.definition = Note(theme, measure.sentence)
        self._lay_out()

    def show_limit(self, limit: float, result: LimitResult | None, *, anew: bool) -> None:
        """Show the limit, and how the family stands to it when that is known."""
        self.line.intake.show_value(limit, anew=anew)
        unit = unit_of(self._measure, self._document.sheet)
        self.unit.setText(unit)
        self.standing.say(_standing(result, unit) if result is not None and result.limit == limit else "")

    def _lay_out(self) -> None:
        name = QLabel(self._measure.label)
        name.setWordWrap(True)
        name.setSizePolicy(QSizePolicy.Policy.Ignored, QSizePolicy.Policy.Preferred)
        name.setToolTip(self._measure.sentence)
        self.line.setFixedWidth(64)
        self.sense.setProperty("voice", "quiet")
        self.sense.setFixedWidth(48)
        grid = QGridLayout(self)
        grid.setContentsMargins(0, 4, 0, 0)
        grid.setHorizontalSpacing(4)
        grid.setVerticalSpacing(2)
        for column, part in enumerate((name, self.sense, self.line, self.unit, self.remove)):
            grid.addWidget(part, 0, column)
        for row, part in enumerate((self.fault, self.standing, self.definition), start=1):
            grid.addWidget(part, row, 0, 1, 5)
        grid.setColumnStretch(0, 1)
        self.setSizePolicy(QSizePolicy.Policy.Preferred, QSizePolicy.Policy.Fixed)

    def _read(self, text: str) -> float:
        return typed.number(text, NOT_NEGATIVE, unit_of(self._measure, self._document.sheet))

    def _take(self, limit: float) -> None:
        name = self._measure.name
        changed = with_limit(self._document.sheet, name, limit)
        self._document.edit(changed, label=f"Limit the {self._measure.label}", merge_key=f"limits.{name}")

    def _remove(self) -> None:
        changed = without_limit(self._document.sheet, self._measure.name)
        label = f"Remove the limit of {self._measure.label}"
        self.fault.attempt(lambda: self._document.edit(changed, label=label))


class LimitsPage(Page):
    """The limits of the sheet, and a chooser to add one."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__()
        self._document, self._theme = document, theme
        self._assessment: Assessment | None = None
        self.rows: dict[str, LimitRow] = {}
        self._list = QVBoxLayout()
        self._list.setSpacing(4)
        self.column.insertLayout(0, self._list)
        self.adder = Chooser(theme, "add a limit")
        self.adder.setMaxVisibleItems(len(MEASURES) + 1)
        self.adder.activated.connect(self._add)
        self.add(self.adder)
        self.fault = FaultLine(theme)
        self.add(self.fault)

    def refresh(self, *, anew: bool) -> None:
        """Show the limits of the document."""
        limits = dict(self._document.sheet.limits)
        if list(limits) != list(self.rows):
            self._change_rows(limits)
        results = {result.measure: result for result in self._assessment.limits} if self._assessment else {}
        for name, limit in limits.items():
            self.rows[name].show_limit(limit, results.get(name), anew=anew)

    def show_assessment(self, assessment: Assessment) -> None:
        """Show how the family stands to each limit."""
        self._assessment = assessment
        self.refresh(anew=False)

    def _change_rows(self, limits: dict[str, float]) -> None:
        before, self.rows = self.rows, {}
        for place, (name, limit) in enumerate(limits.items()):
            known = name in before
            row = before.pop(name) if known else LimitRow(self._document, self._theme, BY_NAME[name], limit)
            self.rows[name] = row
            self._list.insertWidget(place, row)
            row.setVisible(True)
        for row in before.values():
            row.hide()
            row.deleteLater()
        self._fill_adder()

    def _fill_adder(self) -> None:
        self.adder.clear()
        self.adder.addItem("Add a limit ...")
        for measure in MEASURES:
            if measure.name not in self.rows:
                self.adder.addItem(measure.label, measure.name)
                self.adder.setItemData(self.adder.count() - 1, measure.sentence, Qt.ItemDataRole.ToolTipRole)

    def _add(self, index: int) -> None:
        name = self.adder.itemData(index)
        self.adder.setCurrentIndex(0)
        if name is None:
            return
        changed = with_limit(self._document.sheet, name, self._first_limit(name))
        label = f"Add a limit of {BY_NAME[name].label}"
        if not self.fault.attempt(lambda: self._document.edit(changed, label=label)):
            return
        line = self.rows[name].line
        line.setFocus(Qt.FocusReason.OtherFocusReason)
        line.selectAll()

    def _first_limit(self, name: str) -> float:
        """Return what a new limit begins with: the worst value of the family, shortened, where it is known."""
        worst = self._assessment.worst.get(name) if self._assessment else None
        value = worst.value if worst else None
        finite = value is not None and abs(value) < float("inf")
        return float(f"{abs(value or 0.0):.2g}") if finite and value else FIRST_LIMIT


def _standing(result: LimitResult, unit: str) -> str:
    value = "none" if result.value is None else f"{result.value:.4g} {unit}".strip()
    return f"{'Met' if result.met else 'Missed'}: worst {value} ({result.plant})"

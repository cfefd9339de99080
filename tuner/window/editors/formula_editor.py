"""The plant as a formula: checked as it is typed, its parameters found by their names."""

from tuner.model.plant import ExpressionPlant
from tuner.session.document import Document
from tuner.window.editors.field import FaultLine, Page
from tuner.window.editors.intake import Words
from tuner.window.editors.parameter_table import ParameterTable
from tuner.window.editors.typed_text import TypedText
from tuner.window.theme import Theme


class FormulaEditor(Page):
    """The formula, what is wrong with it under the character to blame, and the table of its parameters."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__()
        self._document = document
        self.text: TypedText[str] = TypedText(theme, self._held(), Words(str, str), self._take, lines=3)
        self.text.setAccessibleName("formula of the plant")
        self.text.setToolTip(
            "The plant as ordinary mathematics in s, with names for its parameters:\n"
            "gain exp(-delay s) / ((lag s + 1)(tail s + 1))"
        )
        self.text.intake.path = "plant.expression"
        self.text.intake.left.connect(document.release)
        self.fault = FaultLine(theme)
        self.text.intake.faulted.connect(self.fault.say)
        self.table = ParameterTable(document, theme)
        self.add(self.text)
        self.add(self.fault)
        self.add(self.table, self.table)

    def refresh(self, *, anew: bool) -> None:
        """Show the formula of the document."""
        self.text.intake.show_value(self._held(), anew=anew)
        super().refresh(anew=anew)

    def _held(self) -> str:
        plant = self._document.sheet.plant
        return plant.expression if isinstance(plant, ExpressionPlant) else ""

    def _take(self, formula: str) -> None:
        self._document.change_formula(formula, merge_key="formula")

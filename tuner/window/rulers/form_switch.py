"""The switch between the forms of the gains."""

from PySide6.QtWidgets import QHBoxLayout, QLabel, QWidget

from tuner.model.controller import Form
from tuner.model.parameters import find
from tuner.session.document import Document
from tuner.window.editors.segments import Segments
from tuner.window.theme import Theme


class FormSwitch(QWidget):
    """Gives the same gains in another form, and says why when they have none."""

    def __init__(self, document: Document, theme: Theme, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document = document
        parameter = find("controller.form")
        self.segments = Segments(parameter.choices, theme, self._choose)
        self.segments.setAccessibleName("form of the gains")
        self.sentence = QLabel(wordWrap=True)
        self.sentence.setFont(theme.font("small"))
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(8)
        row.addWidget(self.segments)
        row.addWidget(self.sentence, 1)
        self.setToolTip(f"{parameter.sentence} Switching converts the gains; the loop stays the same.")
        self.refresh()

    def refresh(self) -> None:
        """Show the document's form, or why another one was refused."""
        self.segments.show_choice(self._document.sheet.controller.form)
        refusal = self._document.refusal
        self.sentence.setText(refusal[:1].upper() + refusal[1:])

    def _choose(self, form: str) -> None:
        chosen: dict[str, Form] = {"parallel": "parallel", "standard": "standard", "series": "series"}
        self._document.set_form(chosen[form])

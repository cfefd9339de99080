"""The page of the plant, in any of its five forms."""

from PySide6.QtWidgets import QPushButton, QWidget

from tuner.session.document import Document
from tuner.session.plant_forms import PLANT_FORMS, PlantForm
from tuner.window.editors.chooser import Chooser
from tuner.window.editors.field import Note, Page
from tuner.window.editors.formula_editor import FormulaEditor
from tuner.window.editors.number_editors import coefficient_editor, state_space_editor, zero_pole_editor
from tuner.window.editors.physics_editor import PhysicsEditor
from tuner.window.theme import Theme


class PlantPage(Page):
    """The chooser of the form, and the editor of the present one; what was typed in the others is kept."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__()
        self._document = document
        self.form = Chooser(theme, "form of the plant")
        self.form.setToolTip("How the plant is given. Switching converts the nominal plant where that is possible.")
        self.form.addItems([form.capitalize() for form in PLANT_FORMS])
        self.form.activated.connect(self._choose)
        self.remark = Note(theme)
        self.bring_back = QPushButton("Bring back what was typed here")
        self.bring_back.clicked.connect(document.bring_back_plant)
        self.add(self.form)
        self.add(self.remark)
        self.add(self.bring_back)
        self.editors: dict[PlantForm, Page] = {
            "formula": FormulaEditor(document, theme),
            "coefficients": coefficient_editor(document, theme),
            "zeros and poles": zero_pole_editor(document, theme),
            "state space": state_space_editor(document, theme),
            "physics": PhysicsEditor(document, theme),
        }
        for editor in self.editors.values():
            editor.column.setContentsMargins(0, 4, 0, 0)
            self.add(editor)

    def refresh(self, *, anew: bool) -> None:
        """Show the plant of the document in its form."""
        form = self._document.plant_form
        self.form.setCurrentIndex(PLANT_FORMS.index(form))
        self.remark.say(self._document.remark)
        self.bring_back.setVisible(self._document.has_typed_plant)
        for name, editor in self.editors.items():
            editor.setVisible(name == form)
        self.editors[form].refresh(anew=anew)

    def shown_editor(self) -> QWidget:
        """Return the editor of the present form."""
        return self.editors[self._document.plant_form]

    def _choose(self, index: int) -> None:
        self._document.set_plant_form(PLANT_FORMS[index])

"""The plant as a physical model: chosen by name, given by masses, volumes and resistances."""

from tuner.model.physics import PHYSICS
from tuner.model.plant import PhysicsPlant
from tuner.session.document import Document
from tuner.window.editors.chooser import Chooser
from tuner.window.editors.field import FaultLine, Note, Page
from tuner.window.editors.parameter_table import ParameterTable
from tuner.window.theme import Theme


class PhysicsEditor(Page):
    """The chooser of the model, its balance in a sentence, its quantities and the formula that they make."""

    def __init__(self, document: Document, theme: Theme) -> None:
        super().__init__()
        self._document = document
        self.model = Chooser(theme, "physical model")
        self.model.addItems(list(PHYSICS))
        self.model.activated.connect(self._choose)
        self.fault = FaultLine(theme)
        self.sentence = Note(theme)
        self.formula = Note(theme)
        self.table = ParameterTable(document, theme, self._sentences)
        self.add(self.model)
        self.add(self.fault)
        self.add(self.sentence)
        self.add(self.table, self.table)
        self.add(self.formula)

    def refresh(self, *, anew: bool) -> None:
        """Show the physical model of the document."""
        plant = self._document.sheet.plant
        if not isinstance(plant, PhysicsPlant):
            return
        model = PHYSICS[plant.physics]
        self.model.setCurrentText(model.name)
        self.sentence.say(model.sentence)
        self.formula.say(f"Formula: {model.expression}")
        super().refresh(anew=anew)

    def _sentences(self) -> dict[str, str]:
        model = PHYSICS.get(self.model.currentText())
        return {one.name: one.sentence for one in model.parameters} if model else {}

    def _choose(self, index: int) -> None:
        from tuner.session.plants import with_physics

        name = self.model.itemText(index)
        plant = with_physics(self._document.sheet.plant, name)
        self.fault.attempt(lambda: self._document.change_plant(plant, label=f"Choose {name}"))
        self.refresh(anew=False)
